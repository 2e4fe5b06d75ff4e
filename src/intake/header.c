/* header.c: the header of a ratings file.
**
** Each kind of file is tried; the one that finds all its required columns is it. Where none does,
** the one that finds the largest share says what is missing.
*/
#include "intake/header.h"
#include "base/memory.h"

#include <stdio.h>
#include <string.h>

/* What one kind of file finds in a header. */
typedef struct trial {
    pf_file_kind kind;
    size_t required, found; /* columns, part and maker left out */
    bool part;
    size_t pulses; /* wide sheets: currents with a pulse width */
    bool volts;
} trial;

static pf_slice name_of(const pf_column *column)
{
    return pf_slice_from(column->name, strlen(column->name));
}

static bool is_part(const pf_column_kind *kind)
{
    return kind->role == PF_ROLE_TEXT && strcmp(kind->csv, "part") == 0;
}

static trial try_kind(const pf_reader *reader, pf_file_kind kind)
{
    pf_column_kind list[PF_COLUMN_KINDS_MAX];
    bool hit[PF_COLUMN_KINDS_MAX] = {false};
    size_t count = pf_column_kinds(kind, list);
    trial result = {.kind = kind};
    for (size_t i = 0; i < reader->column_count; i++) {
        pf_column column;
        pf_fault fault;
        const char *remark;
        bool sound = pf_column_read(name_of(&reader->column[i]), kind, list, count, &column,
                                    &remark, &fault) == PF_OK;
        if (column.kind.role == PF_ROLE_IGNORED) continue;
        result.pulses += sound && column.kind.role == PF_ROLE_ID && column.condition != 0;
        result.volts |= column.kind.role == PF_ROLE_VDS;
        for (size_t k = 0; k < count; k++)
            hit[k] |= list[k].csv == column.kind.csv;
    }
    for (size_t k = 0; k < count; k++) {
        if (is_part(&list[k])) {
            result.part = hit[k];
        } else if (list[k].required) {
            result.required++;
            result.found += hit[k];
        }
    }
    if (kind == PF_KIND_SOA_WIDE) {
        result.required = 2;
        result.found = result.pulses > 0 ? 1u + result.volts : 0;
    }
    return result;
}

/* More complete first; the order of the kinds settles a draw. */
static bool better(const trial *one, const trial *other)
{
    return one->found * other->required > other->found * one->required;
}

static trial choose(const pf_reader *reader)
{
    static const pf_file_kind kinds[] = {PF_KIND_PARTS, PF_KIND_SOA, PF_KIND_ZTH, PF_KIND_FOSTER,
                                         PF_KIND_SOA_WIDE};
    trial best = try_kind(reader, kinds[0]);
    for (size_t i = 1; i < sizeof kinds / sizeof *kinds; i++) {
        trial next = try_kind(reader, kinds[i]);
        if (better(&next, &best)) best = next;
    }
    return best;
}

/* --- What is wrong with it ------------------------------------------------------------------ */

static pf_status report(pf_reader *reader, pf_severity severity, const char *column,
                        const char *text, const pf_fault *fault)
{
    pf_place place = {reader->file, reader->row->line, column, text};
    if (severity == PF_SEVERITY_REFUSAL) reader->file_refused = true;
    return pf_reader_report(reader, severity, place, fault);
}

static bool has_name(const pf_reader *reader, const char *names)
{
    char folded[PF_FOLDED_ROOM];
    for (size_t i = 0; i < reader->column_count; i++) {
        pf_slice name = name_of(&reader->column[i]);
        const char *bracket = strpbrk(name.text, "[(");
        if (bracket) name.length = (size_t)(bracket - name.text);
        pf_fold(name, folded);
        if (*folded && pf_folded_in(folded, names)) return true;
    }
    return false;
}

static pf_status refuse_unknown(pf_reader *reader)
{
    pf_fault fault;
    const char *right = "a header with the columns of docs/csv.md, such as part, polarity, vds_max";
    if (has_name(reader, "parameter"))
        right = "this looks like a profile: give it to rank, not to import";
    else if (has_name(reader, "rule"))
        right = "this looks like a file of derating rules: it is not imported";
    pf_fault_set(&fault, right, "no kind of ratings file has such a header");
    return report(reader, PF_SEVERITY_REFUSAL, NULL, reader->row->cell[0].text, &fault);
}

