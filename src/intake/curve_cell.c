/* curve_cell.c: the grammars of the `soa` and `zth` cells.
**
**   soa   = curve { "|" curve }       curve = pulse [ "@" case ] pair { pair }
**                                     pair = volts ":" amperes
**   zth   = curve { "|" curve }       curve = [ "case" | "ambient" ] point { point }
**                                           | [ "case" | "ambient" ] "foster" term { term }
**                                     point = time ":" kelvin per watt, term the other way round
** Blanks separate; a pulse width may hold a blank before its unit (`10 ms`). A bar at the end is a fault.
*/
#include "intake/curve_cell.h"
#include "base/memory.h"

#include <passfet/intake.h>
#include <string.h>

static const pf_value_rule pulse_rule = {PF_TIME, 0, 1e-9, 1e5, false, false, false, PF_BOUND_NONE};
static const pf_value_rule vds_rule = {PF_VOLTAGE, 0,     1e-6,  5000,
                                       true,       false, false, PF_BOUND_NONE};
static const pf_value_rule id_rule = {PF_CURRENT, 0,     1e-9,  50000,
                                      true,       false, false, PF_BOUND_NONE};
static const pf_value_rule zth_rule = {PF_THERMAL, 0,     1e-6,  2000,
                                       false,      false, false, PF_BOUND_NONE};
static const pf_value_rule tau_rule = {PF_TIME, 0, 1e-10, 1e6, false, false, false, PF_BOUND_NONE};
static const pf_value_rule case_rule = {PF_TEMPERATURE, 0,     -60,   300,
                                        false,          false, false, PF_BOUND_NONE};

pf_status pf_raw_points_add(pf_raw_points *points, pf_raw_point point)
{
    if (points->count == PF_CURVE_POINTS_MAX) return PF_LIMIT;
    pf_status status =
        pf_grow((void **)&points->item, &points->capacity, points->count + 1, sizeof *points->item);
    if (status != PF_OK) return status;
    point.order = (uint32_t)points->count & 0x3FFFFFFF;
    points->item[points->count++] = point;
    return PF_OK;
}

void pf_raw_points_clear(pf_raw_points *points)
{
    pf_free(points->item);
    *points = (pf_raw_points){0};
}

pf_status pf_pulse_read(pf_slice text, const pf_value_rule *rule, pf_number_style *style,
                        double *pulse_s, pf_fault *fault)
{
    pf_value value;
    if (pf_slice_is(text, "dc") || pf_slice_is(text, "d.c.")) {
        *pulse_s = PF_DC;
        return PF_OK;
    }
    pf_status status = pf_value_read(text, rule, style, &value, fault);
    *pulse_s = value.value;
    if (status == PF_OK && value.value != value.value)
        return pf_fault_set(fault, "a time such as 10 ms, or dc", "no pulse width");
    return status;
}

/* The next piece between blanks; empty at the end. */
static pf_slice next_piece(pf_slice *rest)
{
    *rest = pf_trim(*rest);
    size_t end = 0;
    while (end < rest->length && pf_blank_length(rest->text + end, rest->length - end) == 0)
        end++;
    pf_slice piece = {rest->text, end};
    *rest = (pf_slice){rest->text + end, rest->length - end};
    return piece;
}

/* Words about which piece of the cell is wrong, in front of what is wrong with it. */
static pf_status blame(pf_slice piece, pf_fault *fault)
{
    pf_fault inner = *fault;
    return pf_fault_set(fault, inner.right, "`%.*s`: %.120s",
                        piece.length < 40 ? (int)piece.length : 40, piece.text, inner.wrong);
}

/* Both numbers of a pair; neither may be missing. */
static pf_status read_pair(pf_slice piece, const pf_value_rule *left_rule,
                           const pf_value_rule *right_rule, pf_number_style *style, pf_value *left,
                           pf_value *right, pf_fault *fault)
{
    const char *colon = memchr(piece.text, ':', piece.length);
    if (!colon)
        return pf_fault_set(fault, "pairs such as 10:100",
                            "no pair of numbers with a colon between");
    size_t at = (size_t)(colon - piece.text);
    pf_slice behind = {colon + 1, piece.length - at - 1};
    pf_status status = pf_value_read((pf_slice){piece.text, at}, left_rule, style, left, fault);
    if (status == PF_OK) status = pf_value_read(behind, right_rule, style, right, fault);
    if (status == PF_OK && (left->value != left->value || right->value != right->value))
        return pf_fault_set(fault, "two numbers", "half of the pair is missing");
    return status;
}

static pf_status add_point(pf_raw_points *points, pf_raw_point point, pf_fault *fault)
{
    pf_status status = pf_raw_points_add(points, point);
    return status == PF_LIMIT ? pf_fault_set(fault, "fewer points", "more than 10,000 points")
                              : status;
}

