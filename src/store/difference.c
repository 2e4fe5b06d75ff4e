/* difference.c: what differs between two parts, for people. */
#include "base/buffer.h"
#include "base/number.h"

#include <math.h>
#include <passfet/store.h>
#include <stdio.h>
#include <string.h>

#define TEXT_MAX ((size_t)1 << 16) /* longer curves are cut */

/* Two texts in the making; equal ones are not shown. */
typedef struct showing {
    pf_difference_visitor *visit;
    void *context;
    pf_buffer text[2];
} showing;

static void show(showing *on, const char *what)
{
    const char *before = pf_buffer_string(&on->text[0]), *after = pf_buffer_string(&on->text[1]);
    if (strcmp(before, after) != 0) on->visit(on->context, what, before, after);
    pf_buffer_reset(&on->text[0]);
    pf_buffer_reset(&on->text[1]);
}

static void add_value(pf_buffer *text, double value, pf_quantity quantity)
{
    char print[PF_UNIT_ROOM];
    pf_value_print(print, value, quantity, 9);
    pf_buffer_text(text, print);
}

static void show_texts(showing *on, const pf_part *const part[2])
{
    size_t count;
    const pf_text_field *field = pf_text_fields(&count);
    for (size_t i = 0; i < count; i++) {
        for (int side = 0; side < 2; side++) {
            const char *value = pf_part_text_value(part[side], &field[i]);
            pf_buffer_text(&on->text[side], value ? value : "");
        }
        show(on, field[i].csv);
    }
}

static void show_ratings(showing *on, const pf_part *const part[2])
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++) {
        for (int side = 0; side < 2; side++) {
            double value = pf_part_rating_value(part[side], &field[i]);
            if (pf_is_stated(value)) add_value(&on->text[side], value, field[i].quantity);
        }
        show(on, field[i].csv);
    }
}

static double rdson_at(const pf_part *part, double vgs_V)
{
    for (size_t i = 0; i < part->rdson_count; i++)
        if (part->rdson[i].vgs_V == vgs_V) return part->rdson[i].rdson_ohm;
    return PF_NONE;
}

/* The gate drives of part `from` that were not shown with the other one's. */
static void show_rdson(showing *on, const pf_part *const part[2], int from)
{
    for (size_t i = 0; i < part[from]->rdson_count; i++) {
        char what[64], drive[PF_UNIT_ROOM];
        double vgs_V = part[from]->rdson[i].vgs_V;
        if (from == 1 && pf_is_stated(rdson_at(part[0], vgs_V))) continue;
        for (int side = 0; side < 2; side++) {
            double value = rdson_at(part[side], vgs_V);
            if (pf_is_stated(value)) add_value(&on->text[side], value, PF_RESISTANCE);
        }
        pf_value_print(drive, vgs_V, PF_VOLTAGE, 6);
        snprintf(what, sizeof what, "rdson_max @ %.40s", drive);
        show(on, what);
    }
}

static void add_pair(pf_buffer *text, double first, pf_quantity quantity, double second)
{
    char number[PF_NUMBER_ROOM];
    if (text->length) pf_buffer_text(text, "  ");
    add_value(text, first, quantity);
    pf_number_print(number, second, 0);
    pf_buffer_print(text, ":%s", number);
}

/* One line of the SOA as "1 V:400  10 V:100"; returns whether the part has it. */
static bool add_line(pf_buffer *text, const pf_part *part, const pf_soa_point *line)
{
    bool found = false;
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        if (point->case_degC != line->case_degC || point->pulse_s != line->pulse_s) continue;
        add_pair(text, point->vds_V, PF_VOLTAGE, point->id_A);
        found = true;
    }
    return found;
}

static void name_line(char what[96], const pf_soa_point *line)
{
    char pulse[PF_UNIT_ROOM] = "dc", case_degC[PF_UNIT_ROOM];
    if (!isinf(line->pulse_s)) pf_value_print(pulse, line->pulse_s, PF_TIME, 6);
    pf_value_print(case_degC, line->case_degC, PF_TEMPERATURE, 6);
    if (line->case_degC == 25)
        snprintf(what, 96, "soa %.30s", pulse);
    else
        snprintf(what, 96, "soa %.30s at case %.30s", pulse, case_degC);
}

static void show_soa(showing *on, const pf_part *const part[2], int from)
{
    for (size_t i = 0; i < part[from]->soa_count; i++) {
        const pf_soa_point *line = &part[from]->soa[i];
        char what[96];
        bool starts =
            i == 0 || line[-1].case_degC != line->case_degC || line[-1].pulse_s != line->pulse_s;
        if (!starts) continue;
        bool there = add_line(&on->text[0], part[0], line);
        add_line(&on->text[1], part[1], line);
        name_line(what, line);
        if (from == 1 && there) {
            pf_buffer_reset(&on->text[0]);
            pf_buffer_reset(&on->text[1]);
        }
        show(on, what);
    }
}

static void show_thermal(showing *on, const pf_part *const part[2], int path)
{
    static const char *const names[PF_PATH_COUNT][2] = {{"zth case", "foster case"},
                                                        {"zth ambient", "foster ambient"}};
    for (int side = 0; side < 2; side++) {
        const pf_thermal_curve *curve = &part[side]->thermal[path];
        for (size_t i = 0; i < curve->point_count; i++)
            add_pair(&on->text[side], curve->point[i].time_s, PF_TIME, curve->point[i].zth_KpW);
    }
    show(on, names[path][0]);
    for (int side = 0; side < 2; side++) {
        const pf_thermal_curve *curve = &part[side]->thermal[path];
        for (size_t i = 0; i < curve->pair_count; i++)
            add_pair(&on->text[side], curve->pair[i].tau_s, PF_TIME, curve->pair[i].r_KpW);
    }
    show(on, names[path][1]);
}

void pf_part_differences(const pf_part *before, const pf_part *after, pf_difference_visitor *visit,
                         void *context)
{
    const pf_part *const part[2] = {before, after};
    showing on = {.visit = visit, .context = context};
    for (int side = 0; side < 2; side++)
        pf_buffer_init(&on.text[side], TEXT_MAX);
    show_texts(&on, part);
    for (int side = 0; side < 2; side++)
        pf_buffer_text(&on.text[side], pf_polarity_text(part[side]->polarity));
    show(&on, "polarity");
    show_ratings(&on, part);
    for (int from = 0; from < 2; from++)
        show_rdson(&on, part, from);
    for (int from = 0; from < 2; from++)
        show_soa(&on, part, from);
    for (int path = 0; path < PF_PATH_COUNT; path++)
        show_thermal(&on, part, path);
    for (int side = 0; side < 2; side++)
        pf_buffer_clear(&on.text[side]);
}
