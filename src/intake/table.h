/* table.h: bytes in, rows of cells with their line numbers out.
**
** RFC 4180 by libcsv, strict, with what it leaves to its caller: a constant number of columns,
** physical line numbers, byte-order mark, `sep=` line, `#` comment lines, blank lines, the
** delimiter, encoding and limits. The same rows come out for every way of cutting the input into pieces.
** The measure is how many damaged files are read silently wrong; a strict reader with a constant
** column count refuses nearly all of them.
*/
#ifndef INTAKE_TABLE_H
#define INTAKE_TABLE_H

#include "intake/encoding.h"

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

typedef struct pf_cell {
    const char *text; /* ends in NUL, holds none */
    size_t length;
    size_t line; /* physical line on which the cell begins, from 1 */
} pf_cell;

typedef struct pf_row {
    const pf_cell *cell;
    size_t count;
    size_t line;
    bool header;       /* the first row */
    const char *wrong; /* the number of cells is not the header's: in words, else NULL */
} pf_row;

/* Called per row, the header first; the row is good until it returns. Anything but PF_OK ends the
** reading and is returned by pf_table_feed. */
typedef pf_status pf_table_row(void *context, const pf_row *row);

/* Why reading ended before the end of the text. */
typedef struct pf_table_fault {
    size_t line;
    char text[80];
    char wrong[160];
    const char *right; /* static storage */
} pf_table_fault;

typedef struct pf_table pf_table;

/* NULL: no memory. */
pf_table *pf_table_new(pf_encoding encoding, pf_table_row *row, void *context);
void pf_table_free(pf_table *table);

/* Takes the next bytes of the text. PF_BAD_INPUT or PF_LIMIT: see pf_table_fault_of; feeding on
** after a failure returns it again. */
pf_status pf_table_feed(pf_table *table, const char *bytes, size_t length) PF_MUST_USE;

/* The text has ended. A text without any row is a fault. */
pf_status pf_table_end(pf_table *table) PF_MUST_USE;

const pf_table_fault *pf_table_fault_of(const pf_table *table);

/* `,`, `;` or tab; 0 before the header was seen. */
char pf_table_delimiter(const pf_table *table);

/* Whether the last line ended without a line end, as that of a file that was cut off. */
bool pf_table_cut_short(const pf_table *table);

/* The physical lines so far. */
size_t pf_table_lines(const pf_table *table);

#endif
