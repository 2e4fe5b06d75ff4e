/* column_kinds.c: the columns of every kind of ratings file. */
#include "intake/column.h"

#include <string.h>

#define TIME_RULE                                                                                  \
    {                                                                                              \
        PF_TIME, 0, 1e-9, 1e5, false, false, false, PF_BOUND_NONE                                  \
    }
#define VDS_RULE                                                                                   \
    {                                                                                              \
        PF_VOLTAGE, 0, 1e-6, 5000, true, false, false, PF_BOUND_NONE                               \
    }
#define ID_RULE                                                                                    \
    {                                                                                              \
        PF_CURRENT, 0, 1e-9, 50000, true, false, false, PF_BOUND_NONE                              \
    }
#define CASE_RULE                                                                                  \
    {                                                                                              \
        PF_TEMPERATURE, 0, -60, 300, false, false, false, PF_BOUND_NONE                            \
    }
#define THERMAL_RULE                                                                               \
    {                                                                                              \
        PF_THERMAL, 0, 1e-6, 2000, false, false, false, PF_BOUND_NONE                              \
    }
#define RDSON_RULE                                                                                 \
    {                                                                                              \
        PF_RESISTANCE, 0, 1e-6, 1000, false, false, false, PF_BOUND_UPPER                          \
    }
#define NO_RULE                                                                                    \
    {                                                                                              \
        PF_RATIO, 0, 0, 0, false, false, false, PF_BOUND_NONE                                      \
    }

#define PART_NAMES "part number|mpn|type|device|part no|part name"
#define MAKER_NAMES "manufacturer|mfr|mfg|vendor|brand"
#define CASE_NAMES "tc|case temp|tcase|soa case temperature|t case"

static const pf_column_kind parts_special[] = {
    {PF_ROLE_POLARITY, "polarity", "channel|channel type|channel polarity|n/p|fet type", true,
     false, NO_RULE, NULL, NULL},
    {PF_ROLE_RDSON, "rdson_max",
     "rdson|rds on|rds on maximum|rdson maximum|max rdson|maximum rdson|on resistance|"
     "drain source on resistance|static drain source on resistance",
     false, true, RDSON_RULE, NULL, NULL},
    {PF_ROLE_SOA_CELL, "soa", "safe operating area|soa points", false, false, NO_RULE, NULL, NULL},
    {PF_ROLE_SOA_CASE, "soa_case_temperature", "soa tc|soa case temp", false, true, CASE_RULE, NULL,
     NULL},
    {PF_ROLE_ZTH_CELL, "zth", "zth points|transient thermal impedance|zthjc", false, false, NO_RULE,
     NULL, NULL},
    {PF_ROLE_ZTH_PATH, "zth_path", "zth to", false, false, NO_RULE, NULL, NULL},
};

static const pf_column_kind soa_columns[] = {
    {PF_ROLE_PULSE, "pulse", "tp|pulse width|pulse time|pulsewidth|t pulse|duration", true, true,
     TIME_RULE, NULL, NULL},
    {PF_ROLE_VDS, "vds", "v|voltage|drain source voltage|vds v|u ds", true, true, VDS_RULE, NULL,
     NULL},
    {PF_ROLE_ID, "id", "i|current|drain current|ids", true, true, ID_RULE, NULL, NULL},
    {PF_ROLE_SOA_CASE, "case_temperature", CASE_NAMES, false, true, CASE_RULE, NULL, NULL},
};

static const pf_column_kind wide_columns[] = {
    {PF_ROLE_VDS, "vds", "v|voltage|drain source voltage", false, true, VDS_RULE, NULL, NULL},
    {PF_ROLE_ID, "id", "i|current|drain current|soa", false, true, ID_RULE, NULL, NULL},
    {PF_ROLE_SOA_CASE, "case_temperature", CASE_NAMES, false, true, CASE_RULE, NULL, NULL},
};

static const pf_column_kind zth_columns[] = {
    {PF_ROLE_TIME, "time", "t|tp|pulse|pulse width|pulse time|duration", true, true, TIME_RULE,
     NULL, NULL},
    {PF_ROLE_ZTH, "zth", "zthjc|z|thermal impedance|transient thermal impedance|zth jc|z th", true,
     true, THERMAL_RULE, NULL, NULL},
    {PF_ROLE_ZTH_PATH, "zth_path", "path|zth to", false, false, NO_RULE, NULL, NULL},
};