/* The header that may be a misspelt name of a missing column; NULL for none. */
static const char *misspelt(const pf_reader *reader, const pf_column_kind *missing)
{
    for (size_t i = 0; i < reader->column_count; i++)
        if (reader->column[i].kind.role == PF_ROLE_IGNORED &&
            pf_column_near(name_of(&reader->column[i]), missing, 1))
            return reader->column[i].name;
    return NULL;
}

static pf_status refuse_missing(pf_reader *reader, const pf_column_kind *missing)
{
    pf_fault fault;
    const char *near = misspelt(reader, missing);
    bool part = is_part(missing);
    pf_fault_set(&fault, "", "a %s needs this column and it is missing",
                 pf_file_kind_text(reader->kind));
    if (near)
        snprintf(fault.right, sizeof fault.right, "is `%.60s` meant for it?", near);
    else if (part && reader->kind != PF_KIND_PARTS)
        snprintf(fault.right, sizeof fault.right,
                 "a column part, or --part NAME for the whole file");
    else if (reader->kind == PF_KIND_SOA && has_name(reader, "time|t"))
        snprintf(fault.right, sizeof fault.right,
                 "a measured waveform is not imported: give it to rank --capture");
    else
        snprintf(fault.right, sizeof fault.right, "a column %s", missing->csv);
    return report(reader, PF_SEVERITY_REFUSAL, missing->csv, NULL, &fault);
}

static pf_status check_required(pf_reader *reader, const pf_column_kind *list, size_t count)
{
    pf_status status = PF_OK;
    for (size_t k = 0; k < count && status == PF_OK; k++) {
        if (!list[k].required || pf_reader_find(reader, list[k].role, list[k].csv) >= 0) continue;
        bool named =
            is_part(&list[k]) && reader->options->part_name && reader->kind != PF_KIND_PARTS;
        if (!named) status = refuse_missing(reader, &list[k]);
    }
    return status;
}

static bool same_column(const pf_column *one, const pf_column *other)
{
    return one->kind.role != PF_ROLE_IGNORED && one->kind.csv == other->kind.csv &&
           one->condition == other->condition;
}

static pf_status check_twice(pf_reader *reader, size_t index)
{
    pf_fault fault;
    for (size_t i = 0; i < index; i++)
        if (same_column(&reader->column[i], &reader->column[index])) {
            pf_fault_set(&fault, "each once", "`%.60s` and this are the same column, %s",
                         reader->column[i].name, reader->column[index].kind.csv);
            return report(reader, PF_SEVERITY_REFUSAL, NULL, reader->column[index].name, &fault);
        }
    return PF_OK;
}

static pf_status check_rdson_count(pf_reader *reader)
{
    pf_fault fault;
    size_t count = 0;
    for (size_t i = 0; i < reader->column_count; i++)
        count += reader->column[i].kind.role == PF_ROLE_RDSON;
    if (count <= PF_RDSON_MAX) return PF_OK;
    pf_fault_set(&fault, "the gate drives that cards use", "more than %d columns of Rds(on)",
                 PF_RDSON_MAX);
    return report(reader, PF_SEVERITY_REFUSAL, "rdson_max", NULL, &fault);
}

static pf_status note_ignored(pf_reader *reader, const char *name, const pf_column_kind *list,
                              size_t count)
{
    pf_fault fault;
    if (!*name) {
        pf_fault_set(&fault, "a name, if it is to be kept", "a column without a name is ignored");
        return report(reader, PF_SEVERITY_WARNING, NULL, NULL, &fault);
    }
    const pf_column_kind *near = pf_column_near(pf_slice_from(name, strlen(name)), list, count);
    pf_fault_set(&fault, "", "column ignored: it is none that is kept");
    if (near) snprintf(fault.right, sizeof fault.right, "did you mean %s?", near->csv);
    return report(reader, near ? PF_SEVERITY_WARNING : PF_SEVERITY_NOTE, name, NULL, &fault);
}

/* --- Taking it ------------------------------------------------------------------------------ */

/* Keeps a copy of the header's texts, by our names where a map has them. */
static pf_status copy_names(pf_reader *reader)
{
    const pf_row *row = reader->row;
    size_t room = 0;
    for (size_t i = 0; i < row->count; i++)
        room += row->cell[i].length + 1;
    reader->column = pf_allocate(row->count, sizeof *reader->column);
    reader->header_text = pf_allocate(room, 1);
    if (!reader->column || !reader->header_text) return PF_NO_MEMORY;
    reader->column_count = row->count;
    char *at = reader->header_text;
    for (size_t i = 0; i < row->count; i++) {
        pf_slice name = pf_trim((pf_slice){row->cell[i].text, row->cell[i].length});
        const char *ours = pf_column_map_find(reader->map, name);
        memcpy(at, name.text, name.length);
        reader->column[i].name = ours ? ours : at;
        at += name.length + 1;
    }
    return PF_OK;
}

