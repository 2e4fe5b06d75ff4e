/* parts_file.c: one row of a parts table into the change of its part. */
#include "base/memory.h"
#include "intake/reader.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* A row on its way into a change. */
typedef struct parts_row {
    pf_part_change fresh;
    pf_slice name, maker;
    char shown[208]; /* the name, for listeners */
    double soa_case_degC;
    pf_thermal_path path;
    int negative; /* first column with a sign that was dropped, -1 for none */
    bool vth_min_negative, vth_max_negative;
} parts_row;

static pf_slice cell_text(const pf_reader *reader, size_t index)
{
    const pf_cell *cell = &reader->row->cell[index];
    return pf_trim((pf_slice){cell->text, cell->length});
}

static uint64_t bit(size_t index)
{
    return UINT64_C(1) << index;
}

static pf_status refuse_blank(pf_reader *reader, size_t index)
{
    pf_fault fault;
    pf_fault_set(&fault, "a value; a part without it cannot be ranked",
                 "this column is required and the cell is blank");
    return pf_reader_refuse_cell(reader, index, &fault);
}

/* --- Cells --------------------------------------------------------------------------------- */

/* A life-cycle status in the words that are kept, from those that people use; NULL for none. */
static const char *status_word(pf_slice text)
{
    static const struct {
        const char *kept, *names;
    } words[] = {
        {"active", "active|production|in production|in volume production"},
        {"not-for-new", "not-for-new|nrnd|not for new design|not for new designs|"
                        "not recommended for new design|not recommended for new designs"},
        {"obsolete", "obsolete|eol|end of life|discontinued"},
        {"banned", "banned"},
    };
    char folded[PF_FOLDED_ROOM];
    pf_fold(text, folded);
    for (size_t i = 0; i < sizeof words / sizeof *words; i++)
        if (pf_folded_in(folded, words[i].names)) return words[i].kept;
    return NULL;
}

static pf_status settle_status(pf_reader *reader, size_t index, pf_slice *text)
{
    pf_fault fault;
    const char *kept = status_word(*text);
    if (kept) {
        *text = pf_slice_from(kept, strlen(kept));
        return PF_OK;
    }
    pf_fault_set(&fault, "active, not-for-new, obsolete or banned", "no life-cycle status");
    return pf_reader_refuse_cell(reader, index, &fault);
}

static pf_status read_text(pf_reader *reader, size_t index, parts_row *row)
{
    size_t count;
    const pf_text_field *field = reader->column[index].kind.text;
    size_t place = (size_t)(field - pf_text_fields(&count));
    pf_slice text = cell_text(reader, index);
    if (place < 2) return PF_OK; /* part and maker: names, not values */
    row->fresh.texts_given |= bit(place);
    pf_status status = PF_OK;
    if (pf_not_stated(text)) return PF_OK;
    if (strcmp(field->csv, "status") == 0) status = settle_status(reader, index, &text);
    if (status != PF_OK || reader->row_refused) return status;
    status = pf_text_copy_n(pf_part_text(&row->fresh.part, field), text.text, text.length);
    if (status == PF_OK)
        pf_reader_tell_text(reader, row->shown, index, pf_part_text_value(&row->fresh.part, field));
    return status;
}

static pf_status read_rating(pf_reader *reader, size_t index, parts_row *row)
{
    size_t count;
    pf_value value;
    const pf_column_kind *kind = &reader->column[index].kind;
    pf_status status = pf_reader_number(reader, index, &value);
    if (status != PF_OK || reader->row_refused) return status;
    *pf_part_rating(&row->fresh.part, kind->rating) = value.value;
    row->fresh.ratings_given |= bit((size_t)(kind->rating - pf_rating_fields(&count)));
    if (value.negative && row->negative < 0) row->negative = (int)index;
    if (value.negative && strcmp(kind->csv, "vth_min") == 0) row->vth_min_negative = true;
    if (value.negative && strcmp(kind->csv, "vth_max") == 0) row->vth_max_negative = true;
    if (kind->required && value.value != value.value) return refuse_blank(reader, index);
    pf_reader_tell(reader, row->shown, index, value.value, kind->rule.quantity);
    return PF_OK;
}

