/* store_driver.c: one import, or one check, as a process of its own, for kill_at_calls.sh.
**
**   store_driver import DB TAG   prints the number; exit 0, or 4 with the message
**   store_driver check DB        prints the tags that are there, each whole; exit 1 where not
*/
#include "fault/store_load.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define TAGS 64

static int import(const char *path, unsigned tag)
{
    pf_error error = {0};
    int64_t number = 0;
    bool repeated;
    pf_store *store;
    pf_status status = pf_store_open(path, PF_STORE_CREATE, &store, &error);
    if (status == PF_OK) status = load_import(store, tag, NULL, &number, &repeated, &error);
    pf_store_close(store);
    if (status == PF_OK)
        printf("%lld\n", (long long)number);
    else
        fprintf(stderr, "%s\n", error.text);
    return status == PF_OK ? 0 : 4;
}

static int check(const char *path)
{
    pf_error error = {0};
    unsigned seen[TAGS] = {0}, parts;
    pf_store *store;
    pf_status status = pf_store_open(path, PF_STORE_WRITE, &store, &error);
    if (status == PF_OK) status = load_check(store, seen, TAGS, &parts, &error);
    bool sound = status == PF_OK && load_sound(store);
    pf_store_close(store);
    if (status != PF_OK) fprintf(stderr, "%s\n", error.text);
    for (unsigned tag = 0; tag < TAGS; tag++) {
        if (seen[tag] % LOAD_PARTS) sound = false;
        if (seen[tag]) printf("%u\n", tag);
    }
    return sound ? 0 : 1;
}

int main(int count, char **argument)
{
    if (count == 4 && strcmp(argument[1], "import") == 0)
        return import(argument[2], (unsigned)strtoul(argument[3], NULL, 10));
    if (count == 3 && strcmp(argument[1], "check") == 0) return check(argument[2]);
    fputs("store_driver import DB TAG | check DB\n", stderr);
    return 2;
}
