/* pollute.c: every single-defect copy of a clean CSV text. */
#include "support/pollute.h"

#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

typedef struct pollution {
    const char *clean;
    size_t length;
    char delimiter;
    pollute_sink *sink;
    void *context;
    size_t count;
    char *copy;
} pollution;

/* A copy with `removed` bytes at `at` replaced. */
static void replace(pollution *work, size_t at, size_t removed, const char *with, size_t added,
                    size_t line, const char *what)
{
    memcpy(work->copy, work->clean, at);
    memcpy(work->copy + at, with, added);
    memcpy(work->copy + at + added, work->clean + at + removed, work->length - at - removed);
    polluted file = {work->copy, work->length - removed + added, line, what};
    work->count++;
    work->sink(work->context, &file);
}

static void put(pollution *work, size_t at, size_t removed, const char *with, size_t line,
                const char *what)
{
    replace(work, at, removed, with, strlen(with), line, what);
}

/* --- Defects at one byte -------------------------------------------------------------------- */

static void at_delimiter(pollution *work, size_t at, size_t line)
{
    static const char *const others[] = {",", ";", "\t", "|", " ", ":"};
    char twice[3] = {work->delimiter, work->delimiter, '\0'};
    put(work, at, 1, "", line, "delimiter left out");
    put(work, at, 1, twice, line, "delimiter doubled");
    put(work, at, 1, "\n", line, "line end in place of a delimiter");
    put(work, at, 1, "\"", line, "quote in place of a delimiter");
    for (size_t i = 0; i < sizeof others / sizeof *others; i++)
        if (others[i][0] != work->delimiter) put(work, at, 1, others[i], line, "another delimiter");
}

/* after: behind the line end, where a blank line goes. */
static void at_line_end(pollution *work, size_t at, size_t line)
{
    char cell[3] = {work->delimiter, '9', '\0'}, blank[2] = {work->delimiter, '\0'};
    if (at + 1 < work->length) put(work, at, 1, "", line, "line end left out");
    put(work, at, 1, "\n\n", line, "blank line");
    put(work, at, 1, "\r\n", line, "one CRLF");
    put(work, at, 1, "\r", line, "one CR");
    put(work, at, 0, cell, line, "one cell too many");
    put(work, at, 0, blank, line, "one blank cell too many");
    put(work, at, 0, " ", line, "blank at the end");
    put(work, at, 0, "\"", line, "quote at the end");
}

static bool inside_quotes(const pollution *work, size_t at)
{
    bool quoted = false;
    for (size_t i = 0; i < at; i++)
        quoted ^= work->clean[i] == '"';
    return quoted;
}

static void at_cell_start(pollution *work, size_t at, size_t line)
{
    put(work, at, 0, "\"", line, "quote at the start of a cell");
    put(work, at, 0, "\xC2\xA0", line, "non-breaking blank at the start of a cell");
    put(work, at, 0, "\x93", line, "byte that is no UTF-8");
    replace(work, at, 0, "\0", 1, line, "zero byte");
    put(work, at, 0, "\xB5", line, "micro sign of another encoding");
}

static void at_mark(pollution *work, size_t at, size_t line)
{
    put(work, at, 1, work->clean[at] == '.' ? "," : ".", line, "the other decimal mark");
    put(work, at, 1,
        work->clean[at] == '.' ? "."
                                 "."
                               : ",,",
        line, "decimal mark doubled");
}

static void at_byte(pollution *work, size_t at, size_t line)
{
    char c = work->clean[at];
    bool quoted = inside_quotes(work, at);
    bool digits = at > 0 && at + 1 < work->length && work->clean[at - 1] >= '0' &&
                  work->clean[at - 1] <= '9' && work->clean[at + 1] >= '0' &&
                  work->clean[at + 1] <= '9';
    bool starts = at == 0 || work->clean[at - 1] == '\n' ||
                  (work->clean[at - 1] == work->delimiter && !quoted);
    if (c == work->delimiter && !quoted) at_delimiter(work, at, line);
    if (c == '\n') at_line_end(work, at, line);
    if (c == '"') {
        put(work, at, 1, "", line, "quote left out");
        put(work, at, 1, "\"\"", line, "quote doubled");
        put(work, at, 1, "'", line, "single quote");
    }
    if (starts) at_cell_start(work, at, line);
    if (digits && (c == '.' || c == ',') && c != work->delimiter) at_mark(work, at, line);
}