static pf_status read_rdson(pf_reader *reader, size_t index, parts_row *row)
{
    pf_value value;
    pf_status status = pf_reader_number(reader, index, &value);
    row->fresh.rdson_given = true;
    if (status != PF_OK || reader->row_refused) return status;
    pf_reader_tell(reader, row->shown, index, value.value, PF_RESISTANCE);
    if (value.value != value.value) return PF_OK;
    return pf_part_set_rdson(&row->fresh.part, reader->column[index].condition, value.value);
}

static pf_status read_polarity(pf_reader *reader, size_t index, parts_row *row)
{
    static const char *const n_words[] = {"N", "N-channel", "N channel", "N-ch", "NMOS", "nch"};
    static const char *const p_words[] = {"P", "P-channel", "P channel", "P-ch", "PMOS", "pch"};
    pf_slice text = cell_text(reader, index);
    pf_fault fault;
    if (pf_not_stated(text)) return refuse_blank(reader, index);
    for (size_t i = 0; i < sizeof n_words / sizeof *n_words; i++) {
        if (pf_slice_is(text, n_words[i])) row->fresh.part.polarity = PF_N_CHANNEL;
        if (pf_slice_is(text, p_words[i])) row->fresh.part.polarity = PF_P_CHANNEL;
    }
    row->fresh.polarity_given = row->fresh.part.polarity != PF_POLARITY_NONE;
    if (row->fresh.polarity_given) {
        pf_reader_tell_text(reader, row->shown, index, pf_polarity_text(row->fresh.part.polarity));
        return PF_OK;
    }
    pf_fault_set(&fault, "N or P", "no polarity");
    return pf_reader_refuse_cell(reader, index, &fault);
}

pf_status pf_reader_path(pf_reader *reader, int index, pf_thermal_path *path)
{
    pf_fault fault;
    *path = PF_JUNCTION_CASE;
    if (index < 0) return PF_OK;
    pf_slice text = cell_text(reader, (size_t)index);
    if (pf_not_stated(text) || pf_slice_is(text, "case") || pf_slice_is(text, "jc")) return PF_OK;
    *path = PF_JUNCTION_AMBIENT;
    if (pf_slice_is(text, "ambient") || pf_slice_is(text, "ja")) return PF_OK;
    pf_fault_set(&fault, "case or ambient", "no end of a thermal path");
    return pf_reader_refuse_cell(reader, (size_t)index, &fault);
}

/* Points of one curve of a cell, if they could be read, into the change. */
static pf_status install(pf_reader *reader, size_t index, parts_row *row, pf_file_kind kind,
                         pf_thermal_path path, pf_raw_points *points)
{
    bool good;
    char stored[48];
    pf_curve_place place = {reader->column[index].name, row->shown, reader->row->cell[index].line};
    for (size_t i = 0; i < points->count; i++)
        points->item[i].line = (uint32_t)place.line;
    pf_status status = pf_curve_install(reader, points, kind, path, &place, &row->fresh, &good);
    snprintf(stored, sizeof stored, "%zu %s", points->count,
             kind == PF_KIND_FOSTER ? "Foster pairs" : "points");
    pf_reader_tell_text(reader, row->shown, index, stored);
    return status;
}

static pf_status read_soa(pf_reader *reader, size_t index, pf_slice text, parts_row *row)
{
    pf_raw_points points = {0};
    pf_fault fault;
    pf_status status = pf_soa_cell_read(text, row->soa_case_degC, &reader->style, &points, &fault);
    if (status == PF_BAD_INPUT)
        status = pf_reader_refuse_cell(reader, index, &fault);
    else if (status == PF_OK)
        status = install(reader, index, row, PF_KIND_SOA, row->path, &points);
    pf_raw_points_clear(&points);
    return status;
}

static pf_status read_zth(pf_reader *reader, size_t index, pf_slice text, parts_row *row)
{
    pf_slice curve;
    pf_fault fault;
    pf_status status = PF_OK;
    while (status == PF_OK && pf_curve_cell_next(&text, &curve)) {
        pf_raw_points points = {0};
        pf_thermal_path path = row->path;
        bool foster;
        pf_zth_cell_words(&curve, &path, &foster);
        status = pf_zth_cell_read(curve, foster, &reader->style, &points, &fault);
        if (status == PF_OK)
            status =
                install(reader, index, row, foster ? PF_KIND_FOSTER : PF_KIND_ZTH, path, &points);
        pf_raw_points_clear(&points);
        if (status == PF_BAD_INPUT) return pf_reader_refuse_cell(reader, index, &fault);
    }
    return status;
}

