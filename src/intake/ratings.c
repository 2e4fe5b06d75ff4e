/* ratings.c: one file of ratings from its bytes to the changes of a run.
**
** The header decides what kind of file it is; rows then go to parts_file.c or curve_file.c. Memory:
** the longest row, and what the file states.
*/
#include "base/memory.h"
#include "base/number.h"
#include "intake/header.h"
#include "intake/reader.h"
#include "intake/source.h"

#include <stdio.h>
#include <string.h>

const char *pf_file_kind_text(pf_file_kind kind)
{
    static const char *const text[] = {
#define PF_FILE_KIND_TEXT(code, name) name,
        PF_FILE_KIND_LIST(PF_FILE_KIND_TEXT)
#undef PF_FILE_KIND_TEXT
    };
    return (unsigned)kind < PF_FILE_KIND_COUNT ? text[kind] : text[0];
}

/* --- Reporting ----------------------------------------------------------------------------- */

pf_status pf_reader_report(pf_reader *reader, pf_severity severity, pf_place place,
                           const pf_fault *fault)
{
    size_t refusals = reader->problems->refusals - reader->refusals_before;
    const char *right = fault->right[0] ? fault->right : NULL;
    if (severity == PF_SEVERITY_REFUSAL && refusals >= PF_PROBLEMS_MAX) return PF_LIMIT;
    pf_status status =
        pf_problems_add(reader->problems, severity, place, right, "%s", fault->wrong);
    return status == PF_BAD_INPUT ? PF_OK : status;
}

static void note_reason(pf_reader *reader, const char *column, const pf_fault *fault)
{
    reader->row_refused = true;
    if (reader->reason[0]) return;
    snprintf(reader->reason, sizeof reader->reason, "%s: %s", column ? column : "row",
             fault->wrong);
}

pf_status pf_reader_refuse_cell(pf_reader *reader, size_t index, const pf_fault *fault)
{
    const pf_cell *cell = &reader->row->cell[index];
    pf_place place = {reader->file, cell->line, reader->column[index].name, cell->text};
    note_reason(reader, place.column, fault);
    return pf_reader_report(reader, PF_SEVERITY_REFUSAL, place, fault);
}

pf_status pf_reader_number(pf_reader *reader, size_t index, pf_value *value)
{
    const pf_cell *cell = &reader->row->cell[index];
    pf_fault fault;
    pf_status status =
        pf_value_read((pf_slice){cell->text, cell->length}, &reader->column[index].kind.rule,
                      &reader->style, value, &fault);
    if (status != PF_BAD_INPUT) return status;
    *value = (pf_value){PF_NONE, false};
    return pf_reader_refuse_cell(reader, index, &fault);
}

void pf_reader_tell_text(pf_reader *reader, const char *part, size_t index, const char *stored)
{
    if (!reader->options->cell) return;
    const pf_cell *cell = &reader->row->cell[index];
    pf_cell_reading reading = {reader->file, cell->line, part, reader->column[index].name,
                               cell->text,   stored};
    reader->options->cell(reader->options->context, &reading);
}

void pf_reader_tell(pf_reader *reader, const char *part, size_t index, double value,
                    pf_quantity quantity)
{
    char stored[PF_UNIT_ROOM];
    if (!reader->options->cell) return;
    if (value == PF_DC)
        snprintf(stored, sizeof stored, "dc");
    else if (value != value)
        snprintf(stored, sizeof stored, "not stated");
    else
        pf_value_print(stored, value, quantity, 12);
    pf_reader_tell_text(reader, part, index, stored);
}

void pf_reader_bad_row(pf_reader *reader, size_t line, const char *const *cell, size_t count,
                       const char *reason)
{
    const char *header[PF_COLUMNS_MAX];
    if (!reader->options->keep_good || !reader->options->bad_row) return;
    for (size_t i = 0; i < reader->column_count; i++)
        header[i] = reader->column[i].name;
    pf_bad_row bad = {reader->file, reader->header_line, header, reader->column_count, NULL, 0, ""};
    if (!reader->header_handed) reader->options->bad_row(reader->options->context, &bad);
    reader->header_handed = true;
    bad.line = line;
    bad.cell = cell;
    bad.cell_count = count;
    bad.reason = reason;
    reader->options->bad_row(reader->options->context, &bad);
}

