/* column.c: headers taken apart into name, unit and condition.
**
** A name is tried whole first, then without brackets or a last word that is a unit of the column's
** quantity. So `vds_max (V)`, `Rds on max mohm` and `time_us` are read, and `gate charge` is not a
** gate with the unit charge.
*/
#include "intake/column.h"
#include "base/number.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* A header in pieces; unit and condition may be empty. */
typedef struct pieces {
    pf_slice name, unit, condition;
} pieces;

static pf_slice part_of(pf_slice text, size_t from, size_t to)
{
    return pf_trim((pf_slice){text.text + from, to - from});
}

/* Place of a character, the last one; length where it is not. */
static size_t last_of(pf_slice text, char c)
{
    for (size_t i = text.length; i > 0; i--)
        if (text.text[i - 1] == c) return i - 1;
    return text.length;
}

/* Where a condition begins without `@`: `VGS=`, `V_GS =`. */
static size_t condition_start(pf_slice text)
{
    for (size_t i = 0; i < text.length; i++) {
        pf_slice rest = {text.text + i, text.length - i};
        bool gate = pf_starts(rest, "vgs") || pf_starts(rest, "v_gs");
        if (text.text[i] == '@') return i;
        if (gate && memchr(rest.text, '=', rest.length < 7 ? rest.length : 7)) return i;
        if (i > 0 && pf_starts(rest, " at ") && rest.length > 4 &&
            (rest.text[4] == '-' || (rest.text[4] >= '0' && rest.text[4] <= '9')))
            return i;
    }
    return text.length;
}

/* Takes a unit in square brackets off the end of the text or of what stands before the condition.
 */
static pf_slice take_bracket(pf_slice text, pf_slice *unit)
{
    size_t open = last_of(text, '[');
    if (open == text.length || text.text[text.length - 1] != ']') return text;
    *unit = part_of(text, open + 1, text.length - 1);
    return part_of(text, 0, open);
}

static pieces split(pf_slice header)
{
    pieces found = {0};
    pf_slice text = take_bracket(pf_trim(header), &found.unit);
    size_t cut = condition_start(text);
    found.name = part_of(text, 0, cut);
    if (cut < text.length) {
        size_t mark = text.text[cut] == '@'                               ? 1
                      : pf_starts(part_of(text, cut, text.length), "at ") ? 4
                                                                          : 0;
        found.condition = part_of(text, cut + mark, text.length);
    }
    if (found.unit.length == 0) found.name = take_bracket(found.name, &found.unit);
    /* `RDS(on) max (VGS=10V)`: the bracket belongs to the condition */
    size_t end = found.name.length;
    if (end > 0 && strchr("(,", found.name.text[end - 1]))
        found.name = part_of(found.name, 0, end - 1);
    end = found.condition.length;
    if (end > 0 && found.condition.text[end - 1] == ')' && !memchr(found.condition.text, '(', end))
        found.condition = part_of(found.condition, 0, end - 1);
    return found;
}

static const pf_column_kind *match(pf_slice name, const pf_column_kind *list, size_t count)
{
    char folded[PF_FOLDED_ROOM];
    if (pf_fold(name, folded) == 0) return NULL;
    for (size_t i = 0; i < count; i++)
        if (pf_folded_in(folded, list[i].csv)) return &list[i];
    for (size_t i = 0; i < count; i++)
        if (pf_folded_in(folded, list[i].aliases)) return &list[i];
    return NULL;
}

static bool is_unit(pf_slice text, const pf_column_kind *kind)
{
    double factor;
    return kind->numeric && text.length > 0 &&
           pf_column_unit_read(text, kind->rule.quantity, &factor) == PF_OK;
}

/* The name without a unit in round brackets or as its last word, where that makes it a known one.
 */
static const pf_column_kind *match_with_unit(pieces *found, const pf_column_kind *list,
                                             size_t count)
{
    pf_slice name = found->name, rest, unit;
    const pf_column_kind *kind;
    size_t open = last_of(name, '(');
    if (open < name.length && name.text[name.length - 1] == ')') {
        rest = part_of(name, 0, open);
        unit = part_of(name, open + 1, name.length - 1);
        kind = match(rest, list, count);
        if (kind && (is_unit(unit, kind) || found->condition.length == 0)) {
            *(is_unit(unit, kind) ? &found->unit : &found->condition) = unit;
            return kind;
        }
    }
    for (size_t at = name.length; at > 1; at--) {
        if (!strchr(" _/,", name.text[at - 1])) continue;
        rest = part_of(name, 0, at - 1);
        unit = part_of(name, at, name.length);
        kind = match(rest, list, count);
        if (!kind || !is_unit(unit, kind)) continue;
        found->unit = unit;
        return kind;
    }
    return NULL;
}

