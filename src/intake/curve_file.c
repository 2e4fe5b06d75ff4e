/* curve_file.c: rows of curve files gathered per part, repaired at the end of the file.
**
** Rows of a part need not stand together, but mostly do: the last part is remembered, others are
** found by hash. A point costs 40 bytes until its curve is settled; a row costs no allocation.
*/
#include "base/memory.h"
#include "intake/reader.h"

#include <stdio.h>
#include <string.h>

/* The rows of one part and thermal path. */
typedef struct gather {
    size_t change;
    pf_thermal_path path;
    pf_raw_points points;
    size_t line; /* of its first row */
    bool bad;    /* a row of it was refused */
    pf_buffer
        rows; /* where bad rows are kept: number, cells and reason of each row, NUL behind each */
} gather;

struct pf_curves {
    gather *item;
    size_t count, capacity;
    uint32_t *of; /* change * PF_PATH_COUNT + path to gather + 1 */
    size_t of_capacity;
    size_t last;        /* the gather of the row before */
    char last_key[256]; /* its cells that name part, maker and path, a NUL behind each */
    size_t last_length; /* 0: none */
    char last_time[32]; /* the text of the pulse width of the row before, and its value */
    size_t last_time_length;
    double last_time_s;
    int pulse, vds, id, soa_case, time, zth, path; /* columns, -1 for none */
};

pf_status pf_curves_new(pf_reader *reader)
{
    reader->curves = pf_allocate(1, sizeof *reader->curves);
    return reader->curves ? PF_OK : PF_NO_MEMORY;
}

static void gather_clear(gather *part)
{
    pf_raw_points_clear(&part->points);
    pf_buffer_clear(&part->rows);
}

void pf_curves_free(pf_curves *curves)
{
    if (!curves) return;
    for (size_t i = 0; i < curves->count; i++)
        gather_clear(&curves->item[i]);
    pf_free(curves->item);
    pf_free(curves->of);
    pf_free(curves);
}

/* --- Finding the part ----------------------------------------------------------------------- */

static pf_status add_gather(pf_curves *curves, size_t change, pf_thermal_path path, size_t line)
{
    pf_status status =
        pf_grow((void **)&curves->item, &curves->capacity, curves->count + 1, sizeof *curves->item);
    if (status != PF_OK) return status;
    gather *fresh = &curves->item[curves->count++];
    *fresh = (gather){.change = change, .path = path, .line = line};
    pf_buffer_init(&fresh->rows, (size_t)1 << 30);
    return PF_OK;
}

/* The gather of a change and path, made when there is none. */
static pf_status gather_of(pf_curves *curves, size_t change, pf_thermal_path path, size_t line,
                           size_t *index)
{
    size_t key = change * PF_PATH_COUNT + (size_t)path, before = curves->of_capacity;
    pf_status status =
        pf_grow((void **)&curves->of, &curves->of_capacity, key + 1, sizeof *curves->of);
    if (status != PF_OK) return status;
    if (curves->of_capacity > before)
        memset(curves->of + before, 0, (curves->of_capacity - before) * sizeof *curves->of);
    if (curves->of[key] == 0) {
        status = add_gather(curves, change, path, line);
        if (status != PF_OK) return status;
        curves->of[key] = (uint32_t)curves->count;
    }
    *index = curves->of[key] - 1;
    return PF_OK;
}

/* The cells that name the part and path of the row at hand: up to three, empty where not there. */
static size_t key_cells(const pf_reader *reader, pf_slice key[3])
{
    const int column[3] = {reader->part_column, reader->maker_column, reader->curves->path};
    size_t length = 0;
    for (size_t i = 0; i < 3; i++) {
        key[i] = (pf_slice){"", 0};
        if (column[i] >= 0)
            key[i] =
                (pf_slice){reader->row->cell[column[i]].text, reader->row->cell[column[i]].length};
        length += key[i].length + 1;
    }
    return length;
}

/* Whether the row at hand names the part and path of the row before, letter by letter. */
static bool is_last(const pf_reader *reader)
{
    pf_slice key[3];
    const pf_curves *curves = reader->curves;
    if (key_cells(reader, key) != curves->last_length) return false;
    const char *at = curves->last_key;
    for (size_t i = 0; i < 3; at += key[i].length + 1, i++)
        if (memcmp(at, key[i].text, key[i].length) != 0 || at[key[i].length] != '\0') return false;
    return true;
}

