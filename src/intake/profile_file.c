/* profile_file.c: a profile laid out like a data-sheet table: parameter,min,typ,max,unit,note.
**
** Numbers are kept with their signs until the whole file is read: whether a minus belongs there is
** the supply's and the polarity's matter, and their rows may come last.
*/
#include "base/number.h"
#include "intake/sheet.h"

#include <math.h>
#include <passfet/intake.h>
#include <stdio.h>
#include <string.h>

enum { PARAMETER, MIN, TYP, MAX, UNIT, NOTE };

/* The text settings, in the order of settings[]. */
typedef enum setting {
    POLARITY,
    SWITCH_SIDE,
    START_CONTROL,
    START_FROM,
    DERATING,
    BEYOND_SOA,
    SETTINGS
} setting;

typedef struct setting_fact {
    const char *name;
    const char *words; /* `|` between, their order is their number */
    const char *right;
} setting_fact;

static const setting_fact settings[] = {
    [POLARITY] = {"polarity", "N|P", "N or P"},
    [SWITCH_SIDE] = {"switch_side", "high|low", "high or low"},
    [START_CONTROL] = {"start_control", "slew|current_limit|power_limit|foldback",
                       "slew, current_limit, power_limit or foldback"},
    [START_FROM] = {"start_from", "running|ambient", "running or ambient"},
    [DERATING] = {"derating", NULL, "the name of a derating rule"},
    [BEYOND_SOA] = {"beyond_soa", "unassessed|extend", "unassessed or extend"},
};

typedef struct profile_reading {
    pf_sheet *sheet;
    pf_profile *profile;
    const pf_derating_rules *rules;
    size_t line[PF_PARAMETER_COUNT]; /* 0: not in the file */
    size_t setting_line[SETTINGS];
    pf_status status; /* of reporting from pf_profile_finish */
} profile_reading;

static pf_status refuse(profile_reading *reading, const char *column, pf_slice text,
                        const char *right, const char *wrong)
{
    pf_fault fault;
    pf_fault_set(&fault, right, "%s", wrong);
    return pf_sheet_refuse(reading->sheet, column, text, &fault);
}

static pf_slice text_of(const profile_reading *reading, size_t column)
{
    pf_slice text = pf_sheet_text(reading->sheet, column);
    return pf_not_stated(text) ? (pf_slice){"", 0} : text;
}

/* --- Text settings ------------------------------------------------------------------------- */

/* The number of a word in a list, -1 for none. */
static int word_in(pf_slice text, const char *words)
{
    char folded[PF_FOLDED_ROOM], one[PF_FOLDED_ROOM];
    pf_fold(text, folded);
    for (int number = 0;; number++) {
        size_t length = strcspn(words, "|");
        pf_fold(pf_slice_from(words, length), one);
        if (strcmp(folded, one) == 0) return number;
        if (words[length] == '\0') return -1;
        words += length + 1;
    }
}

static pf_status take_derating(profile_reading *reading, pf_slice text)
{
    char name[64], right[200];
    snprintf(name, sizeof name, "%.*s", text.length < 63 ? (int)text.length : 63, text.text);
    const pf_derating *rule = reading->rules ? pf_derating_rule_find(reading->rules, name) : NULL;
    if (rule) {
        reading->profile->derating = *rule;
        return PF_OK;
    }
    size_t at = (size_t)snprintf(right, sizeof right, "one of the rules at hand:");
    for (size_t i = 0; reading->rules && i < reading->rules->count && at < sizeof right; i++)
        at += (size_t)snprintf(right + at, sizeof right - at, "%s %s", i ? "," : "",
                               reading->rules->item[i].name);
    bool any = reading->rules && reading->rules->count > 0;
    return refuse(reading, "derating", text, any ? right : "a file of derating rules",
                  any ? "no derating rule has this name" : "no derating rules are at hand");
}

static void apply_setting(pf_profile *profile, setting which, int word)
{
    if (which == POLARITY) profile->polarity = word ? PF_P_CHANNEL : PF_N_CHANNEL;
    if (which == SWITCH_SIDE) profile->side = word ? PF_LOW_SIDE : PF_HIGH_SIDE;
    if (which == START_CONTROL) profile->control = (pf_start_control)(word + PF_START_SLEW);
    if (which == START_FROM) profile->start_from_ambient = word == 1;
    if (which == BEYOND_SOA) profile->extend_soa = word == 1;
}