/* `10us`, `1 ms`, `dc` behind a stem: the stem's length; the whole length where there is none. */
static size_t pulse_start(pf_slice name, double *pulse_s)
{
    const pf_value_rule rule = {PF_TIME, 0, 1e-9, 1e5, false, false, false, PF_BOUND_NONE};
    pf_number_style style = {'.', 0, 0};
    pf_value value;
    pf_fault fault;
    size_t start = 0;
    if (name.length >= 2 && pf_slice_is(part_of(name, name.length - 2, name.length), "dc")) {
        *pulse_s = PF_DC;
        return name.length - 2;
    }
    while (start < name.length && !(name.text[start] >= '0' && name.text[start] <= '9'))
        start++;
    pf_slice time = part_of(name, start, name.length);
    if (time.length == 0 || pf_value_read(time, &rule, &style, &value, &fault) != PF_OK)
        return name.length;
    *pulse_s = value.value;
    return start;
}

/* A name such as `id_10us`, `Id @ 1 ms (A)`, `dc`, `vds_100ms`: a column of a wide sheet. */
static const pf_column_kind *match_pulse(pieces *found, const pf_column_kind *list, size_t count,
                                         double *pulse_s)
{
    char folded[PF_FOLDED_ROOM];
    pf_slice name = found->name, unit = {0};
    size_t open = last_of(name, '(');
    if (open < name.length && name.text[name.length - 1] == ')') {
        unit = part_of(name, open + 1, name.length - 1);
        name = part_of(name, 0, open);
    }
    pf_slice time = found->condition.length > 0 ? found->condition : name;
    size_t start = pulse_start(time, pulse_s);
    if (start == time.length) return NULL;
    if (found->condition.length == 0)
        name = part_of(name, 0, start);
    else if (start > 0)
        return NULL;
    const pf_column_kind *kind = NULL;
    bool alone = pf_fold(name, folded) == 0; /* the pulse width alone heads its currents */
    for (size_t i = 0; i < count && alone && !kind; i++)
        if (list[i].role == PF_ROLE_ID) kind = &list[i];
    if (!alone) kind = match(name, list, count);
    if (!kind || (kind->role != PF_ROLE_ID && kind->role != PF_ROLE_VDS)) return NULL;
    found->condition.length = 0;
    if (unit.length > 0) found->unit = unit;
    return kind;
}

/* --- Conditions ---------------------------------------------------------------------------- */

/* `4.5 V`, `VGS=10V`, `VGS = -10 V, ID = 30 A`, the unit of the column behind it in some. */
static pf_status read_gate_drive(pieces *found, const pf_column_kind *kind, double *gate_V,
                                 pf_fault *fault)
{
    static const char right[] = "a condition such as `rdson_max @ 4.5 V`";
    pf_number_style style = {'.', 0, 0};
    pf_slice text = found->condition;
    const char *equals = text.length > 0 ? memchr(text.text, '=', text.length) : NULL;
    size_t taken, at = 0;
    double factor = 1;
    if (text.length == 0)
        return pf_fault_set(fault, right, "an Rds(on) without the gate drive that it is rated at");
    if (equals && (pf_starts(text, "vgs") || pf_starts(text, "v_gs")))
        at = (size_t)(equals - text.text) + 1;
    text = part_of(text, at, text.length);
    if (pf_decimal_read(text, &style, gate_V, &taken, fault) != PF_OK || taken == 0)
        return pf_fault_set(fault, right, "the condition does not begin with a gate drive");
    text = part_of(text, taken, text.length);
    size_t word = 0;
    while (word < text.length && !strchr(" ,;([", text.text[word]))
        word++;
    if (word > 0 && pf_unit_read(text.text, word, PF_VOLTAGE, &factor, NULL) == PF_OK)
        text = part_of(text, word, text.length);
    *gate_V = fabs(pf_scale(*gate_V, factor));
    if (!(*gate_V >= 0.1 && *gate_V <= 100))
        return pf_fault_set(fault, right, "a gate drive that is not possible");
    if (text.length > 0 && found->unit.length == 0 && is_unit(text, kind)) {
        found->unit = text;
        text.length = 0;
    }
    found->condition = text;
    return PF_OK;
}

