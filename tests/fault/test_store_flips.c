/* test_store_flips.c: random bytes of a good database are flipped: right data or a message.
**
** PF_FAULT_FULL set: 2,000 flips; else 250. Built with PF_SANITIZE=address, also no byte is read that
** should not be.
*/
#include "fault/store_load.h"
#include "unit/store_support.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#define IMPORTS 12
#define PARTS (IMPORTS * LOAD_PARTS)

typedef struct image {
    unsigned char *bytes;
    size_t length;
} image;

static image read_image(const char *path)
{
    image read = {calloc(1, 1 << 23), 0};
    FILE *file = fopen(path, "rb");
    assert_non_null(file);
    read.length = fread(read.bytes, 1, 1 << 23, file);
    fclose(file);
    return read;
}

static void write_image(const char *path, const image *from)
{
    FILE *file = fopen(path, "wb");
    assert_non_null(file);
    assert_int_equal(fwrite(from->bytes, 1, from->length, file), from->length);
    fclose(file);
}

static pf_status step_over(void *context, const pf_history_step *step, pf_error *error)
{
    (void)context;
    (void)error;
    assert_non_null(step->now);
    return PF_OK;
}

/* A status that is not PF_OK must come with words; both are allowed. */
static void message_or_right(pf_status status, pf_error *error)
{
    assert_true(status == PF_OK || error->text[0]);
    pf_error_clear(error);
}

/* What is there must be as it was imported: `most` parts, or `least`. */
static void read_everything(const char *path, const char *copy, unsigned most, unsigned least)
{
    pf_store *store;
    pf_error error = {0};
    char hash[PF_HASH_ROOM];
    unsigned parts;
    size_t findings;
    pf_status status = pf_store_open(path, PF_STORE_READ, &store, &error);
    message_or_right(status, &error);
    if (status != PF_OK) return;
    status = load_check(store, NULL, 0, &parts, &error);
    if (status == PF_BAD_INPUT) print_message("%s\n", error.text);
    assert_int_not_equal(status, PF_BAD_INPUT);
    if (status == PF_OK) assert_true(parts == most || parts == least);
    message_or_right(status, &error);
    message_or_right(pf_store_content_hash(store, hash, &error), &error);
    message_or_right(pf_store_history(store, "3-1", step_over, NULL, &error), &error);
    message_or_right(pf_store_verify(store, NULL, NULL, &findings, &error), &error);
    status = pf_store_backup(store, copy, &error);
    assert_true(status != PF_OK || remove(copy) == 0);
    message_or_right(status, &error);
    pf_store_close(store);
}

static void write_something(const char *path)
{
    pf_store *store;
    pf_error error = {0};
    int64_t number;
    bool repeated;
    pf_review_facts review = {
        .author = "eve", .time = "2025-03-04T09:00:00Z", .accept = true, .why = "read"};
    pf_import_facts facts = {.author = "eve", .time = "2025-03-04T09:00:00Z"};
    pf_status status = pf_store_open(path, PF_STORE_WRITE, &store, &error);
    message_or_right(status, &error);
    if (status != PF_OK) return;
    message_or_right(pf_store_review(store, "5-2", &review, &error), &error);
    message_or_right(pf_store_undo(store, IMPORTS, &facts, &number, &error), &error);
    message_or_right(load_import(store, IMPORTS - 1, NULL, &number, &repeated, &error), &error);
    pf_store_close(store);
}

static void test_a_flip_gives_right_data_or_a_message(void **state)
{
    bench *on = *state;
    char path[200], copy[200];
    int64_t number;
    bool repeated;
    for (unsigned i = 0; i < IMPORTS; i++)
        assert_int_equal(load_import(on->store, i, NULL, &number, &repeated, &on->error), PF_OK);
    pf_store_close(on->store);
    on->store = NULL;
    snprintf(path, sizeof path, "%s/flipped.db", on->folder);
    snprintf(copy, sizeof copy, "%s/copy.db", on->folder);
    image good = read_image(on->path);
    srand(20250303);
    for (unsigned i = 0; i < load_count(250, 2000); i++) {
        size_t at = ((size_t)rand() << 16 ^ (size_t)rand()) % good.length;
        unsigned char flip = (unsigned char)(1 + rand() % 255);
        good.bytes[at] ^= flip;
        write_image(path, &good);
        good.bytes[at] ^= flip;
        read_everything(path, copy, PARTS, PARTS);
        write_something(path); /* takes one import back and makes it again; either may fail */
        if (i % 8 == 0) read_everything(path, copy, PARTS, PARTS - LOAD_PARTS);
    }
    free(good.bytes);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(test_a_flip_gives_right_data_or_a_message, bench_up,
                                        bench_down),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
