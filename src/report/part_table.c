/* part_table.c: a list of parts for the terminal, at most PF_TABLE_COLUMNS wide. */
#include "base/number.h"
#include "report/words.h"

#include <math.h>
#include <passfet/listing.h>
#include <string.h>

/* Widths of the columns, with a blank between two of them. */
enum {
    W_PART = 19,
    W_MAKER = 12,
    W_PACKAGE = 8,
    W_CHANNEL = 2,
    W_VDS = 5,
    W_ID = 5,
    W_RDSON = 12,
    W_SOA = 6,
    W_ZTH = 6,
    W_STATUS = 7,
    W_REVIEW = 8
};

static void print_cell(FILE *out, const char *text, size_t width, bool right)
{
    pf_text_field_print(out, text && *text ? text : "-", width, right);
    fputc(' ', out);
}

void pf_listing_table_head(FILE *out)
{
    fprintf(out, "%-*s %-*s %-*s %*s %*s %*s %*s %*s %*s %-*s %s\n", W_PART, "part", W_MAKER,
            "maker", W_PACKAGE, "package", W_CHANNEL, "ch", W_VDS, "V_DS", W_ID, "I_D", W_RDSON,
            "Rds(on)", W_SOA, "SOA", W_ZTH, "Zth", W_STATUS, "status", "review");
    fprintf(out, "%*s %*s %*s %*s %*s %*s\n", W_PART + W_MAKER + W_PACKAGE + 2, "", W_CHANNEL, "",
            W_VDS, "V", W_ID, "A", W_RDSON, "mOhm @ V", W_SOA, "lines");
}

static void print_number(FILE *out, double value, size_t width)
{
    char text[PF_NUMBER_ROOM];
    pf_number_print(text, value, 4);
    print_cell(out, text, width, true);
}

/* Rds(on) at the highest rated gate drive. */
static void print_rdson(FILE *out, const pf_part *part)
{
    char ohm[PF_NUMBER_ROOM] = "", drive[PF_NUMBER_ROOM], text[2 * PF_NUMBER_ROOM + 8] = "";
    if (part->rdson_count) {
        const pf_rdson_point *point = &part->rdson[part->rdson_count - 1];
        pf_number_print(ohm, point->rdson_ohm * 1000, 4);
        pf_number_print(drive, point->vgs_V, 3);
        snprintf(text, sizeof text, "%s @ %s", ohm, drive);
    }
    print_cell(out, text, W_RDSON, true);
}

/* How many lines the SOA has, with "dc" where one of them is the DC line. */
static void print_soa(FILE *out, const pf_part *part)
{
    char text[32] = "";
    size_t lines = 0;
    bool dc = false;
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        lines += i == 0 || point[-1].pulse_s != point->pulse_s ||
                 point[-1].case_degC != point->case_degC;
        dc = dc || point->pulse_s == PF_DC;
    }
    if (lines) snprintf(text, sizeof text, "%zu%s", lines, dc ? " dc" : "");
    print_cell(out, text, W_SOA, true);
}

static void print_zth(FILE *out, const pf_part *part)
{
    size_t points = 0, pairs = 0;
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        points += part->thermal[path].point_count;
        pairs += part->thermal[path].pair_count;
    }
    print_cell(out, pairs ? "pairs" : points ? "points" : "", W_ZTH, true);
}

void pf_listing_table_row(FILE *out, const pf_listed_part *listed)
{
    const pf_part *part = listed->part;
    print_cell(out, part->name, W_PART, false);
    print_cell(out, part->maker, W_MAKER, false);
    print_cell(out, part->package, W_PACKAGE, false);
    print_cell(out, pf_polarity_text(part->polarity), W_CHANNEL, true);
    print_number(out, part->vds_max_V, W_VDS);
    print_number(out, part->id_cont_A, W_ID);
    print_rdson(out, part);
    print_soa(out, part);
    print_zth(out, part);
    print_cell(out, part->status, W_STATUS, false);
    fprintf(out, "%.*s\n", W_REVIEW + 2, listed->review ? listed->review : "-");
}
