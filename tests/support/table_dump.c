/* table_dump.c: CSV texts to JSON, for scripts that compare the table reader with another one.
**
** Standard input: texts one behind the other, each with its length in decimal and a line feed in front.
** Standard output: one JSON array per row; a line `.` behind a text that was read, `!` behind one that
** was refused.
*/
#include "intake/table.h"

#include <stdio.h>
#include <stdlib.h>
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

static void dump(const char *text, size_t length)
{
    pf_table *table = pf_table_new(PF_UTF_8, print_row, NULL);
    pf_status status = table ? pf_table_feed(table, text, length) : PF_NO_MEMORY;
    if (status == PF_OK) status = pf_table_end(table);
    pf_table_free(table);
    printf(status == PF_OK ? ".\n" : "!\n");
}

int main(void)
{
    size_t length;
    while (scanf("%zu", &length) == 1 && getchar() == '\n') {
        char *text = malloc(length + 1);
        if (!text || fread(text, 1, length, stdin) != length) return 1;
        dump(text, length);
        free(text);
    }
    return 0;
}
