/* lines.h: tables of test cases as text: one case a line, tabs between its fields, `#` comments. The
** escapes \n, \r, \t, \\ and \xHH stand for their characters. */
#ifndef SUPPORT_LINES_H
#define SUPPORT_LINES_H

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#define LINE_FIELDS 8

typedef struct pf_lines {
    FILE *file;
    char text[8192];
    char *field[LINE_FIELDS];
    size_t length[LINE_FIELDS]; /* a field may hold zero bytes */
} pf_lines;

void lines_open(pf_lines *lines, const char *path); /* a file that is not there fails the test */
/* The next case, which must have `fields` fields; false at the end. */
bool lines_next(pf_lines *lines, size_t fields);
void lines_close(pf_lines *lines);

#endif
