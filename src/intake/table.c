/* table.c: the table reader on libcsv.
**
** The text is cut into physical lines first (LF, CRLF or CR), for libcsv drops blank lines without
** a word and knows no line numbers. A line is fed when it is complete, so that how the input was cut
** into pieces cannot matter. Cells gather in one growing text per row; nothing is allocated per row
** once the longest row so far has been seen. After a failure nothing is fed or finished any more:
** libcsv would deliver half a row and forget that it failed.
*/
#include "intake/table.h"
#include "base/memory.h"
#include "intake/text.h"

#include <csv.h>
#include <passfet/intake.h>
#include <stdio.h>
#include <string.h>

struct pf_table {
    struct csv_parser parser;
    pf_encoding encoding;
    pf_table_row *row;
    void *context;
    pf_status status;
    pf_table_fault fault;

    pf_buffer carry;   /* the start of a line whose end has not come yet */
    pf_buffer decoded; /* a line of another encoding */
    size_t line;       /* number of the line being fed, from 1 */
    char delimiter;

    size_t columns; /* of the header; 0 before it */
    char *text;     /* of the row's cells, each with its NUL */
    size_t text_length, text_capacity;
    pf_cell *cell;
    size_t count, cell_capacity;
    size_t row_line, row_bytes;
    size_t cell_line; /* on which the cell being read begins */
    bool cut_short;   /* the last line has no line end */
    bool open;        /* a row has begun and not ended: the next line belongs to a quoted cell */
};

/* libcsv's buffer holds one cell: refusing its growth is the limit. */
static void *grow_cell(void *memory, size_t size)
{
    return size > PF_CELL_BYTES_MAX ? NULL : pf_reallocate(memory, size);
}

pf_table *pf_table_new(pf_encoding encoding, pf_table_row *row, void *context)
{
    pf_table *table = pf_allocate(1, sizeof *table);
    if (!table) return NULL;
    csv_init(&table->parser, CSV_STRICT | CSV_STRICT_FINI);
    csv_set_realloc_func(&table->parser, grow_cell);
    csv_set_free_func(&table->parser, pf_free);
    csv_set_blk_size(&table->parser, 4096);
    pf_buffer_init(&table->carry, PF_ROW_BYTES_MAX);
    pf_buffer_init(&table->decoded, 3 * PF_ROW_BYTES_MAX);
    table->encoding = encoding;
    table->row = row;
    table->context = context;
    return table;
}

void pf_table_free(pf_table *table)
{
    if (!table) return;
    csv_free(&table->parser);
    pf_buffer_clear(&table->carry);
    pf_buffer_clear(&table->decoded);
    pf_free(table->text);
    pf_free(table->cell);
    pf_free(table);
}

const pf_table_fault *pf_table_fault_of(const pf_table *table)
{
    return &table->fault;
}

char pf_table_delimiter(const pf_table *table)
{
    return table->delimiter;
}

bool pf_table_cut_short(const pf_table *table)
{
    return table->cut_short;
}

size_t pf_table_lines(const pf_table *table)
{
    return table->line;
}

/* Ends the reading. text is shown up to the end of its line, as far as it is UTF-8. */
static pf_status fail(pf_table *table, pf_status status, size_t line, pf_slice text,
                      const char *wrong, const char *right)
{
    if (table->status != PF_OK) return table->status;
    size_t shown = 0;
    while (shown < text.length && shown < sizeof table->fault.text - 1 &&
           !strchr("\r\n", text.text[shown]))
        shown++;
    shown = pf_utf8_valid(text.text, shown);
    memcpy(table->fault.text, text.text, shown);
    table->fault.text[shown] = '\0';
    table->fault.line = line;
    table->fault.right = right;
    snprintf(table->fault.wrong, sizeof table->fault.wrong, "%s", wrong);
    table->status = status;
    return status;
}

/* --- Rows ---------------------------------------------------------------------------------- */

static void on_cell(void *bytes, size_t length, void *context)
{
    pf_table *table = context;
    if (table->status != PF_OK) return;
    if (table->count == PF_COLUMNS_MAX) {
        fail(table, PF_LIMIT, table->line, (pf_slice){"", 0}, "the row has more than 2000 cells",
             "a table of at most 2000 columns");
        return;
    }
    size_t needed = table->text_length + length + 1;
    if (needed > table->text_capacity)
        table->status = pf_grow((void **)&table->text, &table->text_capacity, needed, 1);
    if (table->status == PF_OK && table->count == table->cell_capacity)
        table->status = pf_grow((void **)&table->cell, &table->cell_capacity, table->count + 1,
                                sizeof *table->cell);
    if (table->status != PF_OK) return;
    if (length) memcpy(table->text + table->text_length, bytes, length);
    table->text[needed - 1] = '\0';
    table->text_length = needed;
    table->cell[table->count++] = (pf_cell){NULL, length, table->cell_line};
    table->cell_line = table->line;
}

