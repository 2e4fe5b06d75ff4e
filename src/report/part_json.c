/* part_json.c: parts as JSON. */
#include "base/memory.h"
#include "report/json.h"

#include <math.h>
#include <passfet/listing.h>

struct pf_listing_json {
    pf_json json;
};

static void write_soa(pf_json *json, const pf_part *part)
{
    pf_json_name(json, "soa");
    pf_json_open(json, '[');
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        pf_json_open(json, '{');
        pf_json_named_number(json, "case_degC", point->case_degC);
        pf_json_name(json, "pulse_s");
        if (point->pulse_s == PF_DC)
            pf_json_text(json, "dc");
        else
            pf_json_number(json, point->pulse_s);
        pf_json_named_number(json, "vds_V", point->vds_V);
        pf_json_named_number(json, "id_A", point->id_A);
        pf_json_close(json, '}');
    }
    pf_json_close(json, ']');
}

/* A list of pairs of numbers. */
static void write_pair(pf_json *json, const char *first, double first_value, const char *second,
                       double second_value)
{
    pf_json_open(json, '{');
    pf_json_named_number(json, first, first_value);
    pf_json_named_number(json, second, second_value);
    pf_json_close(json, '}');
}

static void write_thermal(pf_json *json, const char *name, const pf_thermal_curve *curve)
{
    pf_json_name(json, name);
    pf_json_open(json, '[');
    for (size_t i = 0; i < curve->point_count; i++)
        write_pair(json, "time_s", curve->point[i].time_s, "zth_KpW", curve->point[i].zth_KpW);
    for (size_t i = 0; i < curve->pair_count; i++)
        write_pair(json, "r_KpW", curve->pair[i].r_KpW, "tau_s", curve->pair[i].tau_s);
    pf_json_close(json, ']');
}

static void write_fields(pf_json *json, const pf_part *part)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    for (size_t i = 0; i < texts; i++)
        pf_json_named_text(json, text[i].csv, pf_part_text_value(part, &text[i]));
    pf_json_named_text(json, "polarity",
                       part->polarity == PF_POLARITY_NONE ? NULL
                                                          : pf_polarity_text(part->polarity));
    for (size_t i = 0; i < ratings; i++)
        pf_json_named_number(json, rating[i].name, pf_part_rating_value(part, &rating[i]));
}

static void write_part(pf_json *json, const pf_listed_part *listed)
{
    const pf_part *part = listed->part;
    pf_json_open(json, '{');
    write_fields(json, part);
    pf_json_name(json, "rdson_max");
    pf_json_open(json, '[');
    for (size_t i = 0; i < part->rdson_count; i++)
        write_pair(json, "vgs_V", part->rdson[i].vgs_V, "rdson_ohm", part->rdson[i].rdson_ohm);
    pf_json_close(json, ']');
    write_soa(json, part);
    write_thermal(json, "zth_case", &part->thermal[PF_JUNCTION_CASE]);
    write_thermal(json, "zth_ambient", &part->thermal[PF_JUNCTION_AMBIENT]);
    pf_json_named_number(json, "revision", (double)listed->revision);
    pf_json_named_number(json, "entry", (double)listed->entry);
    pf_json_named_text(json, "author", listed->author);
    pf_json_named_text(json, "time", listed->time);
    pf_json_named_text(json, "review", listed->review);
    pf_json_close(json, '}');
}

pf_status pf_listing_json_new(FILE *out, pf_listing_json **list)
{
    *list = pf_allocate(1, sizeof **list);
    if (!*list) return PF_NO_MEMORY;
    pf_json_begin(&(*list)->json, out);
    pf_json_open(&(*list)->json, '[');
    return PF_OK;
}

void pf_listing_json_part(pf_listing_json *list, const pf_listed_part *listed)
{
    write_part(&list->json, listed);
}

void pf_listing_json_end(pf_listing_json *list)
{
    if (!list) return;
    pf_json_close(&list->json, ']');
    pf_json_end(&list->json);
    pf_free(list);
}

void pf_listing_json_page(FILE *out, const pf_listed_part *listed)
{
    pf_json json;
    pf_json_begin(&json, out);
    write_part(&json, listed);
    pf_json_end(&json);
}
