/* curve_json.c: curves and Rds(on) as JSON. */
#include "store/curve_json.h"
#include "base/number.h"

#include <math.h>
#include <string.h>

static void add_number(pf_buffer *json, double value)
{
    char text[PF_NUMBER_ROOM];
    pf_buffer_add(json, text, pf_number_print(text, value, 0));
}

/* "[first,second]", after a comma unless it is the first of its list. */
static void add_pair(pf_buffer *json, bool first_of_list, double first, double second)
{
    char text[2 * PF_NUMBER_ROOM + 4];
    size_t length = 0;
    if (!first_of_list) text[length++] = ',';
    text[length++] = '[';
    length += pf_number_print(text + length, first, 0);
    text[length++] = ',';
    length += pf_number_print(text + length, second, 0);
    text[length++] = ']';
    pf_buffer_add(json, text, length);
}

static bool same_line(const pf_soa_point *left, const pf_soa_point *right)
{
    return left->case_degC == right->case_degC && left->pulse_s == right->pulse_s;
}

static void add_soa(const pf_part *part, pf_buffer *json)
{
    pf_buffer_text(json, "\"soa\":[");
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        bool starts = i == 0 || !same_line(point - 1, point);
        if (starts) {
            pf_buffer_text(json, i ? "]],[" : "[");
            add_number(json, point->case_degC);
            pf_buffer_text(json, ",");
            if (isinf(point->pulse_s))
                pf_buffer_text(json, "\"dc\"");
            else
                add_number(json, point->pulse_s);
            pf_buffer_text(json, ",[");
        }
        add_pair(json, starts, point->vds_V, point->id_A);
    }
    pf_buffer_text(json, "]]]");
}

static void add_thermal(const pf_thermal_curve *curve, const char *path, pf_buffer *json)
{
    if (curve->pair_count + curve->point_count == 0) return;
    pf_buffer_text(json, json->text[json->length - 1] == '{' ? "\"" : ",\"");
    pf_buffer_text(json, curve->pair_count ? "foster_" : "zth_");
    pf_buffer_text(json, path);
    pf_buffer_text(json, "\":[");
    for (size_t i = 0; i < curve->point_count; i++)
        add_pair(json, i == 0, curve->point[i].time_s, curve->point[i].zth_KpW);
    for (size_t i = 0; i < curve->pair_count; i++)
        add_pair(json, i == 0, curve->pair[i].r_KpW, curve->pair[i].tau_s);
    pf_buffer_text(json, "]");
}

void pf_curves_json(const pf_part *part, pf_buffer *json)
{
    pf_buffer_text(json, "{");
    if (part->soa_count) add_soa(part, json);
    if (pf_buffer_status(json) != PF_OK) return;
    add_thermal(&part->thermal[PF_JUNCTION_CASE], "case", json);
    if (pf_buffer_status(json) != PF_OK) return;
    add_thermal(&part->thermal[PF_JUNCTION_AMBIENT], "ambient", json);
    pf_buffer_text(json, "}");
}

void pf_rdson_json(const pf_part *part, pf_buffer *json)
{
    if (part->rdson_count == 0) return;
    pf_buffer_text(json, "[");
    for (size_t i = 0; i < part->rdson_count; i++)
        add_pair(json, i == 0, part->rdson[i].vgs_V, part->rdson[i].rdson_ohm);
    pf_buffer_text(json, "]");
}

/* Steps over one character that must stand here. */
static bool take(const char **at, char what)
{
    if (**at != what) return false;
    (*at)++;
    return true;
}

static bool take_number(const char **at, double *value)
{
    size_t taken = pf_number_read(*at, strlen(*at), value);
    *at += taken;
    return taken > 0 && *value > 0;
}

bool pf_rdson_read(const char *json, pf_part *part)
{
    const char *at = json;
    if (!take(&at, '[')) return false;
    for (part->rdson_count = 0; part->rdson_count < PF_RDSON_MAX; part->rdson_count++) {
        pf_rdson_point *point = &part->rdson[part->rdson_count];
        if (part->rdson_count && !take(&at, ',')) break;
        if (!take(&at, '[') || !take_number(&at, &point->vgs_V) || !take(&at, ',') ||
            !take_number(&at, &point->rdson_ohm) || !take(&at, ']'))
            return false;
        if (part->rdson_count && point->vgs_V <= point[-1].vgs_V) return false;
    }
    return take(&at, ']') && *at == '\0';
}