static pf_status take_setting(profile_reading *reading, setting which)
{
    const setting_fact *fact = &settings[which];
    pf_slice text = text_of(reading, TYP);
    if (reading->setting_line[which] > 0)
        return refuse(reading, fact->name, text, "each parameter once",
                      "this parameter stands in the file already");
    reading->setting_line[which] = reading->sheet->row->line;
    if (text_of(reading, MIN).length + text_of(reading, MAX).length > 0 || text.length == 0)
        return refuse(reading, fact->name, text, fact->right, "a text setting stands in typ alone");
    if (which == DERATING) return take_derating(reading, text);
    int word = word_in(text, fact->words);
    if (word < 0)
        return refuse(reading, fact->name, text, fact->right, "no setting of this parameter");
    apply_setting(reading->profile, which, word);
    return PF_OK;
}

/* --- Numbers ------------------------------------------------------------------------------- */

static bool stated(double value)
{
    return pf_is_stated(value);
}

/* The unit of the row as a factor, 0 where none stands there. */
static pf_status take_unit(profile_reading *reading, const pf_parameter_fact *fact, double *factor)
{
    char right[80];
    pf_slice unit = text_of(reading, UNIT);
    bool plain = *pf_quantity_unit(fact->quantity) == '\0';
    *factor = 0;
    if (unit.length == 0 || (plain && pf_slice_is(unit, "1"))) return PF_OK;
    if (pf_column_unit_read(unit, fact->quantity, factor) == PF_OK) return PF_OK;
    snprintf(right, sizeof right, plain ? "no unit" : "a unit such as %s",
             pf_quantity_unit(fact->quantity));
    *factor = 1;
    return refuse(reading, fact->name, unit, right, "no unit of this parameter");
}

static pf_status take_number(profile_reading *reading, const pf_parameter_fact *fact, size_t column,
                             double factor, double *value)
{
    pf_value read;
    pf_fault fault;
    pf_slice text = pf_sheet_text(reading->sheet, column);
    const pf_value_rule rule = {fact->quantity, factor, -1e300, 1e300,
                                false,          false,  false,  PF_BOUND_NONE};
    pf_status status = pf_value_read(text, &rule, &reading->sheet->style, &read, &fault);
    *value = read.value;
    if (status != PF_BAD_INPUT) return status;
    *value = PF_NONE;
    return pf_sheet_refuse(reading->sheet, fact->name, text, &fault);
}

static pf_status take_interval(profile_reading *reading, pf_parameter parameter)
{
    const pf_parameter_fact *fact = &pf_parameter_facts()[parameter];
    pf_interval *value = &reading->profile->value[parameter];
    double factor;
    size_t before = reading->sheet->problems->refusals;
    if (reading->line[parameter] > 0)
        return refuse(reading, fact->name, (pf_slice){"", 0}, "each parameter once",
                      "this parameter stands in the file already");
    reading->line[parameter] = reading->sheet->row->line;
    if (parameter == PF_RETRY_COUNT && pf_slice_is(text_of(reading, TYP), "endless")) {
        reading->profile->endless_retry = true;
        return PF_OK;
    }
    pf_status status = take_unit(reading, fact, &factor);
    if (status == PF_OK) status = take_number(reading, fact, MIN, factor, &value->min);
    if (status == PF_OK) status = take_number(reading, fact, TYP, factor, &value->typ);
    if (status == PF_OK) status = take_number(reading, fact, MAX, factor, &value->max);
    if (status != PF_OK || reading->sheet->problems->refusals > before) return status;
    if (stated(value->min) || stated(value->typ) || stated(value->max)) {
        reading->profile->stated[parameter] = true;
        return PF_OK;
    }
    return refuse(reading, fact->name, (pf_slice){"", 0}, "a value in min, typ or max, or no row",
                  "no value");
}

static pf_status refuse_unknown(profile_reading *reading, pf_slice name)
{
    char folded[PF_FOLDED_ROOM], other[PF_FOLDED_ROOM], right[120] = "a parameter of docs/csv.md";
    pf_fold(name, folded);
    for (size_t i = 0; i < PF_PARAMETER_COUNT + SETTINGS; i++) {
        const char *known = i < PF_PARAMETER_COUNT ? pf_parameter_facts()[i].name
                                                   : settings[i - PF_PARAMETER_COUNT].name;
        pf_fold(pf_slice_from(known, strlen(known)), other);
        if (pf_near(folded, other)) snprintf(right, sizeof right, "did you mean %s?", known);
    }
    return refuse(reading, NULL, name, right, "unknown parameter");
}

