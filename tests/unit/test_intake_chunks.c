/* Claims about reading in pieces: the same rows, lines and faults come out however the text is cut. */
#include "intake/table.h"
#include "support/claims.h"
#include "support/lines.h"
#include "support/pollute.h"

#include "base/buffer.h"

#include <stdlib.h>
#include <string.h>

static pf_status log_row(void *context, const pf_row *row)
{
    pf_buffer *log = context;
    pf_buffer_print(log, "%zu%s:", row->line, row->header ? "h" : "");
    for (size_t i = 0; i < row->count; i++)
        pf_buffer_print(log, "[%zu %zu %s]", row->cell[i].line, row->cell[i].length,
                        row->cell[i].text);
    pf_buffer_print(log, "%s\n", row->wrong ? row->wrong : "");
    return PF_OK;
}

/* Everything that reading the text says, read in pieces of `size` bytes. */
static void log_text(const char *text, size_t length, size_t size, pf_buffer *log)
{
    pf_table *table = pf_table_new(PF_UTF_8, log_row, log);
    pf_status status = PF_OK;
    assert_non_null(table);
    for (size_t at = 0; at < length && status == PF_OK; at += size) {
        size_t piece = length - at < size ? length - at : size;
        char *exact = malloc(piece); /* so that a read beyond the piece is seen */
        assert_non_null(exact);
        memcpy(exact, text + at, piece);
        status = pf_table_feed(table, exact, piece);
        free(exact);
    }
    if (status == PF_OK) status = pf_table_end(table);
    const pf_table_fault *fault = pf_table_fault_of(table);
    pf_buffer_print(log, "%s %zu [%s] %s %zu\n", pf_status_text(status), fault->line, fault->text,
                    fault->wrong, pf_table_lines(table));
    pf_table_free(table);
}

typedef struct comparison {
    size_t texts, differences;
} comparison;

static void compare(comparison *done, const char *text, size_t length, const char *what)
{
    static const size_t sizes[] = {1, 2, 3, 5, 7, 16, 61, 1024, 65536};
    pf_buffer whole, pieces;
    pf_buffer_init(&whole, 1 << 24);
    pf_buffer_init(&pieces, 1 << 24);
    log_text(text, length, length ? length : 1, &whole);
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; i++) {
        pf_buffer_reset(&pieces);
        log_text(text, length, sizes[i], &pieces);
        if (strcmp(pf_buffer_string(&whole), pf_buffer_string(&pieces)) == 0) continue;
        done->differences++;
        print_message("%s in pieces of %zu:\n%sinstead of\n%s", what, sizes[i],
                      pf_buffer_string(&pieces), pf_buffer_string(&whole));
    }
    done->texts++;
    pf_buffer_clear(&whole);
    pf_buffer_clear(&pieces);
}

static void compare_polluted(void *context, const polluted *file)
{
    compare(context, file->text, file->length, file->what);
}

static void test_polluted_files_read_alike_in_pieces_of_any_size(void **state)
{
    static const struct {
        const char *path;
        char delimiter;
    } clean[] = {{PF_TEST_DATA "/unit/clean_soa.csv", ';'},
                 {PF_TEST_DATA "/unit/clean_parts.csv", ','}};
    comparison done = {0, 0};
    char text[4096];
    (void)state;
    for (size_t i = 0; i < 2; i++) {
        FILE *file = fopen(clean[i].path, "rb");
        assert_non_null(file);
        size_t length = fread(text, 1, sizeof text, file);
        fclose(file);
        pollute(text, length, clean[i].delimiter, compare_polluted, &done);
    }
    print_message("%zu texts\n", done.texts);
    assert_int_equal(done.differences, 0);
}

static void test_nasty_files_read_alike_in_pieces_of_any_size(void **state)
{
    pf_lines lines;
    comparison done = {0, 0};
    (void)state;
    lines_open(&lines, PF_TEST_DATA "/unit/nasty_files.tsv");
    while (lines_next(&lines, 4))
        compare(&done, lines.field[2], lines.length[2], lines.field[0]);
    lines_close(&lines);
    assert_true(done.texts >= 80);
    assert_int_equal(done.differences, 0);
}

/* A table of two columns whose second cell is `size` bytes long. */
static pf_status read_long_cell(size_t size, bool quoted, size_t piece, pf_table_fault *fault)
{
    pf_buffer log;
    pf_buffer_init(&log, 1 << 24);
    pf_table *table = pf_table_new(PF_UTF_8, log_row, &log);
    char *block = malloc(piece);
    assert_non_null(table);
    assert_non_null(block);
    memset(block, 'x', piece);
    const char *start = quoted ? "a,b\n1,\"" : "a,b\n1,";
    pf_status status = pf_table_feed(table, start, strlen(start));
    for (size_t at = 0; at < size && status == PF_OK; at += piece)
        status = pf_table_feed(table, block, size - at < piece ? size - at : piece);
    if (status == PF_OK) status = pf_table_feed(table, quoted ? "\"\n" : "\n", quoted ? 2 : 1);
    if (status == PF_OK) status = pf_table_end(table);
    *fault = *pf_table_fault_of(table);
    pf_table_free(table);
    pf_buffer_clear(&log);
    free(block);
    return status;
}

static void test_a_cell_may_be_nearly_a_mebibyte_long_and_not_longer(void **state)
{
    pf_table_fault fault;
    (void)state;
    assert_int_equal(read_long_cell(1000000, true, 4096, &fault), PF_OK);
    assert_int_equal(read_long_cell(1000000, false, 65536, &fault), PF_OK);
    assert_int_equal(read_long_cell(1200000, true, 4096, &fault), PF_LIMIT);
    assert_int_equal(fault.line, 2);
    assert_non_null(strstr(fault.wrong, "1 MiB"));
}

static void test_a_line_may_not_be_longer_than_four_mebibytes(void **state)
{
    pf_table_fault fault;
    (void)state;
    assert_int_equal(read_long_cell(5 << 20, false, 65536, &fault), PF_LIMIT);
    assert_int_equal(fault.line, 2);
}

static void test_a_row_may_not_have_more_than_two_thousand_cells(void **state)
{
    pf_buffer text, log;
    (void)state;
    for (size_t cells = 2000; cells <= 2001; cells++) {
        pf_buffer_init(&text, 1 << 20);
        pf_buffer_init(&log, 1 << 24);
        for (size_t i = 0; i < cells; i++)
            pf_buffer_text(&text, i ? ",c" : "c");
        pf_buffer_text(&text, "\n");
        pf_table *table = pf_table_new(PF_UTF_8, log_row, &log);
        pf_status status = pf_table_feed(table, text.text, text.length);
        assert_int_equal(status, cells > 2000 ? PF_LIMIT : PF_OK);
        pf_table_free(table);
        pf_buffer_clear(&text);
        pf_buffer_clear(&log);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_polluted_files_read_alike_in_pieces_of_any_size),
        cmocka_unit_test(test_nasty_files_read_alike_in_pieces_of_any_size),
        cmocka_unit_test(test_a_cell_may_be_nearly_a_mebibyte_long_and_not_longer),
        cmocka_unit_test(test_a_line_may_not_be_longer_than_four_mebibytes),
        cmocka_unit_test(test_a_row_may_not_have_more_than_two_thousand_cells),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
