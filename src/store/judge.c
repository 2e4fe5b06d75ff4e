/* judge.c: what the database accepts of a part. */
#include "store/judge.h"
#include "base/number.h"
#include "store/packed.h"

#include <string.h>

pf_status pf_judge_needs(const pf_part *part, bool curves_only, pf_error *error)
{
    const char *lacks = part->polarity == PF_POLARITY_NONE ? "polarity"
                        : !pf_is_stated(part->vds_max_V)   ? "vds_max"
                        : !pf_is_stated(part->tj_max_degC) ? "tj_max"
                                                           : NULL;
    if (!lacks) return PF_OK;
    if (curves_only)
        return pf_error_set(error, PF_NOT_FOUND,
                            "there is no part %s: import its ratings first or in the same run",
                            part->name);
    return pf_error_set(error, PF_BAD_INPUT, "part %s states no %s, which every part needs",
                        part->name, lacks);
}

static pf_status judge_rating(const pf_part *part, const pf_rating_field *field, pf_error *error)
{
    char text[3][PF_UNIT_ROOM];
    double value = pf_part_rating_value(part, field);
    if (!pf_is_stated(value) || (value >= field->lowest && value <= field->highest)) return PF_OK;
    pf_value_print(text[0], value, field->quantity, 6);
    pf_value_print(text[1], field->lowest, field->quantity, 6);
    pf_value_print(text[2], field->highest, field->quantity, 6);
    return pf_error_set(error, PF_BAD_INPUT, "part %s: %s %s must lie between %s and %s",
                        part->name, field->csv, text[0], text[1], text[2]);
}

static pf_status judge_soa(const pf_part *part, pf_error *error)
{
    char text[PF_UNIT_ROOM];
    for (size_t i = 0; i < part->soa_count; i++) {
        if (!(part->soa[i].vds_V > 1.1 * part->vds_max_V)) continue;
        pf_value_print(text, part->soa[i].vds_V, PF_VOLTAGE, 6);
        return pf_error_set(error, PF_BAD_INPUT,
                            "part %s: the SOA goes to %s, more than a tenth beyond vds_max",
                            part->name, text);
    }
    return PF_OK;
}

/* The words of the life cycle; a part may also state none. */
static pf_status judge_status(const pf_part *part, pf_error *error)
{
    static const char *const known[] = {"active", "not-for-new", "obsolete", "banned"};
    for (size_t i = 0; i < sizeof known / sizeof *known; i++)
        if (!part->status || strcmp(part->status, known[i]) == 0) return PF_OK;
    return pf_error_set(error, PF_BAD_INPUT,
                        "part %s: the status `%s` is none: active, not-for-new, obsolete or banned",
                        part->name, part->status);
}

pf_status pf_judge_values(const pf_part *part, pf_error *error)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    pf_status status = PF_OK;
    for (size_t i = 0; i < count && status == PF_OK; i++)
        status = judge_rating(part, &field[i], error);
    if (status == PF_OK && part->vth_min_V > part->vth_max_V)
        status = pf_error_set(error, PF_BAD_INPUT, "part %s: vth_min must not be above vth_max",
                              part->name);
    if (status == PF_OK) status = judge_status(part, error);
    if (status == PF_OK) status = judge_soa(part, error);
    const char *wrong = status == PF_OK ? pf_curves_judge(part) : NULL;
    return wrong ? pf_error_set(error, PF_BAD_INPUT, "part %s: %s", part->name, wrong) : status;
}