/* --- Defects of the whole ------------------------------------------------------------------- */

static void whole_file(pollution *work, size_t lines)
{
    put(work, 0, 0, "Power transistors\n", 1, "title above");
    put(work, 0, 0, "Power transistors\n\n", 1, "title and blank line above");
    put(work, 0, 0, "\n", 1, "blank line above");
    put(work, 0, 0, "# a comment\n", 1, "comment above");
    put(work, 0, 0, "\xEF\xBB\xBF", 1, "byte-order mark");
    put(work, 0, 0, "\xFF\xFE", 1, "byte-order mark of UTF-16");
    put(work, work->length, 0, "end of list\n", lines + 1, "footer");
    put(work, work->length, 0, "\n\ntotal\n", lines + 3, "footer behind blank lines");
    put(work, work->length, 0, "# end\n", lines + 1, "comment below");
    put(work, work->length, 0, "\x1A", lines + 1, "end-of-file mark");
}

/* Names of the first line misspelt, left out, doubled, emptied. */
static void header(pollution *work)
{
    size_t end = strcspn(work->clean, "\n"), from = 0;
    for (size_t i = 0; i <= end; i++) {
        if (i < end && (work->clean[i] != work->delimiter || inside_quotes(work, i))) continue;
        bool quoted = work->clean[from] == '"';
        size_t first = from + quoted, last = i - quoted;
        put(work, first, 1, "zzz", 1, "header misspelt");
        put(work, first, last - first, "", 1, "header emptied");
        if (i < end) put(work, from, i + 1 - from, "", 1, "header left out");
        from = i + 1;
    }
}

/* Cut off within the last two lines; not at a line end, which leaves a sound file. */
static void cut_off(pollution *work, size_t lines)
{
    size_t line = lines;
    for (size_t at = work->length - 1; at > 1 && line + 1 >= lines; at--) {
        bool whole = work->clean[at - 1] == '\n';
        if (whole) line--;
        if (whole || (work->clean[at] == '\n' && line == lines)) continue;
        polluted file = {work->clean, at, work->clean[at] == '\n' ? line + 1 : line, "cut off"};
        if (work->clean[at] == '\n') continue;
        work->count++;
        work->sink(work->context, &file);
    }
}

static void as_utf_16(pollution *work, bool big)
{
    char *wide = malloc(2 * work->length + 2);
    size_t length = 0;
    if (!wide) return;
    for (size_t i = 0; i < work->length; i++) {
        wide[length++] = big ? '\0' : work->clean[i];
        wide[length++] = big ? work->clean[i] : '\0';
    }
    polluted file = {wide, length, 1, "UTF-16 without a mark"};
    work->count++;
    work->sink(work->context, &file);
    free(wide);
}

static void all_line_ends(pollution *work, const char *end, const char *what)
{
    char *text = malloc(2 * work->length);
    size_t length = 0, added = strlen(end);
    if (!text) return;
    for (size_t i = 0; i < work->length; i++) {
        bool line_end = work->clean[i] == '\n';
        memcpy(text + length, line_end ? end : work->clean + i, line_end ? added : 1);
        length += line_end ? added : 1;
    }
    polluted file = {text, length, 1, what};
    work->count++;
    work->sink(work->context, &file);
    free(text);
}

size_t pollute(const char *clean, size_t length, char delimiter, pollute_sink *sink, void *context)
{
    pollution work = {clean, length, delimiter, sink, context, 0, malloc(length + 64)};
    size_t line = 1;
    if (!work.copy) return 0;
    for (size_t at = 0; at < length; at++) {
        at_byte(&work, at, line);
        line += clean[at] == '\n';
    }
    whole_file(&work, line - 1);
    header(&work);
    cut_off(&work, line - 1);
    as_utf_16(&work, false);
    as_utf_16(&work, true);
    all_line_ends(&work, "\r\n", "CRLF throughout");
    all_line_ends(&work, "\r", "CR throughout");
    free(work.copy);
    return work.count;
}
