/* sheet_reading.c: readings of SOA and Zth, step by step. */
#include "base/number.h"
#include "report/sheet.h"

#include <math.h>
#include <string.h>

static const char *line_name(char text[PF_UNIT_ROOM + 8], double pulse_s)
{
    char pulse[PF_UNIT_ROOM];
    if (isinf(pulse_s)) return strcpy(text, "dc");
    snprintf(text, PF_UNIT_ROOM + 8, "%s", pf_sheet_words(pulse, pulse_s, PF_TIME));
    return text;
}

/* "48 V lies 4 % below the point at 50 V and 380 % above that at 10 V." */
static void note_distance(pf_sheet *sheet, const pf_line_reading *line, double vds_V)
{
    char at[PF_UNIT_ROOM], left[PF_UNIT_ROOM], right[PF_UNIT_ROOM], name[PF_UNIT_ROOM + 8];
    line_name(name, line->pulse_s);
    pf_sheet_words(at, vds_V, PF_VOLTAGE);
    pf_sheet_words(left, line->left_V, PF_VOLTAGE);
    pf_sheet_words(right, line->right_V, PF_VOLTAGE);
    if (line->flank)
        pf_sheet_note(sheet,
                      "%s line: %s lies left of where it reaches its highest current, at %s; that "
                      "current counts.",
                      name, at, right);
    else if (line->left_V == line->right_V)
        pf_sheet_note(sheet, "%s line: %s is a point of it.", name, at);
    else if (vds_V > line->right_V)
        pf_sheet_note(sheet, "%s line: %s lies %.2g %% beyond its last point at %s.", name, at,
                      100 * (vds_V / line->right_V - 1), right);
    else
        pf_sheet_note(
            sheet, "%s line: %s lies %.3g %% above the point at %s and %.3g %% below that at %s.",
            name, at, 100 * (vds_V / line->left_V - 1), left, 100 * (1 - vds_V / line->right_V),
            right);
}

static void read_line(pf_sheet *sheet, const pf_line_reading *line, double vds_V)
{
    char label[160], name[PF_UNIT_ROOM + 8];
    bool flat = line->flank || line->left_V == line->right_V;
    line_name(name, line->pulse_s);
    note_distance(sheet, line, vds_V);
    if (!flat && line->slope != 0) {
        snprintf(label, sizeof label, "slope of the %s line", name);
        pf_sheet_value(sheet, label, line->slope, "", "ln(# / #) / ln(# / #)", line->right_A,
                       line->left_A, line->right_V, line->left_V);
    }
    snprintf(label, sizeof label, "I(%s line)", name);
    if (flat || line->slope == 0)
        pf_sheet_value(sheet, label, line->current_A, "A", "#", line->current_A);
    else
        pf_sheet_value(sheet, label, line->current_A, "A", "# * (# / #)^#", line->right_A, vds_V,
                       line->right_V, line->slope);
}

static void read_between(pf_sheet *sheet, const pf_reading *reading, const char *name)
{
    const pf_line_reading *shorter = &reading->shorter, *longer = &reading->longer;
    char at[PF_UNIT_ROOM], first[PF_UNIT_ROOM], second[PF_UNIT_ROOM];
    pf_sheet_words(at, reading->time_s, PF_TIME);
    pf_sheet_note(
        sheet, "%s lies %.3f decades above the %s line and %.3f below the %s line.", at,
        log10(reading->time_s / shorter->pulse_s), pf_sheet_words(first, shorter->pulse_s, PF_TIME),
        log10(longer->pulse_s / reading->time_s), pf_sheet_words(second, longer->pulse_s, PF_TIME));
    pf_sheet_value(sheet, "slope in time", reading->slope, "", "ln(# / #) / ln(# / #)",
                   longer->current_A, shorter->current_A, longer->pulse_s, shorter->pulse_s);
    pf_sheet_value(sheet, name, reading->current_A, "A", "# * (# / #)^#", longer->current_A,
                   reading->time_s, longer->pulse_s, reading->slope);
}

/* E(V, t) and what the DC line makes of it. Equation (6) of docs/methods.md. */
static void read_beyond(pf_sheet *sheet, const pf_reading *reading, const char *name)
{
    double longest_s = reading->longer.pulse_s, longest_A = reading->longer.current_A;
    double dc_A = reading->dc.current_A;
    double fall = fmin(reading->zth_longest_KpW / reading->zth_KpW,
                       pow(reading->time_s / longest_s, reading->slope));
    double extended_A = longest_A * fmin(1, fall);
    bool has_dc = reading->dc.pulse_s > 0;
    char at[PF_UNIT_ROOM], line[PF_UNIT_ROOM];
    pf_sheet_note(sheet, "%s lies %.3f decades beyond the longest line, %s.",
                  pf_sheet_words(at, reading->time_s, PF_TIME), log10(reading->time_s / longest_s),
                  pf_sheet_words(line, longest_s, PF_TIME));
    if (reading->shorter.pulse_s < longest_s)
        pf_sheet_value(sheet, "slope of the last two lines in time", reading->slope, "",
                       "min(0, ln(# / #) / ln(# / #))", longest_A, reading->shorter.current_A,
                       longest_s, reading->shorter.pulse_s);
    pf_sheet_value(sheet, has_dc ? "extended by Zth and slope" : name, extended_A, "A",
                   "# * min(1, # / #, (# / #)^#)", longest_A, reading->zth_longest_KpW,
                   reading->zth_KpW, reading->time_s, longest_s, reading->slope);
    if (has_dc)
        pf_sheet_value(sheet, name, reading->current_A, "A", "max(#, min(#, #))", extended_A, dc_A,
                       longest_A);
}