int pf_reader_find(const pf_reader *reader, pf_role role, const char *csv)
{
    for (size_t i = 0; i < reader->column_count; i++)
        if (reader->column[i].kind.role == role &&
            (!csv || strcmp(reader->column[i].kind.csv, csv) == 0))
            return (int)i;
    return -1;
}

/* --- Names --------------------------------------------------------------------------------- */

static bool has_control(pf_slice text)
{
    for (size_t i = 0; i < text.length; i++)
        if ((unsigned char)text.text[i] < 0x20 || text.text[i] == 0x7F) return true;
    return false;
}

static pf_status read_name(pf_reader *reader, int index, bool required, pf_slice *name)
{
    pf_fault fault;
    *name = (pf_slice){"", 0};
    if (index < 0) return PF_OK;
    const pf_cell *cell = &reader->row->cell[index];
    pf_slice text = pf_trim((pf_slice){cell->text, cell->length});
    if (pf_not_stated(text)) {
        if (!required) return PF_OK;
        pf_fault_set(&fault, "a part number in every row", "no part number");
        return pf_reader_refuse_cell(reader, (size_t)index, &fault);
    }
    if (text.length > 200 || has_control(text)) {
        pf_fault_set(&fault, "up to 200 characters on one line",
                     "a name with a line break, a control character or no end");
        return pf_reader_refuse_cell(reader, (size_t)index, &fault);
    }
    *name = text;
    return PF_OK;
}

pf_status pf_reader_names(pf_reader *reader, pf_slice *name, pf_slice *maker)
{
    int part = reader->part_column;
    pf_status status = read_name(reader, part, true, name);
    if (part < 0)
        *name = pf_slice_from(reader->options->part_name, strlen(reader->options->part_name));
    if (status == PF_OK) status = read_name(reader, reader->maker_column, false, maker);
    return status;
}

/* --- Rows ---------------------------------------------------------------------------------- */

static bool is_blank_row(const pf_row *row)
{
    for (size_t i = 0; i < row->count; i++)
        if (pf_trim((pf_slice){row->cell[i].text, row->cell[i].length}).length > 0) return false;
    return true;
}

/* Where no row has as many cells as the header, the header is to blame. */
static pf_status judge_header(pf_reader *reader)
{
    pf_fault fault;
    pf_place place = {reader->file, reader->header_line, NULL, NULL};
    if (!reader->some_odd || reader->some_even) return PF_OK;
    reader->file_refused = true;
    pf_fault_set(&fault, "a header with a name for every column",
                 "the header has %zu cells and no row has as many", reader->column_count);
    return pf_reader_report(reader, PF_SEVERITY_REFUSAL, place, &fault);
}

static pf_status warn_cut_short(pf_reader *reader)
{
    pf_fault fault;
    pf_place place = {reader->file, pf_table_lines(reader->table), NULL, NULL};
    if (!pf_table_cut_short(reader->table)) return PF_OK;
    pf_fault_set(&fault, "look whether the file is whole",
                 "the last line has no line end, as if the file had been cut off");
    return pf_reader_report(reader, PF_SEVERITY_WARNING, place, &fault);
}

static pf_status refuse_row(pf_reader *reader)
{
    pf_fault fault;
    pf_place place = {reader->file, reader->row->line, NULL, reader->row->cell[0].text};
    pf_fault_set(&fault, "as many cells in every row as in the header", "%s", reader->row->wrong);
    note_reason(reader, NULL, &fault);
    return pf_reader_report(reader, PF_SEVERITY_REFUSAL, place, &fault);
}

/* The cells of the row at hand to whoever keeps bad rows. */
void pf_reader_bad_row_now(pf_reader *reader)
{
    const char *cell[PF_COLUMNS_MAX];
    for (size_t i = 0; i < reader->row->count; i++)
        cell[i] = reader->row->cell[i].text;
    pf_reader_bad_row(reader, reader->row->line, cell, reader->row->count, reader->reason);
}