static void remember(const pf_reader *reader)
{
    pf_slice key[3];
    pf_curves *curves = reader->curves;
    curves->last_length = 0;
    size_t length = key_cells(reader, key);
    if (length > sizeof curves->last_key) return;
    char *at = curves->last_key;
    for (size_t i = 0; i < 3; at += key[i].length + 1, i++)
        memcpy(at, key[i].text, key[i].length + 1);
    curves->last_length = length;
}

/* Sets curves->last to the row's part. *found false: refused, and said. */
static pf_status find_part(pf_reader *reader, pf_slice name, pf_slice maker, pf_thermal_path path,
                           bool *found)
{
    size_t change;
    pf_curves *curves = reader->curves;
    *found = true;
    curves->last_length = 0;
    pf_status status = pf_registry_find(&reader->registry, reader->changes, name, maker, &change);
    if (status == PF_NOT_FOUND) {
        pf_fault fault;
        *found = false;
        pf_fault_set(&fault, "a column maker",
                     "two makers share this part number, and the row does not say which is meant");
        return pf_reader_refuse_cell(
            reader, reader->part_column < 0 ? 0 : (size_t)reader->part_column, &fault);
    }
    if (status != PF_OK) return status;
    pf_part_change *item = &reader->changes->item[change];
    if (!item->file) {
        status = pf_text_copy(&item->file, reader->file);
        item->line = reader->row->line;
    }
    if (status == PF_OK) status = gather_of(curves, change, path, reader->row->line, &curves->last);
    return status;
}

/* --- Rows ---------------------------------------------------------------------------------- */

static pf_status refuse_blank(pf_reader *reader, int index)
{
    pf_fault fault;
    pf_fault_set(&fault, "a value in every row", "the cell is blank");
    return pf_reader_refuse_cell(reader, (size_t)index, &fault);
}

static const char *part_of(const pf_reader *reader)
{
    return reader->changes->item[reader->curves->item[reader->curves->last].change].part.name;
}

/* A number that may not be blank. */
static pf_status need(pf_reader *reader, int index, pf_value *value)
{
    pf_status status = pf_reader_number(reader, (size_t)index, value);
    if (status == PF_OK && value->value != value->value && !reader->row_refused)
        return refuse_blank(reader, index);
    pf_reader_tell(reader, part_of(reader), (size_t)index, value->value,
                   reader->column[index].kind.rule.quantity);
    return status;
}

/* The pulse width, remembered from row to row: there are few of them in a file. */
static pf_status read_pulse(pf_reader *reader, int index, double *pulse_s)
{
    pf_curves *curves = reader->curves;
    const pf_cell *cell = &reader->row->cell[index];
    pf_fault fault;
    if (cell->length == curves->last_time_length && cell->length > 0 &&
        memcmp(cell->text, curves->last_time, cell->length) == 0) {
        *pulse_s = curves->last_time_s;
    } else {
        pf_slice text = pf_trim((pf_slice){cell->text, cell->length});
        pf_status status =
            pf_pulse_read(text, &reader->column[index].kind.rule, &reader->style, pulse_s, &fault);
        if (status == PF_BAD_INPUT) return pf_reader_refuse_cell(reader, (size_t)index, &fault);
        if (status != PF_OK) return status;
        curves->last_time_length = cell->length <= sizeof curves->last_time ? cell->length : 0;
        memcpy(curves->last_time, cell->text, curves->last_time_length);
        curves->last_time_s = *pulse_s;
    }
    pf_reader_tell(reader, part_of(reader), (size_t)index, *pulse_s, PF_TIME);
    return PF_OK;
}

static pf_status read_case(pf_reader *reader, double *case_degC)
{
    pf_value value;
    *case_degC = 25;
    int index = reader->curves->soa_case;
    if (index < 0) return PF_OK;
    pf_status status = pf_reader_number(reader, (size_t)index, &value);
    if (value.value == value.value) *case_degC = value.value;
    return status;
}