/* The cells' texts lie one behind the other; they may have moved while they grew. */
static void settle_cells(pf_table *table)
{
    const char *text = table->text;
    for (size_t i = 0; i < table->count; i++) {
        table->cell[i].text = text;
        text += table->cell[i].length + 1;
    }
}

static void on_row(int terminator, void *context)
{
    pf_table *table = context;
    char wrong[96];
    (void)terminator;
    if (table->status != PF_OK) return;
    settle_cells(table);
    pf_row row = {table->cell, table->count, table->row_line, table->columns == 0, NULL};
    if (row.header) table->columns = row.count;
    if (row.count != table->columns) {
        snprintf(wrong, sizeof wrong, "the row has %zu cells and the header %zu", row.count,
                 table->columns);
        row.wrong = wrong;
    }
    table->count = table->text_length = 0;
    table->open = false;
    table->status = table->row(table->context, &row);
}

/* --- Lines --------------------------------------------------------------------------------- */

/* The delimiter that the header uses most, quoted text and brackets left out; 0 for a draw. */
static char choose_delimiter(const char *line, size_t length)
{
    static const char candidates[] = {',', ';', '\t'};
    size_t count[3] = {0}, best = 0;
    bool quoted = false, draw = false;
    int depth = 0;
    for (size_t i = 0; i < length; i++) {
        if (line[i] == '"') quoted = !quoted;
        if (quoted) continue;
        if (line[i] == '[' || line[i] == '(') depth++;
        if ((line[i] == ']' || line[i] == ')') && depth > 0) depth--;
        for (size_t k = 0; k < 3 && depth == 0; k++)
            count[k] += line[i] == candidates[k];
    }
    for (size_t k = 1; k < 3; k++) {
        if (count[k] > 0 && count[k] == count[best]) draw = true;
        if (count[k] <= count[best]) continue;
        best = k;
        draw = false;
    }
    return draw ? 0 : candidates[best];
}

/* `sep=;` as the very first line settles the delimiter. True when the line was one. */
static bool take_sep_line(pf_table *table, const char *line, size_t length)
{
    pf_slice text = {line, length};
    while (text.length && strchr("\r\n", text.text[text.length - 1]))
        text.length--;
    if (text.length == 7 && text.text[0] == '"' && text.text[6] == '"')
        text = (pf_slice){text.text + 1, 5};
    if (text.length != 5 || !pf_starts(text, "sep=")) return false;
    char mark = text.text[4];
    if (mark == ',' || mark == ';' || mark == '\t')
        table->delimiter = mark;
    else
        fail(table, PF_BAD_INPUT, table->line, text, "a delimiter that is not read",
             "comma, semicolon or tab");
    return true;
}

static bool is_blank(const pf_table *table, const char *line, size_t length)
{
    for (size_t i = 0; i < length; i++)
        if (!strchr(" \t\r\n", line[i]) || line[i] == table->delimiter) return false;
    return true;
}

/* At the start of a row: true when the line is none (blank, a comment, `sep=`). */
static bool passes_over(pf_table *table, const char *line, size_t length)
{
    if (line[0] == '#' || is_blank(table, line, length)) return true;
    if (table->delimiter) return false;
    if (table->columns == 0 && take_sep_line(table, line, length)) return true;
    table->delimiter = choose_delimiter(line, length);
    if (!table->delimiter)
        fail(table, PF_BAD_INPUT, table->line, (pf_slice){line, length},
             "two delimiters are used equally often in the header",
             "one of comma, semicolon and tab, or a first line sep=;");
    return false;
}

static void parse_failed(pf_table *table, const char *line, size_t length, size_t at)
{
    char wrong[160];
    pf_slice rest = {line + at, length - at};
    int error = csv_error(&table->parser);
    if (error == CSV_EPARSE && table->cell_line != table->line)
        snprintf(wrong, sizeof wrong,
                 "a quoted cell begins here, and in line %zu a quote stands in its middle",
                 table->line);
    else
        snprintf(wrong, sizeof wrong, "a quote stands in the middle of a cell");
    if (error == CSV_EPARSE)
        fail(table, PF_BAD_INPUT, table->cell_line, rest, wrong,
             "quotes around the whole cell, and quotes inside it doubled");
    else if (csv_get_buffer_size(&table->parser) + 4096 > PF_CELL_BYTES_MAX)
        fail(table, PF_LIMIT, table->cell_line, (pf_slice){"", 0},
             "the cell that begins here is longer than 1 MiB", "is a closing quote missing?");
    else
        table->status = PF_NO_MEMORY;
}