pf_status pf_reader_row_lost(pf_reader *reader)
{
    size_t index;
    pf_slice name = {"", 0}, maker = {"", 0};
    pf_status status = PF_OK;
    if (!reader->options->keep_good) return PF_OK;
    pf_reader_bad_row_now(reader);
    const pf_row *row = reader->row;
    int part = reader->part_column, by = reader->maker_column;
    if (part >= 0 && (size_t)part < row->count) status = read_name(reader, part, false, &name);
    if (status == PF_OK && by >= 0 && (size_t)by < row->count)
        status = read_name(reader, by, false, &maker);
    if (status != PF_OK) return status;
    if (name.length == 0) {
        reader->file_refused = true; /* whose row was it? */
        return PF_OK;
    }
    if (reader->kind != PF_KIND_PARTS) return pf_curves_spoil(reader, name, maker);
    status = pf_registry_find(&reader->registry, reader->changes, name, maker, &index);
    if (status == PF_OK) reader->changes->item[index].refused = true;
    return status == PF_NOT_FOUND ? PF_OK : status;
}

static pf_status take_data(pf_reader *reader)
{
    pf_status status;
    reader->row_refused = false;
    reader->reason[0] = '\0';
    reader->summary->rows++;
    if (reader->row->wrong) {
        status = refuse_row(reader);
        if (status == PF_OK) status = pf_reader_row_lost(reader);
    } else if (reader->kind == PF_KIND_PARTS) {
        status = pf_parts_row(reader);
    } else {
        status = pf_curves_row(reader);
    }
    reader->summary->refused_rows += reader->row_refused;
    return status;
}

/* The row with the marks against formulas taken off; most rows have none and are not copied. */
static pf_status take_marks_off(pf_reader *reader, const pf_row *row)
{
    bool marked = false;
    reader->row = row;
    for (size_t i = 0; i < row->count; i++)
        marked |= row->cell[i].text[0] == '\'';
    if (!marked) return PF_OK;
    pf_status status = pf_grow((void **)&reader->plain_cell, &reader->plain_room, row->count,
                               sizeof *reader->plain_cell);
    if (status != PF_OK) return status;
    for (size_t i = 0; i < row->count; i++) {
        pf_slice text = pf_undefused((pf_slice){row->cell[i].text, row->cell[i].length});
        reader->plain_cell[i] = (pf_cell){text.text, text.length, row->cell[i].line};
    }
    reader->plain_row = *row;
    reader->plain_row.cell = reader->plain_cell;
    reader->row = &reader->plain_row;
    return PF_OK;
}

static pf_status on_row(void *context, const pf_row *row)
{
    pf_reader *reader = context;
    pf_status marks = take_marks_off(reader, row);
    if (marks != PF_OK) return marks;
    row = reader->row;
    if (row->header) {
        reader->style.delimiter = pf_table_delimiter(reader->table);
        reader->header_line = row->line;
        pf_status status = pf_header_take(reader);
        pf_curves_columns(reader);
        return status;
    }
    if (is_blank_row(row)) return PF_OK;
    *(row->wrong ? &reader->some_odd : &reader->some_even) = true;
    if (reader->kind == PF_KIND_UNKNOWN) return PF_OK;
    if (reader->units_may_follow && !row->wrong) {
        bool taken = false;
        reader->units_may_follow = false;
        pf_status status = pf_header_take_units(reader, &taken);
        if (status != PF_OK || taken) return status;
    }
    return take_data(reader);
}

/* --- The file ------------------------------------------------------------------------------ */

static pf_status reader_init(pf_reader *reader, const pf_intake_options *options)
{
    pf_encoding encoding;
    bool told = options->decimal == 0 || options->decimal == '.' || options->decimal == ',';
    if (!told || pf_encoding_read(options->encoding, &encoding) != PF_OK) return PF_BAD_ARGUMENT;
    reader->style.decimal = options->decimal;
    pf_status status = pf_registry_init(&reader->registry, reader->changes);
    if (status == PF_OK) status = pf_curves_new(reader);
    if (status == PF_OK && options->map_file)
        status = pf_column_map_read_file(options->map_file, &reader->map, reader->problems);
    if (status != PF_OK) return status;
    reader->table = pf_table_new(encoding, on_row, reader);
    return reader->table ? PF_OK : PF_NO_MEMORY;
}

