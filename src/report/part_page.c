/* part_page.c: one part on a page for people. */
#include "base/number.h"
#include "report/words.h"

#include <math.h>
#include <passfet/listing.h>
#include <passfet/report.h>
#include <string.h>

enum { W_NAME = 22, W_VALUE = 14 };

static void print_line(FILE *out, const char *name, const char *value, const char *meaning)
{
    fputs("  ", out);
    pf_text_field_print(out, name, W_NAME, false);
    fputc(' ', out);
    if (pf_text_width(value) > W_VALUE)
        fprintf(out, "%s  ", value);
    else
        pf_text_field_print(out, value, W_VALUE, false);
    fprintf(out, " %s\n", meaning);
}

static void print_head(FILE *out, const pf_listed_part *listed)
{
    const pf_part *part = listed->part;
    fprintf(out, "%s%s%s, %s-channel%s%s\n", part->name, part->maker ? " by " : "",
            part->maker ? part->maker : "", pf_polarity_text(part->polarity),
            part->package ? ", " : "", part->package ? part->package : "");
    if (listed->revision)
        fprintf(out, "Revision %lld, made by entry %lld at %s by %s; %s.\n", listed->revision,
                listed->entry, listed->time, listed->author, listed->review);
    fputc('\n', out);
}

static void print_texts(FILE *out, const pf_part *part)
{
    size_t count;
    const pf_text_field *field = pf_text_fields(&count);
    for (size_t i = 3; i < count; i++) { /* name, maker and package stand in the head */
        const char *text = pf_part_text_value(part, &field[i]);
        if (!text) continue;
        fputs("  ", out);
        pf_text_field_print(out, field[i].csv, W_NAME, false);
        fprintf(out, " %s\n", text);
    }
}

static void print_rdson(FILE *out, const pf_part *part)
{
    for (size_t i = 0; i < part->rdson_count; i++) {
        char name[64], drive[PF_NUMBER_ROOM], value[PF_UNIT_ROOM];
        pf_number_print(drive, part->rdson[i].vgs_V, 0);
        pf_value_print(value, part->rdson[i].rdson_ohm, PF_RESISTANCE, 6);
        snprintf(name, sizeof name, "rdson_max @ %s V", drive);
        print_line(out, name, value, "highest on-resistance at 25 degC and this gate drive");
    }
}

static void print_ratings(FILE *out, const pf_part *part)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++) {
        char value[PF_UNIT_ROOM];
        double rating = pf_part_rating_value(part, &field[i]);
        if (!pf_is_stated(rating)) continue;
        pf_value_print(value, rating, field[i].quantity, 6);
        print_line(out, field[i].csv, value, field[i].meaning);
    }
    print_rdson(out, part);
}

/* --- Curves -------------------------------------------------------------------------------- */

/* A run of short words on indented lines. */
typedef struct word_line {
    FILE *out;
    int indent;
    size_t width; /* of the line at hand */
} word_line;

static void add_word(word_line *line, const char *word)
{
    size_t width = pf_text_width(word);
    if (line->width + 2 + width > PF_TABLE_COLUMNS) {
        fprintf(line->out, "\n%*s", line->indent, "");
        line->width = (size_t)line->indent;
    }
    fprintf(line->out, "  %s", word);
    line->width += 2 + width;
}

static void start_words(word_line *line, FILE *out, const char *label)
{
    *line = (word_line){out, 12, 12};
    fputs("    ", out);
    pf_text_field_print(out, label, 8, false);
}

static void add_pair(word_line *line, double first, pf_quantity first_is, double second,
                     pf_quantity second_is)
{
    char left[PF_UNIT_ROOM], right[PF_UNIT_ROOM], word[2 * PF_UNIT_ROOM + 2];
    pf_value_print(left, first, first_is, 6);
    pf_value_print(right, second, second_is, 6);
    snprintf(word, sizeof word, "%s: %s", left, right);
    add_word(line, word);
}

static void print_soa(FILE *out, const pf_part *part)
{
    word_line line = {0};
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i], *before = i ? point - 1 : NULL;
        if (!before || before->case_degC != point->case_degC) {
            char value[PF_UNIT_ROOM];
            pf_value_print(value, point->case_degC, PF_TEMPERATURE, 4);
            fprintf(out, "%s\n  Safe operating area at a case of %s\n", before ? "\n" : "", value);
            before = NULL;
        }
        if (!before || before->pulse_s != point->pulse_s) {
            char label[PF_UNIT_ROOM] = "dc";
            if (point->pulse_s != PF_DC) pf_value_print(label, point->pulse_s, PF_TIME, 4);
            if (before) fputc('\n', out);
            start_words(&line, out, label);
        }
        add_pair(&line, point->vds_V, PF_VOLTAGE, point->id_A, PF_CURRENT);
    }
    if (part->soa_count) fputc('\n', out);
}

