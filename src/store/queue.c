/* queue.c: waiting for a lock.
**
** SQLite's own waiting asks ever more seldom, so that under steady contention whoever comes last is
** served first: with 8 writers one was seen to wait 30 s in vain. Here the longer a process waits the
** oftener it asks, which makes the queue nearly fair.
*/
#include "store/database.h"

#include <time.h>
#include <unistd.h>

static int64_t now_ms(void)
{
    struct timespec time;
    clock_gettime(CLOCK_MONOTONIC, &time);
    return (int64_t)time.tv_sec * 1000 + time.tv_nsec / 1000000;
}

/* From 8 ms at first down to 1 ms after 100 ms, or up to half of that: the number of the process
** spreads those that were woken together. */
static long pause_us(int64_t waited_ms)
{
    long longest = waited_ms >= 100 ? 1000 : 8000 - 70 * (long)waited_ms;
    return longest / 2 + (long)getpid() * 7919 % (longest / 2);
}

static int wait_for_lock(void *context, int tries)
{
    pf_store *store = context;
    int64_t now = now_ms();
    if (tries == 0) store->waiting_since_ms = now;
    int64_t waited_ms = now - store->waiting_since_ms;
    if (waited_ms >= store->wait_ms) return 0;
    struct timespec pause = {0, pause_us(waited_ms) * 1000};
    nanosleep(&pause, NULL);
    return 1;
}

void pf_store_queue(pf_store *store)
{
    sqlite3_busy_handler(store->db, wait_for_lock, store);
}