/* A curve cell; blank states that the curve is not stated. */
static pf_status read_curve(pf_reader *reader, size_t index, parts_row *row)
{
    bool soa = reader->column[index].kind.role == PF_ROLE_SOA_CELL;
    pf_slice text = cell_text(reader, index);
    if (!pf_not_stated(text)) return (soa ? read_soa : read_zth)(reader, index, text, row);
    if (soa) row->fresh.soa_given = true;
    if (!soa) row->fresh.thermal_given[row->path] = true;
    return PF_OK;
}

static pf_status read_soa_case(pf_reader *reader, int index, parts_row *row)
{
    pf_value value;
    row->soa_case_degC = 25;
    if (index < 0) return PF_OK;
    pf_status status = pf_reader_number(reader, (size_t)index, &value);
    if (value.value == value.value) row->soa_case_degC = value.value;
    return status;
}

static pf_status read_cell(pf_reader *reader, size_t index, parts_row *row)
{
    bool refused = reader->row_refused;
    pf_status status = PF_OK;
    reader->row_refused = false; /* so that readers see their own cell's fate */
    switch (reader->column[index].unread ? PF_ROLE_IGNORED : reader->column[index].kind.role) {
    case PF_ROLE_TEXT:
        status = read_text(reader, index, row);
        break;
    case PF_ROLE_RATING:
        status = read_rating(reader, index, row);
        break;
    case PF_ROLE_RDSON:
        status = read_rdson(reader, index, row);
        break;
    case PF_ROLE_SOA_CELL:
    case PF_ROLE_ZTH_CELL:
        status = read_curve(reader, index, row);
        break;
    default:
        break;
    }
    reader->row_refused |= refused;
    return status;
}

/* --- The row as a whole --------------------------------------------------------------------- */

/* A P-channel sheet that lists thresholds as -1 to -3 V may have either end in either column. */
static void order_thresholds(parts_row *row)
{
    pf_part *part = &row->fresh.part;
    double low = part->vth_min_V, high = part->vth_max_V;
    if (!row->vth_min_negative || !row->vth_max_negative || !(low > high)) return;
    part->vth_min_V = high;
    part->vth_max_V = low;
}

static pf_status check_signs(pf_reader *reader, const parts_row *row)
{
    pf_fault fault;
    if (row->negative < 0 || row->fresh.part.polarity != PF_N_CHANNEL) return PF_OK;
    pf_fault_set(&fault, "a positive value, or polarity P", "negative, and the part is N-channel");
    return pf_reader_refuse_cell(reader, (size_t)row->negative, &fault);
}

/* Whether a second row for a part states what the first one did. */
static bool says_the_same(const pf_part_change *kept, const pf_part_change *fresh, bool *memory)
{
    pf_part both;
    pf_part_init(&both);
    *memory = pf_part_copy(&both, &kept->part) != PF_OK || pf_part_apply(&both, fresh) != PF_OK;
    bool same = !*memory && pf_part_equal(&both, &kept->part);
    pf_part_clear(&both);
    return same;
}

static pf_status refuse_twice(pf_reader *reader, const pf_part_change *kept, size_t index)
{
    pf_fault fault;
    if (kept->file)
        pf_fault_set(&fault, "one row per part and maker",
                     "%s:%zu states other values for the same part", kept->file, kept->line);
    else
        pf_fault_set(&fault, "one row per part and maker",
                     "an earlier row of this run states other values for the same part");
    return pf_reader_refuse_cell(reader, index, &fault);
}

/* Moves what the row states into a change that no other row stated; curves of other files stay. */
static pf_status adopt(pf_reader *reader, pf_part_change *change, pf_part_change *fresh)
{
    bool keep_soa = change->soa_given && fresh->part.soa_count == 0;
    if (keep_soa) fresh->soa_given = false;
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *curve = &fresh->part.thermal[path];
        if (change->thermal_given[path] && curve->point_count + curve->pair_count == 0)
            fresh->thermal_given[path] = false;
    }
    pf_status status = pf_part_apply(&change->part, fresh);
    if (status != PF_OK) return status;
    change->texts_given |= fresh->texts_given;
    change->ratings_given |= fresh->ratings_given;
    change->polarity_given = true;
    change->rdson_given |= fresh->rdson_given;
    change->soa_given |= fresh->soa_given;
    for (int path = 0; path < PF_PATH_COUNT; path++)
        change->thermal_given[path] |= fresh->thermal_given[path];
    if (fresh->raw_curves && !change->raw_curves) {
        change->raw_curves = fresh->raw_curves;
        fresh->raw_curves = NULL;
    }
    pf_free(change->file);
    change->file = NULL;
    change->line = reader->row->line;
    return pf_text_copy(&change->file, reader->file);
}