/* A case temperature behind an `@`, taken off the piece. */
static pf_status read_case(pf_slice *piece, pf_number_style *style, double *case_degC,
                           pf_fault *fault)
{
    pf_value value;
    const char *at = memchr(piece->text, '@', piece->length);
    if (!at) return PF_OK;
    size_t length = (size_t)(at - piece->text);
    pf_slice behind = {at + 1, piece->length - length - 1};
    pf_status status = pf_value_read(behind, &case_rule, style, &value, fault);
    if (status == PF_OK && value.value != value.value)
        status = pf_fault_set(fault, "a case temperature such as 1ms@75", "nothing behind the @");
    *case_degC = value.value;
    piece->length = length;
    return status;
}

/* The pulse width in front of a curve, with a blank inside or without, and its case temperature. */
static pf_status read_pulse(pf_slice *rest, pf_number_style *style, double *pulse_s,
                            double *case_degC, pf_fault *fault)
{
    pf_slice piece = next_piece(rest), saved = *rest;
    pf_slice unit = next_piece(rest);
    bool split = unit.length > 0 && !memchr(unit.text, ':', unit.length);
    if (split)
        piece.length = (size_t)(unit.text + unit.length - piece.text);
    else
        *rest = saved;
    if (memchr(piece.text, ':', piece.length)) {
        pf_fault_set(fault, "a pulse width in front of each curve, such as 10ms or dc",
                     "a curve without a pulse width");
        return blame(piece, fault);
    }
    pf_slice whole = piece;
    pf_status status = read_case(&piece, style, case_degC, fault);
    if (status == PF_OK) status = pf_pulse_read(piece, &pulse_rule, style, pulse_s, fault);
    return status == PF_BAD_INPUT ? blame(whole, fault) : status;
}

static pf_status read_curve(pf_slice text, double case_degC, pf_number_style *style,
                            pf_raw_points *points, pf_fault *fault)
{
    double pulse_s;
    pf_slice rest = text, piece;
    pf_value vds, id;
    bool any = false;
    pf_status status = read_pulse(&rest, style, &pulse_s, &case_degC, fault);
    if (status != PF_OK) return status;
    while ((piece = next_piece(&rest)).length > 0) {
        status = read_pair(piece, &vds_rule, &id_rule, style, &vds, &id, fault);
        if (status == PF_BAD_INPUT) return blame(piece, fault);
        if (status != PF_OK) return status;
        pf_raw_point point = {case_degC, pulse_s, vds.value,        id.value,
                              0,         0,       vds.negative & 1, id.negative & 1};
        status = add_point(points, point, fault);
        if (status != PF_OK) return status;
        any = true;
    }
    if (any) return PF_OK;
    return pf_fault_set(fault, "at least one V:A pair behind the pulse width",
                        "a curve without a point");
}

bool pf_curve_cell_next(pf_slice *text, pf_slice *curve)
{
    if (!text->text) return false;
    const char *bar = memchr(text->text, '|', text->length);
    size_t length = bar ? (size_t)(bar - text->text) : text->length;
    *curve = pf_trim((pf_slice){text->text, length});
    *text = bar ? (pf_slice){bar + 1, text->length - length - 1} : (pf_slice){NULL, 0};
    return true;
}

static pf_status refuse_empty(pf_fault *fault)
{
    return pf_fault_set(fault, "a curve on both sides of each bar", "an empty curve");
}

pf_status pf_soa_cell_read(pf_slice text, double case_degC, pf_number_style *style,
                           pf_raw_points *points, pf_fault *fault)
{
    pf_slice curve;
    while (pf_curve_cell_next(&text, &curve)) {
        if (curve.length == 0) return refuse_empty(fault);
        pf_status status = read_curve(curve, case_degC, style, points, fault);
        if (status != PF_OK) return status;
    }
    return PF_OK;
}

/* Takes a word off the front, if it stands there. */
static bool take_word(pf_slice *text, const char *word)
{
    pf_slice rest = *text, piece = next_piece(&rest);
    if (!pf_slice_is(piece, word)) return false;
    *text = rest;
    return true;
}

void pf_zth_cell_words(pf_slice *curve, pf_thermal_path *path, bool *foster)
{
    if (take_word(curve, "ambient"))
        *path = PF_JUNCTION_AMBIENT;
    else if (take_word(curve, "case"))
        *path = PF_JUNCTION_CASE;
    *foster = take_word(curve, "foster");
}

pf_status pf_zth_cell_read(pf_slice text, bool foster, pf_number_style *style,
                           pf_raw_points *points, pf_fault *fault)
{
    pf_slice piece;
    pf_value left, right;
    size_t before = points->count;
    while ((piece = next_piece(&text)).length > 0) {
        pf_status status = read_pair(piece, foster ? &zth_rule : &pulse_rule,
                                     foster ? &tau_rule : &zth_rule, style, &left, &right, fault);
        if (status == PF_BAD_INPUT) return blame(piece, fault);
        if (status != PF_OK) return status;
        double time_s = foster ? right.value : left.value, KpW = foster ? left.value : right.value;
        pf_raw_point point = {0, time_s, 0, KpW, 0, 0, 0, 0};
        status = add_point(points, point, fault);
        if (status != PF_OK) return status;
    }
    return points->count > before ? PF_OK : refuse_empty(fault);
}
