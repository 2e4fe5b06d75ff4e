/* fuzz_table.c: the table reader on any bytes; the first byte says how they are cut into pieces. Rows
** must have their cells in order, and the pieces must not matter. */
#include "intake/table.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

typedef struct tally {
    size_t rows, cells, bytes, last_line;
} tally;

static pf_status count_row(void *context, const pf_row *row)
{
    tally *sum = context;
    if (row->line < sum->last_line) abort();
    sum->last_line = row->line;
    sum->rows++;
    sum->cells += row->count;
    for (size_t i = 0; i < row->count; i++) {
        if (strlen(row->cell[i].text) != row->cell[i].length) abort();
        if (row->cell[i].line < row->line) abort();
        sum->bytes += row->cell[i].length;
    }
    return PF_OK;
}

static pf_status read_in_pieces(const char *bytes, size_t length, size_t piece, tally *sum)
{
    pf_table *table = pf_table_new(PF_UTF_8, count_row, sum);
    if (!table) return PF_NO_MEMORY;
    pf_status status = PF_OK;
    for (size_t at = 0; at < length && status == PF_OK; at += piece)
        status = pf_table_feed(table, bytes + at, length - at < piece ? length - at : piece);
    if (status == PF_OK) status = pf_table_end(table);
    pf_table_free(table);
    return status;
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    tally whole = {0}, pieces = {0};
    if (size < 2) return 0;
    const char *bytes = (const char *)data + 1;
    pf_status one = read_in_pieces(bytes, size - 1, size, &whole);
    pf_status other = read_in_pieces(bytes, size - 1, data[0] % 32 + 1u, &pieces);
    if (one != other || memcmp(&whole, &pieces, sizeof whole) != 0) abort();
    return 0;
}
