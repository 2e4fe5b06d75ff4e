/* rules_file.c: derating rules of published standards, or a team's own. */
#include "base/memory.h"
#include "base/number.h"
#include "intake/sheet.h"

#include <passfet/intake.h>
#include <stdio.h>
#include <string.h>

enum { RULE, PARAMETER, FACTOR, CLAUSE, MARK };

typedef struct rule_parameter {
    const char *name;
    size_t offset; /* of the double in pf_derating */
    double lowest, highest;
    pf_quantity quantity;
} rule_parameter;

static const rule_parameter parameters[] = {
    {"voltage_use", offsetof(pf_derating, voltage_use), 0.01, 1, PF_RATIO},
    {"gate_use", offsetof(pf_derating, gate_use), 0.01, 1, PF_RATIO},
    {"current_use", offsetof(pf_derating, current_use), 0.01, 1, PF_RATIO},
    {"power_use", offsetof(pf_derating, power_use), 0.01, 1, PF_RATIO},
    {"junction_limit", offsetof(pf_derating, junction_limit_degC), 0, 400, PF_TEMPERATURE},
    {"junction_below_max", offsetof(pf_derating, junction_below_max_K), 0, 300, PF_TEMPERATURE},
    {"junction_share", offsetof(pf_derating, junction_share), 0.1, 1, PF_RATIO},
};
#define PARAMETERS (sizeof parameters / sizeof *parameters)

typedef struct rules_reading {
    pf_derating_rules *rules;
    size_t before; /* rules that were there when the file began */
} rules_reading;

void pf_derating_rules_clear(pf_derating_rules *rules)
{
    pf_free(rules->item);
    *rules = (pf_derating_rules){0};
}

const pf_derating *pf_derating_rule_find(const pf_derating_rules *rules, const char *name)
{
    for (size_t i = rules->count; i > 0; i--)
        if (pf_same_word(rules->item[i - 1].name, name)) return &rules->item[i - 1];
    return NULL;
}

static pf_status add_rule(pf_derating_rules *rules, const char *name, pf_derating **rule)
{
    pf_status status =
        pf_grow((void **)&rules->item, &rules->capacity, rules->count + 1, sizeof *rules->item);
    if (status != PF_OK) return status;
    pf_derating *fresh = *rule = &rules->item[rules->count++];
    memset(fresh, 0, sizeof *fresh);
    snprintf(fresh->name, sizeof fresh->name, "%s", name);
    for (size_t i = 0; i < PARAMETERS; i++)
        *(double *)(void *)((char *)fresh + parameters[i].offset) = PF_NONE;
    return PF_OK;
}

/* The rule of this file with that name; one of an earlier file is left behind it and not found. */
static pf_status rule_of(rules_reading *reading, const char *name, pf_derating **rule)
{
    pf_derating_rules *rules = reading->rules;
    for (size_t i = reading->before; i < rules->count; i++)
        if (pf_same_word(rules->item[i].name, name)) {
            *rule = &rules->item[i];
            return PF_OK;
        }
    return add_rule(rules, name, rule);
}

/* Copies a text into one of fixed size, adding to what is there where it says something else. */
static void add_text(char *to, size_t room, pf_slice text)
{
    char piece[160];
    snprintf(piece, sizeof piece, "%.*s", text.length < 159 ? (int)text.length : 159, text.text);
    if (text.length == 0 || strstr(to, piece)) return;
    size_t at = strlen(to);
    snprintf(to + at, room - at, "%s%s", at ? "; " : "", piece);
}

static pf_status refuse(pf_sheet *sheet, const char *column, pf_slice text, const char *wrong,
                        const char *right)
{
    pf_fault fault;
    pf_fault_set(&fault, right, "%s", wrong);
    return pf_sheet_refuse(sheet, column, text, &fault);
}

static pf_status take_factor(pf_sheet *sheet, const rule_parameter *parameter, double *place)
{
    double value;
    pf_slice text = pf_sheet_text(sheet, FACTOR);
    sheet->column[FACTOR].rule = (pf_value_rule){
        parameter->quantity, 0, parameter->lowest, parameter->highest, false, false, false,
        PF_BOUND_NONE};
    pf_status status = pf_sheet_number(sheet, FACTOR, &value);
    if (status != PF_OK || pf_is_stated(value)) {
        if (pf_is_stated(*place) && pf_is_stated(value))
            return refuse(sheet, parameter->name, text, "the rule states this parameter twice",
                          "each once");
        *place = value;
        return status;
    }
    if (pf_not_stated(text))
        return refuse(sheet, parameter->name, text, "no factor", "a number, or leave the row out");
    return PF_OK;
}

static pf_status take(pf_sheet *sheet, void *context)
{
    rules_reading *reading = context;
    char name[64], folded[PF_FOLDED_ROOM];
    pf_derating *rule;
    pf_slice text = pf_sheet_text(sheet, RULE), parameter = pf_sheet_text(sheet, PARAMETER);
    if (text.length == 0 || text.length >= sizeof name)
        return refuse(sheet, "rule", text, "no name of a rule", "up to 63 characters");
    snprintf(name, sizeof name, "%.*s", (int)text.length, text.text);
    pf_fold(parameter, folded);
    for (size_t i = 0; i < PARAMETERS; i++) {
        if (!pf_folded_in(folded, parameters[i].name)) continue;
        pf_status status = rule_of(reading, name, &rule);
        if (status != PF_OK) return status;
        add_text(rule->source, sizeof rule->source, pf_sheet_text(sheet, CLAUSE));
        add_text(rule->mark, sizeof rule->mark, pf_sheet_text(sheet, MARK));
        double *place = (double *)(void *)((char *)rule + parameters[i].offset);
        return take_factor(sheet, &parameters[i], place);
    }
    return refuse(sheet, "parameter", parameter, "no parameter of a derating rule",
                  "voltage_use, gate_use, current_use, power_use, junction_limit, "
                  "junction_below_max or junction_share");
}

static pf_status read_rules(const pf_source *source, pf_derating_rules *rules,
                            pf_problems *problems)
{
    rules_reading reading = {rules, rules->count};
    pf_sheet sheet = {.problems = problems,
                      .column_count = 5,
                      .column = {{.names = "rule|standard", .required = true},
                                 {.names = "parameter", .required = true},
                                 {.names = "factor|value", .required = true},
                                 {.names = "clause|source"},
                                 {.names = "mark"}},
                      .take = take,
                      .context = &reading};
    return pf_sheet_read(&sheet, source);
}

pf_status pf_derating_rules_read(const char *name, const char *bytes, size_t length,
                                 pf_derating_rules *rules, pf_problems *problems)
{
    pf_source source = {name, bytes ? bytes : "", length};
    return read_rules(&source, rules, problems);
}

pf_status pf_derating_rules_read_file(const char *path, pf_derating_rules *rules,
                                      pf_problems *problems)
{
    pf_source source = {.name = path};
    return read_rules(&source, rules, problems);
}