static const pf_column_kind foster_columns[] = {
    {PF_ROLE_FOSTER_R, "foster_r", "r|ri|r i|rth|rth i|foster resistance", true, true, THERMAL_RULE,
     NULL, NULL},
    {PF_ROLE_FOSTER_TAU,
     "foster_tau",
     "tau|taui|tau i|time constant|\xCF\x84",
     true,
     true,
     {PF_TIME, 0, 1e-10, 1e6, false, false, false, PF_BOUND_NONE},
     NULL,
     NULL},
    {PF_ROLE_ZTH_PATH, "zth_path", "path|zth to", false, false, NO_RULE, NULL, NULL},
};

/* Which of `<` and `>` agrees with what a rating means. */
static pf_bound bound_of(const pf_rating_field *field)
{
    static const char *const lower[] = {"vds_max",          "vgs_max",          "id_cont",
                                        "id_pulse",         "vth_min",          "tj_max",
                                        "avalanche_energy", "avalanche_current"};
    for (size_t i = 0; i < sizeof lower / sizeof *lower; i++)
        if (strcmp(field->csv, lower[i]) == 0) return PF_BOUND_LOWER;
    return PF_BOUND_UPPER;
}

static pf_column_kind rating_column(const pf_rating_field *field)
{
    bool required = strcmp(field->csv, "vds_max") == 0 || strcmp(field->csv, "tj_max") == 0;
    bool plus_minus = strcmp(field->csv, "vgs_max") == 0;
    bool range_upper = strcmp(field->csv, "tj_max") == 0;
    pf_value_rule rule = {field->quantity, 0,          field->lowest, field->highest,
                          field->signless, plus_minus, range_upper,   bound_of(field)};
    return (pf_column_kind){PF_ROLE_RATING, field->csv, field->aliases, required,
                            true,           rule,       field,          NULL};
}

static size_t parts_columns(pf_column_kind *list)
{
    size_t specials = sizeof parts_special / sizeof *parts_special, ratings, texts, count = 0;
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    const pf_text_field *text = pf_text_fields(&texts);
    for (size_t i = 0; i < texts; i++) {
        bool required = strcmp(text[i].csv, "part") == 0;
        list[count++] = (pf_column_kind){
            PF_ROLE_TEXT, text[i].csv, text[i].aliases, required, false, NO_RULE, NULL, &text[i]};
    }
    for (size_t i = 0; i < specials; i++)
        list[count++] = parts_special[i];
    for (size_t i = 0; i < ratings && count < PF_COLUMN_KINDS_MAX; i++)
        list[count++] = rating_column(&rating[i]);
    return count;
}

/* part and maker in front of the columns of a curve file. */
static size_t curve_columns(pf_column_kind *list, const pf_column_kind *own, size_t count)
{
    size_t texts;
    const pf_text_field *text = pf_text_fields(&texts);
    list[0] =
        (pf_column_kind){PF_ROLE_TEXT, "part", PART_NAMES, true, false, NO_RULE, NULL, &text[0]};
    list[1] =
        (pf_column_kind){PF_ROLE_TEXT, "maker", MAKER_NAMES, false, false, NO_RULE, NULL, &text[1]};
    memcpy(list + 2, own, count * sizeof *own);
    return count + 2;
}

#define CURVE(own) curve_columns(list, (own), sizeof(own) / sizeof *(own))

size_t pf_column_kinds(pf_file_kind kind, pf_column_kind list[PF_COLUMN_KINDS_MAX])
{
    switch (kind) {
    case PF_KIND_PARTS:
        return parts_columns(list);
    case PF_KIND_SOA:
        return CURVE(soa_columns);
    case PF_KIND_SOA_WIDE:
        return CURVE(wide_columns);
    case PF_KIND_ZTH:
        return CURVE(zth_columns);
    case PF_KIND_FOSTER:
        return CURVE(foster_columns);
    default:
        return 0;
    }
}