/* Feeds one line, its end included, that is UTF-8. */
static void feed_line(pf_table *table, const char *line, size_t length)
{
    if (!table->open) {
        if (length == 0 || passes_over(table, line, length) || table->status != PF_OK) return;
        csv_set_delim(&table->parser, (unsigned char)table->delimiter);
        table->row_line = table->cell_line = table->line;
        table->row_bytes = 0;
        table->open = true;
    }
    table->row_bytes += length;
    if (table->row_bytes > PF_ROW_BYTES_MAX) {
        fail(table, PF_LIMIT, table->row_line, (pf_slice){"", 0},
             "the row that begins here is longer than 4 MiB", "is a closing quote missing?");
        return;
    }
    size_t taken = csv_parse(&table->parser, line, length, on_cell, on_row, table);
    if (taken < length && table->status == PF_OK) parse_failed(table, line, length, taken);
}

/* Checks or decodes a line, then feeds it. */
static void take_line(pf_table *table, const char *line, size_t length, bool plain)
{
    const char *right;
    bool first = table->line++ == 0;
    if (first && length >= 3 && memcmp(line, "\xEF\xBB\xBF", 3) == 0) line += 3, length -= 3;
    if (!plain && table->encoding == PF_WINDOWS_1252) {
        pf_buffer_reset(&table->decoded);
        if (!pf_windows_1252_decode(line, length, &table->decoded)) {
            fail(table, PF_BAD_INPUT, table->line, (pf_slice){"", 0},
                 "a byte that Windows-1252 does not have", "save the sheet as \"CSV UTF-8\"");
            return;
        }
        table->status = pf_buffer_status(&table->decoded);
        if (table->status != PF_OK) return;
        line = pf_buffer_string(&table->decoded);
        length = table->decoded.length;
    } else if (!plain && pf_utf8_valid(line, length) < length) {
        const char *wrong = pf_encoding_guess(line, length, &right);
        fail(table, PF_BAD_INPUT, table->line, (pf_slice){line, length}, wrong, right);
        return;
    }
    feed_line(table, line, length);
}

/* Bytes of the first line with its end; 0 while its end has not come. */
static size_t line_length(const char *bytes, size_t length)
{
    const char *feed = memchr(bytes, '\n', length);
    size_t reach = feed ? (size_t)(feed - bytes) : length;
    const char *carriage = memchr(bytes, '\r', reach);
    if (!carriage) return feed ? reach + 1 : 0;
    size_t end = (size_t)(carriage - bytes) + 1;
    if (end == length) return 0; /* a line feed may follow */
    return end == reach ? reach + 1 : end;
}

/* Adds to the carried line up to its end; how many bytes were taken. */
static size_t complete_carry(pf_table *table, const char *bytes, size_t length)
{
    bool after_return = table->carry.text[table->carry.length - 1] == '\r';
    size_t rest = line_length(bytes, length);
    if (after_return) rest = bytes[0] == '\n';
    bool complete = after_return || rest > 0;
    size_t taken = complete ? rest : length;
    pf_buffer_add(&table->carry, bytes, taken);
    if (!complete || pf_buffer_status(&table->carry) != PF_OK) return taken;
    take_line(table, table->carry.text, table->carry.length, false);
    pf_buffer_reset(&table->carry);
    return taken;
}

pf_status pf_table_feed(pf_table *table, const char *bytes, size_t length)
{
    bool plain = pf_bytes_plain(bytes, length);
    size_t at = 0;
    while (at < length && table->status == PF_OK) {
        size_t size = table->carry.length ? 0 : line_length(bytes + at, length - at);
        if (size > 0) {
            take_line(table, bytes + at, size, plain);
            at += size;
        } else if (table->carry.length) {
            at += complete_carry(table, bytes + at, length - at);
        } else {
            pf_buffer_add(&table->carry, bytes + at, length - at);
            at = length;
        }
        if (pf_buffer_status(&table->carry) == PF_LIMIT)
            fail(table, PF_LIMIT, table->line + 1, (pf_slice){"", 0}, "a line is longer than 4 MiB",
                 "a text file with line ends");
        else if (pf_buffer_status(&table->carry) != PF_OK)
            table->status = pf_buffer_status(&table->carry);
    }
    return table->status;
}

pf_status pf_table_end(pf_table *table)
{
    if (table->status == PF_OK && table->carry.length > 0) {
        table->cut_short = table->carry.text[table->carry.length - 1] != '\r';
        take_line(table, table->carry.text, table->carry.length, false);
    }
    pf_buffer_reset(&table->carry);
    if (table->status == PF_OK && table->open &&
        csv_fini(&table->parser, on_cell, on_row, table) != 0)
        fail(table, PF_BAD_INPUT, table->cell_line, (pf_slice){"", 0},
             "a quoted cell begins here and never ends", "a closing quote");
    if (table->status == PF_OK && table->columns == 0)
        fail(table, PF_BAD_INPUT, table->line, (pf_slice){"", 0}, "the file holds no header line",
             "a first line with column names");
    return table->status;
}