static void reader_clear(pf_reader *reader)
{
    pf_table_free(reader->table);
    pf_registry_clear(&reader->registry);
    pf_curves_free(reader->curves);
    pf_column_map_free(reader->map);
    pf_free(reader->column);
    pf_free(reader->header_text);
    pf_free(reader->plain_cell);
}

static pf_status feed(void *context, const char *bytes, size_t length)
{
    pf_reader *reader = context;
    const pf_intake_options *options = reader->options;
    size_t before = reader->summary->bytes >> 22;
    if (options->bytes) options->bytes(options->context, bytes, length);
    reader->summary->bytes += length;
    if (options->progress && reader->summary->bytes >> 22 != before)
        options->progress(options->context, reader->file, reader->summary->bytes);
    reader->broken = pf_table_feed(reader->table, bytes, length);
    return reader->broken;
}

/* Turns what ended the table early into a refusal of the file. */
static pf_status report_end(pf_reader *reader, pf_status status)
{
    const pf_table_fault *fault = pf_table_fault_of(reader->table);
    if (status != PF_BAD_INPUT && status != PF_LIMIT) return status;
    reader->file_refused = true;
    if (!fault->wrong[0]) { /* the row's reader ended it */
        pf_place place = {reader->file, pf_table_lines(reader->table), NULL, NULL};
        return pf_problems_add(reader->problems, PF_SEVERITY_REFUSAL, place, "repair these first",
                               "reading ends here, after %d refusals", PF_PROBLEMS_MAX);
    }
    pf_place place = {reader->file, fault->line, NULL, fault->text[0] ? fault->text : NULL};
    return pf_problems_add(reader->problems, PF_SEVERITY_REFUSAL, place, fault->right, "%s",
                           fault->wrong);
}

static pf_status finish(pf_reader *reader)
{
    pf_status status = reader->broken;
    if (status == PF_OK) status = pf_table_end(reader->table);
    if (status == PF_OK) status = judge_header(reader);
    if (status == PF_OK) status = warn_cut_short(reader);
    if (status == PF_OK) status = pf_curves_finish(reader);
    if (status != PF_OK) status = report_end(reader, status);
    if (status != PF_OK) return status;
    bool refused = reader->problems->refusals > reader->refusals_before;
    if (reader->file_refused || (refused && !reader->options->keep_good)) return PF_BAD_INPUT;
    return PF_OK;
}

/* Reads through `pump`, which calls feed for every piece. */
static pf_status read_through(const char *name, const pf_intake_options *options,
                              pf_changes *changes, pf_intake_summary *summary,
                              pf_problems *problems, pf_source *source)
{
    static const pf_intake_options plain = {0};
    pf_reader reader = {.file = name,
                        .options = options ? options : &plain,
                        .changes = changes,
                        .summary = summary,
                        .problems = problems,
                        .refusals_before = problems->refusals,
                        .part_column = -1,
                        .maker_column = -1};
    pf_status status = reader_init(&reader, reader.options);
    summary->files++;
    if (status == PF_OK) status = pf_source_read(source, feed, &reader, problems);
    if (status == PF_OK || reader.broken != PF_OK) status = finish(&reader);
    summary->kind = reader.kind;
    reader_clear(&reader);
    return status;
}

pf_status pf_ratings_read(const char *name, const char *bytes, size_t length,
                          const pf_intake_options *options, pf_changes *changes,
                          pf_intake_summary *summary, pf_problems *problems)
{
    pf_source source = {.name = name, .bytes = bytes ? bytes : "", .length = length};
    return read_through(name, options, changes, summary, problems, &source);
}

pf_status pf_ratings_read_file(const char *path, const pf_intake_options *options,
                               pf_changes *changes, pf_intake_summary *summary,
                               pf_problems *problems)
{
    pf_source source = {.name = path};
    return read_through(path, options, changes, summary, problems, &source);
}