static void read_dc(pf_sheet *sheet, const pf_reading *reading, const char *name)
{
    bool bounded = reading->longer.pulse_s > 0;
    pf_sheet_note(sheet, bounded ? "Longer than the longest line, and no Zth leads on from there: "
                                   "the DC line counts, but not above the longest line."
                                 : "The sheet gives the DC line alone.");
    if (bounded)
        pf_sheet_value(sheet, name, reading->current_A, "A", "min(#, #)", reading->dc.current_A,
                       reading->longer.current_A);
    else
        pf_sheet_value(sheet, name, reading->current_A, "A", "#", reading->current_A);
}

static void read_lines(pf_sheet *sheet, const pf_reading *reading)
{
    bool two = reading->shorter.pulse_s != reading->longer.pulse_s;
    if (two) read_line(sheet, &reading->shorter, reading->vds_V);
    if (reading->longer.pulse_s > 0) read_line(sheet, &reading->longer, reading->vds_V);
    if (reading->dc.pulse_s > 0) read_line(sheet, &reading->dc, reading->vds_V);
}

void pf_sheet_reading(pf_sheet *sheet, const pf_reading *reading, const char *name)
{
    char at[PF_UNIT_ROOM], line[PF_UNIT_ROOM];
    pf_sheet_words(at, reading->time_s, PF_TIME);
    if (reading->kind == PF_READ_NOTHING) {
        pf_sheet_note(sheet, "%s cannot be read: %s.", name, pf_cause_text(reading->cause));
        return;
    }
    read_lines(sheet, reading);
    switch (reading->kind) {
    case PF_READ_BETWEEN:
        read_between(sheet, reading, name);
        return;
    case PF_READ_BEYOND:
        read_beyond(sheet, reading, name);
        return;
    case PF_READ_DC:
        read_dc(sheet, reading, name);
        return;
    case PF_READ_SHORTER:
        pf_sheet_note(sheet, "%s is shorter than the shortest line, %s: no credit for that.", at,
                      pf_sheet_words(line, reading->longer.pulse_s, PF_TIME));
        break;
    case PF_READ_SHORTER_COUNTS:
        pf_sheet_note(sheet,
                      "A longer pulse contains the shorter ones, and the sheet allows one of "
                      "%s less than it: that counts.",
                      pf_sheet_words(line, reading->longer.pulse_s, PF_TIME));
        break;
    default:
        pf_sheet_note(sheet, "%s is the pulse width of a line.", at);
        break;
    }
    pf_sheet_value(sheet, name, reading->current_A, "A", "#", reading->current_A);
}

static const pf_thermal_curve *curve_of(const pf_part *part, const pf_zth_reading *reading)
{
    return &part->thermal[reading->path];
}

/* The pairs in steps of four, each a line of its own. */
static void sum_foster(pf_sheet *sheet, const pf_part *part, const pf_zth_reading *reading)
{
    const pf_thermal_curve *curve = curve_of(part, reading);
    char label[64];
    double sum = 0;
    for (size_t i = 0; i < curve->pair_count; i++) {
        double r_KpW = curve->pair[i].r_KpW, tau_s = curve->pair[i].tau_s;
        double before = sum;
        sum += r_KpW * -expm1(-reading->time_s / tau_s);
        snprintf(label, sizeof label, "Zth, pairs 1 to %zu", i + 1);
        pf_sheet_value(sheet, i + 1 == curve->pair_count ? "Zth" : label, sum, "K/W",
                       "# + # * (1 - exp(-# / #))", before, r_KpW, reading->time_s, tau_s);
    }
}

void pf_sheet_zth(pf_sheet *sheet, const pf_part *part, const pf_zth_reading *reading)
{
    char at[PF_UNIT_ROOM], left[PF_UNIT_ROOM], right[PF_UNIT_ROOM];
    pf_sheet_words(at, reading->time_s, PF_TIME);
    pf_sheet_words(left, reading->left_s, PF_TIME);
    pf_sheet_words(right, reading->right_s, PF_TIME);
    if (reading->kind == PF_ZTH_NOTHING) pf_sheet_note(sheet, "No Zth is stated.");
    if (reading->kind == PF_ZTH_FOSTER) sum_foster(sheet, part, reading);
    if (reading->kind == PF_ZTH_BEYOND) {
        pf_sheet_note(sheet, "%s lies behind the last point of Zth, %s.", at, right);
        pf_sheet_value(sheet, "Zth", reading->zth_KpW, "K/W", "#", reading->zth_KpW);
    }
    if (reading->kind == PF_ZTH_BEFORE) {
        pf_sheet_note(sheet, "%s lies before the first point of Zth, %s: square root of time.", at,
                      right);
        pf_sheet_value(sheet, "Zth", reading->zth_KpW, "K/W", "# * sqrt(# / #)", reading->right_KpW,
                       reading->time_s, reading->right_s);
    }
    if (reading->kind != PF_ZTH_BETWEEN) return;
    if (reading->left_s == reading->right_s) {
        pf_sheet_note(sheet, "%s is a point of Zth.", at);
        pf_sheet_value(sheet, "Zth", reading->zth_KpW, "K/W", "#", reading->zth_KpW);
        return;
    }
    pf_sheet_note(sheet, "%s lies between the points of Zth at %s and %s.", at, left, right);
    pf_sheet_value(sheet, "slope of Zth", reading->slope, "", "ln(# / #) / ln(# / #)",
                   reading->right_KpW, reading->left_KpW, reading->right_s, reading->left_s);
    pf_sheet_value(sheet, "Zth", reading->zth_KpW, "K/W", "# * (# / #)^#", reading->right_KpW,
                   reading->time_s, reading->right_s, reading->slope);
}
