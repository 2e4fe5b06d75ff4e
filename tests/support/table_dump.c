/* table_dump.c: the rows of a CSV text on standard input as JSON, one array a row, for scripts that
** compare the table reader with another one. Exit status 1 where the text is refused. */
#include "intake/table.h"

#include <stdio.h>
#include <string.h>

static void print_json(const char *text)
{
    putchar('"');
    for (const unsigned char *c = (const unsigned char *)text; *c; c++) {
        if (*c == '"' || *c == '\\')
            printf("\\%c", *c);
        else if (*c < 0x20)
            printf("\\u%04x", *c);
        else
            putchar(*c);
    }
    putchar('"');
}

static pf_status print_row(void *context, const pf_row *row)
{
    (void)context;
    if (row->wrong) return PF_BAD_INPUT;
    putchar('[');
    for (size_t i = 0; i < row->count; i++) {
        if (i) putchar(',');
        print_json(row->cell[i].text);
    }
    printf("]\n");
    return PF_OK;
}

int main(void)
{
    char piece[4096];
    size_t got;
    pf_table *table = pf_table_new(PF_UTF_8, print_row, NULL);
    pf_status status = table ? PF_OK : PF_NO_MEMORY;
    while (status == PF_OK && (got = fread(piece, 1, sizeof piece, stdin)) > 0)
        status = pf_table_feed(table, piece, got);
    if (status == PF_OK) status = pf_table_end(table);
    if (status != PF_OK && table) {
        const pf_table_fault *fault = pf_table_fault_of(table);
        fprintf(stderr, "%zu: %s\n", fault->line, fault->wrong);
    }
    pf_table_free(table);
    return status == PF_OK ? 0 : 1;
}
