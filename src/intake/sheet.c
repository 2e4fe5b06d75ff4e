/* sheet.c: small CSV files with known columns. */
#include "intake/sheet.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <string.h>

pf_slice pf_sheet_text(const pf_sheet *sheet, size_t column)
{
    int place = sheet->place[column];
    if (place < 0) return (pf_slice){"", 0};
    const pf_cell *cell = &sheet->row->cell[place];
    return pf_trim((pf_slice){cell->text, cell->length});
}

pf_status pf_sheet_refuse_at(pf_sheet *sheet, size_t line, const char *column, pf_slice text,
                             const pf_fault *fault)
{
    char shown[256];
    snprintf(shown, sizeof shown, "%.*s", text.length < 255 ? (int)text.length : 255, text.text);
    pf_place place = {sheet->file, line, column, text.length ? shown : NULL};
    pf_status status = pf_problems_add(sheet->problems, PF_SEVERITY_REFUSAL, place,
                                       fault->right[0] ? fault->right : NULL, "%s", fault->wrong);
    return status == PF_BAD_INPUT ? PF_OK : status;
}

pf_status pf_sheet_refuse(pf_sheet *sheet, const char *column, pf_slice text, const pf_fault *fault)
{
    return pf_sheet_refuse_at(sheet, sheet->row ? sheet->row->line : 0, column, text, fault);
}

/* The first of a column's names. */
static const char *shown_name(const pf_sheet_column *column, char name[64])
{
    snprintf(name, 64, "%.*s", (int)strcspn(column->names, "|"), column->names);
    return name;
}

pf_status pf_sheet_number(pf_sheet *sheet, size_t column, double *value)
{
    pf_value read;
    pf_fault fault;
    char name[64];
    pf_slice text = pf_sheet_text(sheet, column);
    pf_status status =
        pf_value_read(text, &sheet->column[column].rule, &sheet->style, &read, &fault);
    *value = read.value;
    if (status != PF_BAD_INPUT) return status;
    *value = __builtin_nan("");
    return pf_sheet_refuse(sheet, shown_name(&sheet->column[column], name), text, &fault);
}

/* --- Header -------------------------------------------------------------------------------- */

/* A name with its unit cut off: `vds [V]`, `time (s)`. */
static pf_slice cut_unit(pf_slice name, pf_slice *unit)
{
    *unit = (pf_slice){"", 0};
    if (name.length < 3) return name;
    char close = name.text[name.length - 1];
    char open = close == ']' ? '[' : close == ')' ? '(' : 0;
    for (size_t i = name.length - 1; open && i > 0; i--)
        if (name.text[i] == open) {
            *unit = (pf_slice){name.text + i + 1, name.length - i - 2};
            return pf_trim((pf_slice){name.text, i});
        }
    return name;
}

static pf_status take_unit(pf_sheet *sheet, pf_sheet_column *column, pf_slice header, pf_slice unit)
{
    pf_fault fault;
    if (unit.length == 0 || !column->numeric) return PF_OK;
    if (pf_column_unit_read(unit, column->rule.quantity, &column->rule.factor) == PF_OK)
        return PF_OK;
    pf_fault_set(&fault, "", "`%.*s` is no unit of this quantity",
                 unit.length < 60 ? (int)unit.length : 60, unit.text);
    snprintf(fault.right, sizeof fault.right, "a unit such as [%s]",
             pf_quantity_unit(column->rule.quantity));
    return pf_sheet_refuse(sheet, NULL, header, &fault);
}

static pf_status take_column(pf_sheet *sheet, size_t at)
{
    char folded[PF_FOLDED_ROOM];
    const pf_cell *cell = &sheet->row->cell[at];
    pf_fault fault;
    pf_slice unit, header = pf_trim((pf_slice){cell->text, cell->length});
    pf_slice name = cut_unit(header, &unit);
    pf_fold(name, folded);
    for (size_t i = 0; i < sheet->column_count; i++) {
        if (!*folded || !pf_folded_in(folded, sheet->column[i].names)) continue;
        if (sheet->place[i] >= 0) {
            pf_fault_set(&fault, "each column once", "this column stands twice in the header");
            return pf_sheet_refuse(sheet, NULL, header, &fault);
        }
        sheet->place[i] = (int)at;
        return take_unit(sheet, &sheet->column[i], header, unit);
    }
    if (header.length == 0) return PF_OK;
    pf_place place = {sheet->file, cell->line, cell->text, NULL};
    return pf_problems_add(sheet->problems, PF_SEVERITY_NOTE, place, NULL, "column ignored");
}