static pf_status take_column(pf_reader *reader, size_t index, const pf_column_kind *list,
                             size_t count)
{
    pf_column *column = &reader->column[index];
    const char *remark, *name = column->name;
    pf_fault fault;
    pf_status status =
        pf_column_read(name_of(column), reader->kind, list, count, column, &remark, &fault);
    column->name = name;
    if (status == PF_BAD_INPUT) {
        status = report(reader, PF_SEVERITY_REFUSAL, NULL, name, &fault);
        column->unread = true;
        return status;
    }
    if (status != PF_OK) return status;
    if (column->kind.role == PF_ROLE_IGNORED) return note_ignored(reader, name, list, count);
    if (remark) {
        pf_fault_set(&fault, "", "%s", remark);
        status = report(reader, PF_SEVERITY_NOTE, name, NULL, &fault);
    }
    return status == PF_OK ? check_twice(reader, index) : status;
}

pf_status pf_header_take(pf_reader *reader)
{
    pf_column_kind list[PF_COLUMN_KINDS_MAX];
    pf_status status = copy_names(reader);
    if (status != PF_OK) return status;
    trial best = choose(reader);
    if (best.found == 0) return refuse_unknown(reader);
    reader->kind = best.kind;
    size_t count = pf_column_kinds(best.kind, list);
    for (size_t i = 0; i < reader->column_count && status == PF_OK; i++)
        status = take_column(reader, i, list, count);
    if (status == PF_OK) status = check_required(reader, list, count);
    if (status == PF_OK) status = check_rdson_count(reader);
    reader->part_column = pf_reader_find(reader, PF_ROLE_TEXT, "part");
    reader->maker_column = pf_reader_find(reader, PF_ROLE_TEXT, "maker");
    reader->units_may_follow = true;
    bool named = reader->options->part_name && best.kind != PF_KIND_PARTS;
    bool nameless = reader->part_column < 0 && !named;
    bool unread = false;
    for (size_t i = 0; i < reader->column_count; i++)
        unread |= reader->column[i].unread && best.kind != PF_KIND_PARTS;
    if (best.found < best.required || nameless || unread) reader->kind = PF_KIND_UNKNOWN;
    return status;
}

/* --- A row of units ------------------------------------------------------------------------- */

/* A cell of a row of units: blank, a dash, `unit`, or a unit of its column. */
static bool is_unit_cell(const pf_reader *reader, size_t index, double *factor, bool *unit)
{
    const pf_cell *cell = &reader->row->cell[index];
    const pf_column_kind *kind = &reader->column[index].kind;
    pf_slice text = pf_trim((pf_slice){cell->text, cell->length});
    *unit = false;
    if (pf_not_stated(text) || pf_slice_is(text, "unit") || pf_slice_is(text, "units") ||
        pf_slice_is(text, "[-]"))
        return true;
    if (!kind->numeric) return kind->role == PF_ROLE_IGNORED;
    *unit = pf_column_unit_read(text, kind->rule.quantity, factor) == PF_OK;
    return *unit;
}

pf_status pf_header_take_units(pf_reader *reader, bool *taken)
{
    size_t units = 0;
    double factor;
    bool unit;
    for (size_t i = 0; i < reader->column_count; i++) {
        if (!is_unit_cell(reader, i, &factor, &unit)) return PF_OK;
        units += unit;
    }
    if (units == 0) return PF_OK;
    *taken = true;
    for (size_t i = 0; i < reader->column_count; i++) {
        pf_value_rule *rule = &reader->column[i].kind.rule;
        pf_fault fault;
        if (!is_unit_cell(reader, i, &factor, &unit) || !unit) continue;
        if (rule->factor == 0 || rule->factor == factor) {
            rule->factor = factor;
            continue;
        }
        reader->file_refused = true;
        pf_fault_set(&fault, "one unit", "the header names another unit for this column");
        pf_status status = pf_reader_refuse_cell(reader, i, &fault);
        if (status != PF_OK) return status;
    }
    return PF_OK;
}