static pf_status take(pf_sheet *sheet, void *context)
{
    profile_reading *reading = context;
    char folded[PF_FOLDED_ROOM];
    pf_slice name = pf_sheet_text(sheet, PARAMETER);
    pf_fold(name, folded);
    for (int i = 0; i < PF_PARAMETER_COUNT && *folded; i++)
        if (pf_folded_in(folded, pf_parameter_facts()[i].name))
            return take_interval(reading, (pf_parameter)i);
    for (int i = 0; i < SETTINGS && *folded; i++)
        if (pf_folded_in(folded, settings[i].name)) return take_setting(reading, (setting)i);
    return refuse_unknown(reading, name);
}

/* --- The whole ----------------------------------------------------------------------------- */

static pf_status refuse_parameter(profile_reading *reading, pf_parameter parameter,
                                  const char *right, const char *wrong)
{
    pf_fault fault;
    pf_fault_set(&fault, right, "%s", wrong);
    return pf_sheet_refuse_at(reading->sheet, reading->line[parameter],
                              pf_parameter_facts()[parameter].name, (pf_slice){"", 0}, &fault);
}

static bool any_negative(const pf_interval *value)
{
    return value->min < 0 || value->typ < 0 || value->max < 0;
}

/* Magnitudes; min and max change places where their order was the signed one. */
static void take_magnitudes(pf_interval *value)
{
    value->min = fabs(value->min);
    value->typ = fabs(value->typ);
    value->max = fabs(value->max);
    if (value->min > value->typ || value->typ > value->max || value->min > value->max) {
        double least = value->max;
        value->max = value->min;
        value->min = least;
    }
}

/* A sign is dropped where the supply is negative, or the part is P-channel. */
static pf_status settle_sign(profile_reading *reading, pf_parameter parameter)
{
    pf_interval *value = &reading->profile->value[parameter];
    pf_quantity quantity = pf_parameter_facts()[parameter].quantity;
    bool signed_kind = quantity == PF_VOLTAGE || quantity == PF_CURRENT;
    if (!signed_kind || !any_negative(value)) return PF_OK;
    if (value->min > 0 || value->typ > 0 || value->max > 0)
        return refuse_parameter(reading, parameter, "one sign throughout",
                                "positive and negative values in one row");
    bool supply = parameter == PF_SUPPLY_VOLTAGE;
    if (!supply && !reading->profile->negative_supply && reading->profile->polarity != PF_P_CHANNEL)
        return PF_OK; /* the range check says so */
    take_magnitudes(value);
    return PF_OK;
}

/* One given number stands for all three; of two, the third lies between or at the end given. */
static void fill(pf_interval *value)
{
    if (!stated(value->typ) && stated(value->min) && stated(value->max))
        value->typ = (value->min + value->max) / 2;
    if (!stated(value->typ)) value->typ = stated(value->min) ? value->min : value->max;
    if (!stated(value->min)) value->min = value->typ;
    if (!stated(value->max)) value->max = value->typ;
}

static pf_status check_interval(profile_reading *reading, pf_parameter parameter)
{
    const pf_parameter_fact *fact = &pf_parameter_facts()[parameter];
    const pf_interval *value = &reading->profile->value[parameter];
    char low[PF_UNIT_ROOM], high[PF_UNIT_ROOM], shown[PF_UNIT_ROOM], right[180], wrong[120];
    if (value->min > value->typ || value->typ > value->max)
        return refuse_parameter(reading, parameter, "min <= typ <= max",
                                "min, typ and max out of order");
    if (value->min >= fact->lowest && value->max <= fact->highest) return PF_OK;
    double bad = value->min < fact->lowest ? value->min : value->max;
    pf_value_print(low, fact->lowest, fact->quantity, 6);
    pf_value_print(high, fact->highest, fact->quantity, 6);
    pf_value_print(shown, bad, fact->quantity, 6);
    snprintf(right, sizeof right, "a value from %s to %s", low, high);
    snprintf(wrong, sizeof wrong, "%s is not possible here", shown);
    return refuse_parameter(reading, parameter, right, wrong);
}