static bool same_curve(const pf_thermal_curve *left, const pf_thermal_curve *right)
{
    if (left->point_count != right->point_count || left->pair_count != right->pair_count)
        return false;
    if (left->point_count)
        return memcmp(left->point, right->point, left->point_count * sizeof *left->point) == 0;
    return !left->pair_count ||
           memcmp(left->pair, right->pair, left->pair_count * sizeof *left->pair) == 0;
}

/* A curve that a file and a cell of one run both state must be the same in both. */
static bool curves_clash(const pf_part_change *kept, const pf_part_change *fresh)
{
    bool clash = false;
    if (kept->soa_given && fresh->part.soa_count > 0)
        clash = kept->part.soa_count != fresh->part.soa_count ||
                memcmp(kept->part.soa, fresh->part.soa,
                       kept->part.soa_count * sizeof *kept->part.soa) != 0;
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *old = &kept->part.thermal[path], *now = &fresh->part.thermal[path];
        if (!kept->thermal_given[path] || now->point_count + now->pair_count == 0) continue;
        clash |= !same_curve(old, now);
    }
    return clash;
}

static pf_status refuse_ambiguous(pf_reader *reader, size_t index)
{
    pf_fault fault;
    pf_fault_set(&fault, "a maker in every row that names this part",
                 "two makers share this part number, and a row does not say which is meant");
    return pf_reader_refuse_cell(reader, index, &fault);
}

static pf_status merge(pf_reader *reader, parts_row *row)
{
    size_t index, at = (size_t)reader->part_column;
    bool memory = false;
    pf_status status =
        pf_registry_find(&reader->registry, reader->changes, row->name, row->maker, &index);
    if (status == PF_NOT_FOUND) return refuse_ambiguous(reader, at);
    if (status != PF_OK) return status;
    pf_part_change *change = &reader->changes->item[index];
    if (reader->row_refused) {
        change->refused = true;
    } else if (change->polarity_given) {
        bool same = says_the_same(change, &row->fresh, &memory);
        if (memory) return PF_NO_MEMORY;
        if (same) return PF_OK;
        change->refused = true;
        return refuse_twice(reader, change, at);
    } else if (curves_clash(change, &row->fresh)) {
        pf_fault fault;
        pf_fault_set(&fault, "each curve once",
                     "another file of this run states this part's curve");
        change->refused = true;
        return pf_reader_refuse_cell(reader, at, &fault);
    } else {
        return adopt(reader, change, &row->fresh);
    }
    return PF_OK;
}

static pf_status read_row(pf_reader *reader, parts_row *row)
{
    pf_status status = pf_reader_names(reader, &row->name, &row->maker);
    snprintf(row->shown, sizeof row->shown, "%.*s", (int)row->name.length, row->name.text);
    if (status == PF_OK)
        status = read_soa_case(reader, pf_reader_find(reader, PF_ROLE_SOA_CASE, NULL), row);
    if (status == PF_OK)
        status = pf_reader_path(reader, pf_reader_find(reader, PF_ROLE_ZTH_PATH, NULL), &row->path);
    int polarity = pf_reader_find(reader, PF_ROLE_POLARITY, NULL); /* curves ask for it */
    if (status == PF_OK && polarity >= 0) status = read_polarity(reader, (size_t)polarity, row);
    for (size_t i = 0; i < reader->column_count && status == PF_OK; i++)
        status = read_cell(reader, i, row);
    if (status == PF_OK) status = check_signs(reader, row);
    order_thresholds(row);
    return status;
}

pf_status pf_parts_row(pf_reader *reader)
{
    parts_row row = {.negative = -1};
    pf_part_change_init(&row.fresh);
    pf_status status = read_row(reader, &row);
    if (status == PF_OK && row.name.length > 0) status = merge(reader, &row);
    if (status == PF_OK && reader->row_refused) pf_reader_bad_row_now(reader);
    pf_part_change_clear(&row.fresh);
    return status;
}
