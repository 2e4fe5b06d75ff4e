/* lines.c: tables of test cases as text. */
#include "support/lines.h"
#include "support/claims.h"

#include <stdlib.h>
#include <string.h>

void lines_open(pf_lines *lines, const char *path)
{
    lines->file = fopen(path, "r");
    if (!lines->file) fail_msg("cannot read %s", path);
}

void lines_close(pf_lines *lines)
{
    fclose(lines->file);
}

/* Undoes the escapes in place; returns the length. */
static size_t unescape(char *text)
{
    static const char letters[] = "nrt\\", meant[] = "\n\r\t\\";
    char *to = text;
    for (const char *from = text; *from; from++) {
        const char *letter = from[0] == '\\' && from[1] ? strchr(letters, from[1]) : NULL;
        if (letter) {
            *to++ = meant[letter - letters];
            from++;
        } else if (from[0] == '\\' && from[1] == 'x') {
            char hex[3] = {from[2], from[3], '\0'};
            *to++ = (char)strtol(hex, NULL, 16);
            from += 3;
        } else {
            *to++ = *from;
        }
    }
    *to = '\0';
    return (size_t)(to - text);
}

bool lines_next(pf_lines *lines, size_t fields)
{
    do {
        if (!fgets(lines->text, sizeof lines->text, lines->file)) return false;
    } while (lines->text[0] == '#' || lines->text[0] == '\n');
    lines->text[strcspn(lines->text, "\n")] = '\0';
    char *rest = lines->text;
    for (size_t i = 0; i < fields; i++) {
        char *tab = strchr(rest, '\t');
        if ((tab == NULL) != (i + 1 == fields)) fail_msg("not %zu fields: %s", fields, lines->text);
        if (tab) *tab = '\0';
        lines->field[i] = rest;
        if (tab) rest = tab + 1;
        lines->length[i] = unescape(lines->field[i]);
    }
    return true;
}
