/* store_support.h: a database in a folder of its own, and changes to put into it. */
#ifndef TEST_STORE_SUPPORT_H
#define TEST_STORE_SUPPORT_H

#include <passfet/store.h>

/* One test's database. */
typedef struct bench {
    char folder[128];
    char path[160];
    pf_store *store;
    pf_error error;
} bench;

/* Fixture: *state becomes a bench with an empty, open database; torn down, the folder is removed.
 */
int bench_up(void **state);
int bench_down(void **state);

/* Closes and opens again. */
void bench_reopen(bench *on, pf_store_mode mode);

/* A change that states a whole part: ratings, two gate drives, SOA with a DC line, Zth. seed varies
** the numbers; maker may be NULL. */
void change_make(pf_part_change *change, const char *name, const char *maker, unsigned seed);

/* A change that states one rating, by its CSV name. */
void change_rating(pf_part_change *change, const char *name, const char *csv, double value);

/* States one text, by its CSV name. */
void change_text(pf_part_change *change, const char *csv, const char *text);

/* One import of the changes by author at time; returns its number. Clears the changes. */
int64_t import_all(bench *on, const char *author, const char *time, pf_part_change *change,
                   size_t count);

/* Begins an import without key. */
void import_open(bench *on, const char *author, const char *time, const char *why);

/* One part as it is now. */
void find_part(bench *on, const char *name, pf_stored_part *stored);

#endif
