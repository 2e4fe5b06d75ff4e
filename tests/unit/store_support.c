/* store_support.c: a database in a folder of its own, and changes to put into it. */
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <dirent.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

int bench_up(void **state)
{
    bench *on = calloc(1, sizeof *on);
    const char *temporary = getenv("TMPDIR");
    snprintf(on->folder, sizeof on->folder, "%.90s/passfet-XXXXXX", temporary ? temporary : "/tmp");
    if (!mkdtemp(on->folder)) return -1;
    snprintf(on->path, sizeof on->path, "%s/team.db", on->folder);
    *state = on;
    if (pf_store_open(on->path, PF_STORE_CREATE, &on->store, &on->error) == PF_OK) return 0;
    print_error("%s\n", on->error.text);
    return -1;
}

int bench_down(void **state)
{
    bench *on = *state;
    pf_store_close(on->store);
    DIR *folder = opendir(on->folder);
    for (struct dirent *item; folder && (item = readdir(folder));) {
        char path[512];
        snprintf(path, sizeof path, "%s/%s", on->folder, item->d_name);
        if (item->d_name[0] != '.') remove(path);
    }
    if (folder) closedir(folder);
    rmdir(on->folder);
    free(on);
    return 0;
}

void bench_reopen(bench *on, pf_store_mode mode)
{
    pf_store_close(on->store);
    on->store = NULL;
    pf_error_clear(&on->error);
    assert_int_equal(pf_store_open(on->path, mode, &on->store, &on->error), PF_OK);
}

static void give_rating(pf_part_change *change, const char *csv, double value)
{
    size_t count, i = 0;
    const pf_rating_field *field = pf_rating_fields(&count);
    while (i < count && strcmp(field[i].csv, csv) != 0)
        i++;
    assert_true(i < count);
    *pf_part_rating(&change->part, &field[i]) = value;
    change->ratings_given |= UINT64_C(1) << i;
}

void change_text(pf_part_change *change, const char *csv, const char *text)
{
    size_t count, i = 0;
    const pf_text_field *field = pf_text_fields(&count);
    while (i < count && strcmp(field[i].csv, csv) != 0)
        i++;
    assert_true(i < count);
    assert_int_equal(pf_part_set_text(&change->part, &field[i], text), PF_OK);
    change->texts_given |= UINT64_C(1) << i;
}

static void give_curves(pf_part_change *change, unsigned seed)
{
    pf_soa_point soa[12];
    pf_zth_point zth[8];
    const double pulse_s[3] = {1e-3, 1e-2, PF_DC};
    for (int i = 0; i < 12; i++)
        soa[i] = (pf_soa_point){25, pulse_s[i / 4], 1 + 15 * (i % 4),
                                (100.0 + seed) / (1 + i / 4) / (1 + 2 * (i % 4))};
    for (int i = 0; i < 8; i++)
        zth[i] = (pf_zth_point){1e-5 * (1 << (2 * i)), 0.01 * (i + 1) + seed * 1e-6};
    assert_int_equal(pf_part_set_soa(&change->part, soa, 12), PF_OK);
    assert_int_equal(pf_part_set_zth(&change->part, PF_JUNCTION_CASE, zth, 8), PF_OK);
    change->soa_given = change->thermal_given[PF_JUNCTION_CASE] = true;
}

void change_make(pf_part_change *change, const char *name, const char *maker, unsigned seed)
{
    pf_part_change_init(change);
    change_text(change, "part", name);
    if (maker) change_text(change, "maker", maker);
    change_text(change, "package", "D2PAK");
    change->part.polarity = seed % 7 == 6 ? PF_P_CHANNEL : PF_N_CHANNEL;
    change->polarity_given = true;
    give_rating(change, "vds_max", 60 + seed % 41);
    give_rating(change, "vgs_max", 20);
    give_rating(change, "tj_max", 175);
    give_rating(change, "id_cont", 80.5 + seed % 100);
    give_rating(change, "rth_jc", 0.45 + seed % 10 * 0.01);
    assert_int_equal(pf_part_set_rdson(&change->part, 10, 0.0047 + seed % 9 * 1e-4), PF_OK);
    assert_int_equal(pf_part_set_rdson(&change->part, 4.5, 0.0062 + seed % 9 * 1e-4), PF_OK);
    change->rdson_given = true;
    give_curves(change, seed);
}

void change_rating(pf_part_change *change, const char *name, const char *csv, double value)
{
    pf_part_change_init(change);
    change_text(change, "part", name);
    give_rating(change, csv, value);
}

void import_open(bench *on, const char *author, const char *time, const char *why)
{
    pf_import_facts facts = {.author = author, .time = time, .why = why};
    int64_t already;
    assert_int_equal(pf_store_import_begin(on->store, &facts, &already, &on->error), PF_OK);
}

int64_t import_all(bench *on, const char *author, const char *time, pf_part_change *change,
                   size_t count)
{
    int64_t number = 0;
    pf_import_effect effect;
    pf_part merged;
    pf_part_init(&merged);
    import_open(on, author, time, NULL);
    for (size_t i = 0; i < count; i++) {
        pf_status status =
            pf_store_import_part(on->store, &change[i], &merged, &effect, &on->error);
        if (status != PF_OK) print_message("%s\n", on->error.text);
        assert_int_equal(status, PF_OK);
        pf_part_change_clear(&change[i]);
    }
    assert_int_equal(pf_store_import_commit(on->store, &number, &on->error), PF_OK);
    pf_part_clear(&merged);
    return number;
}

void find_part(bench *on, const char *name, pf_stored_part *stored)
{
    pf_status status = pf_store_part_find(on->store, name, NULL, stored, &on->error);
    if (status != PF_OK) print_message("%s\n", on->error.text);
    assert_int_equal(status, PF_OK);
}