static pf_status add_point(pf_reader *reader, pf_raw_point point)
{
    pf_curves *curves = reader->curves;
    point.line = (uint32_t)reader->row->line;
    if (reader->row_refused) return PF_OK;
    pf_status status = pf_raw_points_add(&curves->item[curves->last].points, point);
    if (status != PF_LIMIT) return status;
    pf_fault fault;
    pf_fault_set(&fault, "fewer points: a curve needs some twenty",
                 "more than %d points of one part", PF_CURVE_POINTS_MAX);
    return pf_reader_refuse_cell(reader, 0, &fault);
}

static pf_status soa_row(pf_reader *reader)
{
    const pf_curves *curves = reader->curves;
    pf_raw_point point = {0};
    pf_value vds, id;
    pf_status status = read_pulse(reader, curves->pulse, &point.pulse_s);
    if (status == PF_OK) status = read_case(reader, &point.case_degC);
    if (status == PF_OK) status = need(reader, curves->vds, &vds);
    if (status == PF_OK) status = need(reader, curves->id, &id);
    if (status != PF_OK) return status;
    point.x = vds.value;
    point.y = id.value;
    point.negative_x = vds.negative & 1;
    point.negative_y = id.negative & 1;
    return add_point(reader, point);
}

/* The voltage column of a current of a wide sheet: its own, or the one for all. */
static int volts_of(const pf_reader *reader, double pulse_s)
{
    int common = -1;
    for (size_t i = 0; i < reader->column_count; i++) {
        const pf_column *column = &reader->column[i];
        if (column->kind.role != PF_ROLE_VDS) continue;
        if (column->condition == pulse_s) return (int)i;
        if (column->condition == 0) common = (int)i;
    }
    return common;
}

static pf_status wide_cell(pf_reader *reader, size_t index, double case_degC)
{
    double pulse_s = reader->column[index].condition;
    int at = volts_of(reader, pulse_s);
    pf_value vds, id;
    pf_fault fault;
    pf_status status = pf_reader_number(reader, index, &id);
    if (status != PF_OK || id.value != id.value) return status;
    if (at < 0) {
        pf_fault_set(&fault, "a column vds for all, or one beside each current",
                     "no voltage column belongs to this current");
        return pf_reader_refuse_cell(reader, index, &fault);
    }
    status = need(reader, at, &vds);
    if (status != PF_OK) return status;
    pf_reader_tell(reader, part_of(reader), index, id.value, PF_CURRENT);
    pf_raw_point point = {case_degC, pulse_s, vds.value,        id.value,
                          0,         0,       vds.negative & 1, id.negative & 1};
    return add_point(reader, point);
}

static pf_status wide_row(pf_reader *reader)
{
    double case_degC;
    pf_status status = read_case(reader, &case_degC);
    for (size_t i = 0; i < reader->column_count && status == PF_OK; i++)
        if (reader->column[i].kind.role == PF_ROLE_ID) status = wide_cell(reader, i, case_degC);
    return status;
}

static pf_status thermal_row(pf_reader *reader)
{
    const pf_curves *curves = reader->curves;
    pf_value time, zth;
    pf_status status = need(reader, curves->time, &time);
    if (status == PF_OK) status = need(reader, curves->zth, &zth);
    if (status != PF_OK) return status;
    pf_raw_point point = {.pulse_s = time.value, .y = zth.value};
    return add_point(reader, point);
}

static pf_status values_row(pf_reader *reader)
{
    if (reader->kind == PF_KIND_SOA) return soa_row(reader);
    if (reader->kind == PF_KIND_SOA_WIDE) return wide_row(reader);
    return thermal_row(reader);
}

/* --- Bad rows ------------------------------------------------------------------------------ */

/* Keeps a row's text until it is known whether its part is good. */
static void keep_row(pf_reader *reader, gather *part)
{
    if (!reader->options->keep_good) return;
    pf_buffer_print(&part->rows, "%zu", reader->row->line);
    pf_buffer_add(&part->rows, "", 1);
    for (size_t i = 0; i < reader->column_count; i++) {
        const pf_cell *cell = &reader->row->cell[i];
        pf_buffer_add(&part->rows, cell->text, cell->length + 1);
    }
    pf_buffer_add(&part->rows, reader->reason, strlen(reader->reason) + 1);
}