static void on_finding(void *context, pf_parameter parameter, const char *wrong, const char *right)
{
    profile_reading *reading = context;
    pf_fault fault;
    bool known = parameter < PF_PARAMETER_COUNT;
    if (known && reading->line[parameter] > 0 && !reading->profile->stated[parameter] &&
        !(parameter == PF_RETRY_COUNT))
        return; /* its row is there and was refused */
    size_t line =
        known && reading->line[parameter] ? reading->line[parameter] : reading->sheet->last_line;
    const char *name = known ? pf_parameter_facts()[parameter].name : NULL;
    pf_fault_set(&fault, right, "%s", wrong);
    pf_status status = pf_sheet_refuse_at(reading->sheet, line, name, (pf_slice){"", 0}, &fault);
    if (reading->status == PF_OK) reading->status = status;
}

/* What the start control does not use is most likely meant for another control. */
static pf_status warn_unused(profile_reading *reading)
{
    static const struct {
        pf_parameter parameter;
        pf_start_control control;
    } owned[] = {{PF_OUTPUT_SLEW, PF_START_SLEW},
                 {PF_GATE_CURRENT, PF_START_SLEW},
                 {PF_GATE_CAPACITANCE, PF_START_SLEW},
                 {PF_POWER_LIMIT, PF_START_POWER_LIMIT},
                 {PF_FOLDBACK_CURRENT, PF_START_FOLDBACK}};
    const pf_profile *profile = reading->profile;
    pf_status status = PF_OK;
    for (size_t i = 0; i < sizeof owned / sizeof *owned && status == PF_OK; i++) {
        pf_parameter parameter = owned[i].parameter;
        if (!profile->stated[parameter] || profile->control == owned[i].control ||
            profile->control == PF_START_NONE)
            continue;
        pf_place place = {reading->sheet->file, reading->line[parameter],
                          pf_parameter_facts()[parameter].name, NULL};
        status =
            pf_problems_add(reading->sheet->problems, PF_SEVERITY_WARNING, place,
                            "look whether start_control is right", "not used: start_control is %s",
                            pf_start_control_text(profile->control));
    }
    return status;
}

static pf_status settle(profile_reading *reading)
{
    pf_profile *profile = reading->profile;
    pf_status status = PF_OK;
    profile->negative_supply = any_negative(&profile->value[PF_SUPPLY_VOLTAGE]);
    for (int i = 0; i < PF_PARAMETER_COUNT && status == PF_OK; i++) {
        if (!profile->stated[i]) continue;
        status = settle_sign(reading, (pf_parameter)i);
        fill(&profile->value[i]);
        if (status == PF_OK) status = check_interval(reading, (pf_parameter)i);
    }
    if (status == PF_OK) status = warn_unused(reading);
    if (status != PF_OK) return status;
    pf_status finished = pf_profile_finish(profile, on_finding, reading);
    return finished == PF_OK || finished == PF_BAD_INPUT ? reading->status : finished;
}

static pf_status read_profile(const pf_source *source, const pf_derating_rules *rules,
                              pf_profile *profile, pf_problems *problems)
{
    size_t before = problems->refusals;
    profile_reading reading = {.profile = profile, .rules = rules};
    pf_sheet sheet = {.problems = problems,
                      .column_count = 6,
                      .column = {{.names = "parameter|name", .required = true},
                                 {.names = "min|minimum"},
                                 {.names = "typ|typical|nom|nominal|value", .required = true},
                                 {.names = "max|maximum"},
                                 {.names = "unit|units"},
                                 {.names = "note|notes|comment|remark"}},
                      .take = take,
                      .context = &reading};
    reading.sheet = &sheet;
    pf_profile_init(profile);
    pf_base_name(source->name, profile->name, sizeof profile->name);
    pf_status status = pf_sheet_read(&sheet, source);
    bool rows = sheet.place[PARAMETER] >= 0 && sheet.place[TYP] >= 0;
    if (status != PF_OK && !(status == PF_BAD_INPUT && rows)) return status;
    pf_status settled = settle(&reading);
    if (settled != PF_OK) return settled;
    return problems->refusals > before ? PF_BAD_INPUT : PF_OK;
}

pf_status pf_profile_read(const char *name, const char *bytes, size_t length,
                          const pf_derating_rules *rules, pf_profile *profile,
                          pf_problems *problems)
{
    pf_source source = {name, bytes ? bytes : "", length};
    return read_profile(&source, rules, profile, problems);
}

pf_status pf_profile_read_file(const char *path, const pf_derating_rules *rules,
                               pf_profile *profile, pf_problems *problems)
{
    pf_source source = {.name = path};
    return read_profile(&source, rules, profile, problems);
}