/* A condition that names a temperature other than 25 degC changes what the column means. */
static bool names_other_temperature(pf_slice text)
{
    pf_number_style style = {'.', 0, 0};
    pf_fault fault;
    double value;
    size_t taken;
    for (size_t i = 0; i < text.length; i++) {
        bool starts = (text.text[i] >= '0' && text.text[i] <= '9') &&
                      (i == 0 || !strchr("0123456789.", text.text[i - 1]));
        pf_slice rest = {text.text + i, text.length - i};
        if (!starts || pf_decimal_read(rest, &style, &value, &taken, &fault) != PF_OK || !taken)
            continue;
        pf_slice unit = part_of(rest, taken, rest.length);
        bool degrees = pf_starts(unit, "c") || pf_starts(unit, "deg") ||
                       pf_starts(unit, "\xC2\xB0") || pf_starts(unit, "\xC2\xBA") ||
                       pf_starts(unit, "\xE2\x84\x83");
        if (degrees && value != 25) return true;
    }
    return false;
}

static pf_status settle_condition(pieces *found, const pf_column_kind *kind, pf_column *column,
                                  const char **remark, pf_fault *fault)
{
    if (kind->role == PF_ROLE_RDSON) {
        pf_status status = read_gate_drive(found, kind, &column->condition, fault);
        if (status != PF_OK) return status;
    }
    bool thermal_limit = kind->rating && kind->rule.quantity == PF_TEMPERATURE;
    if (kind->numeric && !thermal_limit && names_other_temperature(found->condition))
        return pf_fault_set(fault, "the value at 25 degC; rename the column if it is another one",
                            "a condition at another temperature than 25 degC");
    if (found->condition.length > 0) *remark = "the condition in its header is not kept";
    return PF_OK;
}

static pf_status settle_column_unit(const pieces *found, const pf_column_kind *kind,
                                    pf_column *column, pf_fault *fault)
{
    if (found->unit.length == 0 || !kind->numeric || kind->rule.quantity == PF_MONEY) return PF_OK;
    if (pf_column_unit_read(found->unit, kind->rule.quantity, &column->kind.rule.factor) == PF_OK)
        return PF_OK;
    bool plain = found->unit.length == 1 && strchr("-1", found->unit.text[0]);
    if (plain && !pf_quantity_needs_unit(kind->rule.quantity)) return PF_OK;
    char right[64];
    const char *unit = pf_quantity_unit(kind->rule.quantity);
    snprintf(right, sizeof right, *unit ? "a unit such as [%s]" : "no unit", unit);
    return pf_fault_set(fault, right, "`%.*s` is no unit of this quantity",
                        found->unit.length < 60 ? (int)found->unit.length : 60, found->unit.text);
}

pf_status pf_column_read(pf_slice header, pf_file_kind file, const pf_column_kind *list,
                         size_t count, pf_column *column, const char **remark, pf_fault *fault)
{
    pieces found = split(header);
    *remark = NULL;
    column->kind = (pf_column_kind){.role = PF_ROLE_IGNORED};
    column->condition = 0;
    const pf_column_kind *kind = NULL;
    if (file == PF_KIND_SOA_WIDE) kind = match_pulse(&found, list, count, &column->condition);
    if (!kind) kind = match(found.name, list, count);
    if (!kind && found.unit.length == 0) kind = match_with_unit(&found, list, count);
    if (!kind) return PF_OK;
    column->kind = *kind;
    if (file == PF_KIND_SOA_WIDE && kind->role == PF_ROLE_ID && column->condition == 0)
        return pf_fault_set(fault, "a header such as id_10us or dc",
                            "a column of currents without a pulse width");
    pf_status status = settle_condition(&found, kind, column, remark, fault);
    return status == PF_OK ? settle_column_unit(&found, kind, column, fault) : status;
}

const pf_column_kind *pf_column_near(pf_slice header, const pf_column_kind *list, size_t count)
{
    char name[PF_FOLDED_ROOM], own[PF_FOLDED_ROOM];
    pieces found = split(header);
    if (pf_fold(found.name, name) == 0) return NULL;
    for (size_t i = 0; i < count; i++) {
        pf_fold(pf_slice_from(list[i].csv, strlen(list[i].csv)), own);
        if (pf_near(name, own)) return &list[i];
    }
    return NULL;
}