static pf_status take_header(pf_sheet *sheet)
{
    char name[64];
    pf_fault fault;
    pf_status status = PF_OK;
    sheet->style.delimiter = pf_table_delimiter(sheet->table);
    for (size_t i = 0; i < sheet->row->count && status == PF_OK; i++)
        status = take_column(sheet, i);
    for (size_t i = 0; i < sheet->column_count && status == PF_OK; i++) {
        if (!sheet->column[i].required || sheet->place[i] >= 0) continue;
        pf_fault_set(&fault, "a header line that names it", "the column is missing");
        status =
            pf_sheet_refuse(sheet, shown_name(&sheet->column[i], name), (pf_slice){"", 0}, &fault);
    }
    return status;
}

/* --- Rows ---------------------------------------------------------------------------------- */

static bool is_blank_row(const pf_row *row)
{
    for (size_t i = 0; i < row->count; i++)
        if (pf_trim((pf_slice){row->cell[i].text, row->cell[i].length}).length > 0) return false;
    return true;
}

static bool complete(const pf_sheet *sheet)
{
    for (size_t i = 0; i < sheet->column_count; i++)
        if (sheet->column[i].required && sheet->place[i] < 0) return false;
    return true;
}

static pf_status on_row(void *context, const pf_row *row)
{
    pf_sheet *sheet = context;
    pf_fault fault;
    sheet->row = row;
    sheet->last_line = row->line;
    if (sheet->problems->refusals - sheet->refusals_before > PF_PROBLEMS_MAX) return PF_LIMIT;
    if (row->header) return take_header(sheet);
    if (!complete(sheet) || is_blank_row(row)) return PF_OK;
    if (!row->wrong) return sheet->take(sheet, sheet->context);
    pf_fault_set(&fault, "as many cells in every row as in the header", "%s", row->wrong);
    return pf_sheet_refuse(sheet, NULL, (pf_slice){row->cell[0].text, row->cell[0].length}, &fault);
}

static pf_status feed(void *context, const char *bytes, size_t length)
{
    return pf_table_feed(((pf_sheet *)context)->table, bytes, length);
}

static pf_status report_end(pf_sheet *sheet, pf_status status)
{
    const pf_table_fault *fault = pf_table_fault_of(sheet->table);
    if ((status != PF_BAD_INPUT && status != PF_LIMIT) || !fault->wrong[0]) return status;
    pf_place place = {sheet->file, fault->line, NULL, fault->text[0] ? fault->text : NULL};
    return pf_problems_add(sheet->problems, PF_SEVERITY_REFUSAL, place, fault->right, "%s",
                           fault->wrong);
}

pf_status pf_sheet_read(pf_sheet *sheet, const pf_source *source)
{
    size_t before = sheet->refusals_before = sheet->problems->refusals;
    for (size_t i = 0; i < sheet->column_count; i++)
        sheet->place[i] = -1;
    sheet->file = source->name;
    sheet->table = pf_table_new(PF_UTF_8, on_row, sheet);
    if (!sheet->table) return PF_NO_MEMORY;
    pf_status status = pf_source_read(source, feed, sheet, sheet->problems);
    if (status == PF_OK) status = pf_table_end(sheet->table);
    status = report_end(sheet, status);
    pf_table_free(sheet->table);
    sheet->row = NULL;
    if (status == PF_LIMIT || (status == PF_OK && sheet->problems->refusals > before))
        return PF_BAD_INPUT;
    return status;
}

void pf_base_name(const char *path, char *name, size_t room)
{
    const char *slash = strrchr(path, '/');
    snprintf(name, room, "%s", slash ? slash + 1 : path);
    size_t length = strlen(name);
    pf_slice tail = {name + (length > 4 ? length - 4 : 0), length > 4 ? 4 : 0};
    if (pf_slice_is(tail, ".csv")) name[length - 4] = '\0';
}