static void print_thermal(FILE *out, const pf_thermal_curve *curve, const char *end)
{
    word_line line;
    if (curve->point_count + curve->pair_count == 0) return;
    fprintf(out, "\n  %s, junction to %s\n",
            curve->pair_count ? "Thermal network, time constant and resistance"
                              : "Transient thermal impedance",
            end);
    start_words(&line, out, "");
    for (size_t i = 0; i < curve->point_count; i++)
        add_pair(&line, curve->point[i].time_s, PF_TIME, curve->point[i].zth_KpW, PF_THERMAL);
    for (size_t i = 0; i < curve->pair_count; i++)
        add_pair(&line, curve->pair[i].tau_s, PF_TIME, curve->pair[i].r_KpW, PF_THERMAL);
    fputc('\n', out);
}

/* --- Gaps ---------------------------------------------------------------------------------- */

/* What depends on a rating that is not stated. */
static const struct {
    const char *csv, *depends;
} needs[] = {
    {"vgs_max", "the gate-source check"},
    {"id_cont", "the check of the running current"},
    {"id_pulse", "the check of peak currents"},
    {"rdson_hot_ratio", "losses: 2.0 is assumed"},
    {"crss", "the slow corner of a gate ramp is without it"},
    {"rth_jc", "the running temperature with a case-to-ambient resistance of the card"},
    {"rth_ja", "the running temperature without one"},
    {"avalanche_energy", "the turn-off of an inductive supply"},
    {"price", "order by price"},
    {"datasheet", "where the values are from"},
};

static bool is_missing(const pf_part *part, const char *csv)
{
    size_t count;
    const pf_rating_field *rating = pf_rating_fields(&count);
    for (size_t i = 0; i < count; i++)
        if (strcmp(rating[i].csv, csv) == 0)
            return !pf_is_stated(pf_part_rating_value(part, &rating[i]));
    return part->datasheet == NULL;
}

static void print_gap(FILE *out, const char *name, const char *depends, bool *any)
{
    if (!*any) fputs("\n  Not stated, and what depends on it\n", out);
    *any = true;
    fputs("    ", out);
    pf_text_field_print(out, name, W_NAME - 2, false);
    fprintf(out, " %s\n", depends);
}

static bool has_dc_line(const pf_part *part)
{
    for (size_t i = 0; i < part->soa_count; i++)
        if (part->soa[i].pulse_s == PF_DC) return true;
    return false;
}

static void print_gaps(FILE *out, const pf_part *part)
{
    bool any = false;
    const pf_thermal_curve *thermal = part->thermal;
    if (part->soa_count == 0) print_gap(out, "soa", "every SOA margin stays unassessed", &any);
    if (part->soa_count > 0 && !has_dc_line(part))
        print_gap(out, "DC line of the soa", "stresses longer than its longest line", &any);
    if (thermal[PF_JUNCTION_CASE].point_count + thermal[PF_JUNCTION_CASE].pair_count +
            thermal[PF_JUNCTION_AMBIENT].point_count + thermal[PF_JUNCTION_AMBIENT].pair_count ==
        0)
        print_gap(out, "zth", "peak junction temperatures, and retry", &any);
    if (part->rdson_count == 0)
        print_gap(out, "rdson_max", "losses and the running temperature", &any);
    for (size_t i = 0; i < sizeof needs / sizeof *needs; i++)
        if (is_missing(part, needs[i].csv)) print_gap(out, needs[i].csv, needs[i].depends, &any);
}

void pf_listing_page(FILE *out, const pf_listed_part *listed)
{
    const pf_part *part = listed->part;
    print_head(out, listed);
    print_texts(out, part);
    print_ratings(out, part);
    print_soa(out, part);
    print_thermal(out, &part->thermal[PF_JUNCTION_CASE], "case");
    print_thermal(out, &part->thermal[PF_JUNCTION_AMBIENT], "ambient, on the board of its sheet");
    print_gaps(out, part);
}