/* Hands over all rows of a part of which some are bad. */
static void hand_over(pf_reader *reader, const gather *part)
{
    const char *cell[PF_COLUMNS_MAX];
    const char *at = part->rows.text, *end = at ? at + part->rows.length : at;
    while (at && at < end) {
        size_t line = 0;
        for (; *at; at++)
            line = line * 10 + (size_t)(*at - '0');
        at++;
        for (size_t i = 0; i < reader->column_count; i++) {
            cell[i] = at;
            at += strlen(at) + 1;
        }
        const char *reason = *at                 ? at
                             : reader->reason[0] ? reader->reason
                                                 : "another row of the same part is refused";
        pf_reader_bad_row(reader, line, cell, reader->column_count, reason);
        at += strlen(at) + 1;
    }
}

pf_status pf_curves_spoil(pf_reader *reader, pf_slice name, pf_slice maker)
{
    bool found;
    pf_status status = PF_OK;
    for (int path = 0; path < PF_PATH_COUNT && status == PF_OK; path++) {
        status = find_part(reader, name, maker, (pf_thermal_path)path, &found);
        if (status == PF_OK && found) reader->curves->item[reader->curves->last].bad = true;
    }
    return status;
}

/* Finds the part that the row at hand belongs to. */
static pf_status settle_part(pf_reader *reader, bool *found)
{
    pf_slice name, maker;
    pf_thermal_path path;
    pf_status status = pf_reader_names(reader, &name, &maker);
    if (status == PF_OK) status = pf_reader_path(reader, reader->curves->path, &path);
    *found = name.length > 0;
    if (status == PF_OK && *found) status = find_part(reader, name, maker, path, found);
    if (status == PF_OK && *found && !reader->row_refused) remember(reader);
    return status;
}

pf_status pf_curves_row(pf_reader *reader)
{
    pf_curves *curves = reader->curves;
    bool found = true;
    pf_status status = PF_OK;
    if (!is_last(reader)) status = settle_part(reader, &found);
    if (status != PF_OK) return status;
    if (!found) {
        if (reader->options->keep_good) reader->file_refused = true; /* whose curve is it? */
        return PF_OK;
    }
    status = values_row(reader);
    gather *part = &curves->item[curves->last];
    part->bad |= reader->row_refused;
    if (status == PF_OK) keep_row(reader, part);
    return status;
}

void pf_curves_columns(pf_reader *reader)
{
    pf_curves *curves = reader->curves;
    bool foster = reader->kind == PF_KIND_FOSTER;
    curves->pulse = pf_reader_find(reader, PF_ROLE_PULSE, NULL);
    curves->vds = pf_reader_find(reader, PF_ROLE_VDS, NULL);
    curves->id = pf_reader_find(reader, PF_ROLE_ID, NULL);
    curves->soa_case = pf_reader_find(reader, PF_ROLE_SOA_CASE, NULL);
    curves->time = pf_reader_find(reader, foster ? PF_ROLE_FOSTER_TAU : PF_ROLE_TIME, NULL);
    curves->zth = pf_reader_find(reader, foster ? PF_ROLE_FOSTER_R : PF_ROLE_ZTH, NULL);
    curves->path = pf_reader_find(reader, PF_ROLE_ZTH_PATH, NULL);
}

pf_status pf_curves_finish(pf_reader *reader)
{
    pf_curves *curves = reader->curves;
    pf_status status = PF_OK;
    for (size_t i = 0; i < curves->count && status == PF_OK; i++) {
        gather *part = &curves->item[i];
        pf_part_change *change = &reader->changes->item[part->change];
        pf_curve_place place = {NULL, change->part.name, part->line};
        reader->reason[0] = '\0';
        bool good = !part->bad;
        if (part->points.count > 0 && good)
            status = pf_curve_install(reader, &part->points, reader->kind, part->path, &place,
                                      change, &good);
        if (!good) hand_over(reader, part);
        if (status == PF_OK) status = pf_buffer_status(&part->rows);
        gather_clear(part);
    }
    return status;
}
