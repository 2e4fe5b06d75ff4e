/* store_load.c: imports that can be recognised afterwards, for tests with several processes. */
#include "fault/store_load.h"

#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

unsigned load_count(unsigned quick, unsigned full)
{
    return getenv("PF_FAULT_FULL") ? full : quick;
}

pf_store *load_open(const char *path, pf_store_mode mode)
{
    pf_store *store;
    pf_error error = {0};
    if (pf_store_open(path, mode, &store, &error) != PF_OK) fprintf(stderr, "%s\n", error.text);
    return store;
}

static bool give_text(pf_part *part, size_t field, const char *text)
{
    size_t count;
    return pf_part_set_text(part, &pf_text_fields(&count)[field], text) == PF_OK;
}

/* The part that tag and index stand for. */
static bool make_part(pf_part *part, unsigned tag, unsigned index)
{
    char name[32];
    pf_soa_point soa[20];
    pf_zth_point zth[12];
    snprintf(name, sizeof name, "%u-%u", tag, index);
    part->polarity = PF_N_CHANNEL;
    part->vds_max_V = 60 + tag % 40;
    part->tj_max_degC = 175;
    part->price = tag;
    for (unsigned i = 0; i < 20; i++)
        soa[i] = (pf_soa_point){25, i < 10 ? 1e-3 : PF_DC, 1 + i % 10, (tag + 1.0) / (i + 1)};
    for (unsigned i = 0; i < 12; i++)
        zth[i] = (pf_zth_point){1e-5 * (i + 1), 0.01 * (i + 1) + tag * 1e-9};
    return give_text(part, 0, name) && pf_part_set_rdson(part, 10, 0.001 + index * 1e-4) == PF_OK &&
           pf_part_set_soa(part, soa, 20) == PF_OK &&
           pf_part_set_zth(part, PF_JUNCTION_CASE, zth, 12) == PF_OK;
}

static bool make_change(pf_part_change *change, unsigned tag, unsigned index)
{
    pf_part_change_init(change);
    change->texts_given = 1;
    change->ratings_given = UINT64_MAX;
    change->polarity_given = change->rdson_given = change->soa_given = true;
    change->thermal_given[PF_JUNCTION_CASE] = true;
    return make_part(&change->part, tag, index);
}

pf_status load_import(pf_store *store, unsigned tag, const char *key, int64_t *number,
                      bool *repeated, pf_error *error)
{
    pf_import_facts facts = {.author = "load", .time = "2025-03-03T09:00:00Z", .key = key};
    pf_part merged;
    pf_import_effect effect;
    pf_status status = pf_store_import_begin(store, &facts, number, error);
    *repeated = *number != 0;
    if (status != PF_OK || *repeated) return status;
    pf_part_init(&merged);
    for (unsigned i = 0; i < LOAD_PARTS && status == PF_OK; i++) {
        pf_part_change change;
        if (make_change(&change, tag, i))
            status = pf_store_import_part(store, &change, &merged, &effect, error);
        else
            status = pf_error_set(error, PF_NO_MEMORY, "out of memory");
        pf_part_change_clear(&change);
    }
    pf_part_clear(&merged);
    if (status == PF_OK) return pf_store_import_commit(store, number, error);
    pf_store_import_rollback(store);
    return status;
}

static pf_status check_part(const pf_part *part, unsigned *imports, unsigned tags, pf_error *error)
{
    pf_part expected;
    unsigned tag, index;
    pf_part_init(&expected);
    bool named = sscanf(part->name, "%u-%u", &tag, &index) == 2;
    bool made = named && make_part(&expected, tag, index);
    bool right = made && pf_part_equal(part, &expected);
    pf_part_clear(&expected);
    if (named && !made) return pf_error_set(error, PF_NO_MEMORY, "out of memory");
    if (!right) return pf_error_set(error, PF_BAD_INPUT, "part %s is not as imported", part->name);
    if (imports && tag < tags) imports[tag]++;
    return PF_OK;
}

pf_status load_check(pf_store *store, unsigned *imports, unsigned tags, unsigned *parts,
                     pf_error *error)
{
    pf_cursor *cursor;
    pf_stored_part stored;
    bool more = true;
    *parts = 0;
    pf_stored_part_init(&stored);
    pf_status status = pf_cursor_open(store, &(pf_query){0}, &cursor, error);
    while (status == PF_OK && (status = pf_cursor_next(cursor, &stored, &more, error)) == PF_OK &&
           more) {
        status = check_part(&stored.part, imports, tags, error);
        ++*parts;
    }
    pf_cursor_close(cursor);
    pf_stored_part_clear(&stored);
    return status;
}

static void print_finding(void *context, const char *sentence)
{
    (void)context;
    fprintf(stderr, "%s\n", sentence);
}

bool load_sound(pf_store *store)
{
    pf_error error = {0};
    size_t findings;
    pf_status status = pf_store_verify(store, print_finding, NULL, &findings, &error);
    if (status != PF_OK) fprintf(stderr, "%s\n", error.text);
    return status == PF_OK && findings == 0;
}
