/* ratings_csv.c: ratings as CSV that import reads again unchanged.
**
** Header units are SI, so that no value is scaled on its way; numbers have as few digits as read back
** bit for bit.
*/
#include "base/memory.h"
#include "base/number.h"
#include "report/csv.h"

#include <math.h>
#include <passfet/listing.h>
#include <string.h>

static void end_row(FILE *out)
{
    fputs("\r\n", out);
}

/* --- Gate drives --------------------------------------------------------------------------- */

/* Where a gate drive stands, or belongs. */
static size_t place_of(const pf_drives *drives, double vgs_V)
{
    size_t place = 0;
    while (place < drives->count && drives->vgs_V[place] < vgs_V)
        place++;
    return place;
}

pf_status pf_drives_add(pf_drives *drives, const pf_part *part)
{
    for (size_t i = 0; i < part->rdson_count; i++) {
        double vgs_V = part->rdson[i].vgs_V;
        size_t place = place_of(drives, vgs_V), behind = drives->count - place;
        if (behind && drives->vgs_V[place] == vgs_V) continue;
        pf_status status = pf_grow((void **)&drives->vgs_V, &drives->capacity, drives->count + 1,
                                   sizeof *drives->vgs_V);
        if (status != PF_OK) return status;
        memmove(drives->vgs_V + place + 1, drives->vgs_V + place, behind * sizeof *drives->vgs_V);
        drives->vgs_V[place] = vgs_V;
        drives->count++;
    }
    return PF_OK;
}

void pf_drives_clear(pf_drives *drives)
{
    pf_free(drives->vgs_V);
    *drives = (pf_drives){0};
}

static double rdson_at(const pf_part *part, double vgs_V)
{
    for (size_t i = 0; i < part->rdson_count; i++)
        if (part->rdson[i].vgs_V == vgs_V) return part->rdson[i].rdson_ohm;
    return PF_NONE;
}

/* --- Parts --------------------------------------------------------------------------------- */

static void write_parts_head(FILE *out, const pf_drives *drives, bool curves)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    for (size_t i = 0; i < texts; i++)
        fprintf(out, "%s,", text[i].csv);
    fputs("polarity", out);
    for (size_t i = 0; i < ratings; i++) {
        const char *unit = pf_quantity_unit(rating[i].quantity);
        fprintf(out, *unit ? ",%s [%s]" : ",%s", rating[i].csv, unit);
    }
    for (size_t i = 0; i < drives->count; i++) {
        fputs(",rdson_max @ ", out);
        pf_csv_number(out, drives->vgs_V[i]);
        fputs(" V [Ohm]", out);
    }
    if (curves) fputs(",soa,zth", out);
    end_row(out);
}

/* SOA points as one cell: `0.001s 1:400 10:100 | dc 1:120 | 0.001s@75 1:250`. */
static void write_soa_cell(FILE *out, const pf_part *part)
{
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i], *before = i ? point - 1 : NULL;
        if (!before || before->pulse_s != point->pulse_s || before->case_degC != point->case_degC) {
            fputs(before ? " | " : "", out);
            pf_csv_number(out, point->pulse_s); /* nothing for the DC line */
            fputs(point->pulse_s == PF_DC ? "dc" : "s", out);
            if (point->case_degC != 25) fputc('@', out);
            if (point->case_degC != 25) pf_csv_number(out, point->case_degC);
        }
        fputc(' ', out);
        pf_csv_number(out, point->vds_V);
        fputc(':', out);
        pf_csv_number(out, point->id_A);
    }
}

/* Thermal curves as one cell: `case 0.001s:0.1 1s:0.6 | ambient foster 0.1:0.001s`. */
static void write_zth_cell(FILE *out, const pf_part *part)
{
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *curve = &part->thermal[path];
        const char *mark = path == PF_JUNCTION_AMBIENT ? "ambient" : "case";
        if (curve->point_count + curve->pair_count == 0) continue;
        bool second = path > 0 && part->thermal[0].point_count + part->thermal[0].pair_count;
        fprintf(out, "%s%s%s", second ? " | " : "", mark, curve->pair_count ? " foster" : "");
        for (size_t i = 0; i < curve->point_count; i++) {
            fputc(' ', out);
            pf_csv_number(out, curve->point[i].time_s);
            fputs("s:", out);
            pf_csv_number(out, curve->point[i].zth_KpW);
        }
        for (size_t i = 0; i < curve->pair_count; i++) {
            fputc(' ', out);
            pf_csv_number(out, curve->pair[i].r_KpW);
            fputc(':', out);
            pf_csv_number(out, curve->pair[i].tau_s);
            fputc('s', out);
        }
    }
}

static void write_parts_row(FILE *out, const pf_drives *drives, const pf_part *part, bool curves)
{
    size_t texts, ratings;
    const pf_text_field *text = pf_text_fields(&texts);
    const pf_rating_field *rating = pf_rating_fields(&ratings);
    for (size_t i = 0; i < texts; i++) {
        pf_csv_text(out, pf_part_text_value(part, &text[i]));
        fputc(',', out);
    }
    fputs(pf_polarity_text(part->polarity), out);
    for (size_t i = 0; i < ratings; i++) {
        fputc(',', out);
        pf_csv_number(out, pf_part_rating_value(part, &rating[i]));
    }
    for (size_t i = 0; i < drives->count; i++) {
        fputc(',', out);
        pf_csv_number(out, rdson_at(part, drives->vgs_V[i]));
    }
    if (curves) {
        fputc(',', out);
        write_soa_cell(out, part);
        fputc(',', out);
        write_zth_cell(out, part);
    }
    end_row(out);
}

/* --- Curves -------------------------------------------------------------------------------- */

static void write_names(FILE *out, const pf_part *part)
{
    pf_csv_text(out, part->name);
    fputc(',', out);
    pf_csv_text(out, part->maker);
    fputc(',', out);
}

static void write_soa(FILE *out, const pf_part *part)
{
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        write_names(out, part);
        if (point->pulse_s == PF_DC)
            fputs("dc", out);
        else
            pf_csv_number(out, point->pulse_s);
        fputc(',', out);
        pf_csv_number(out, point->vds_V);
        fputc(',', out);
        pf_csv_number(out, point->id_A);
        fputc(',', out);
        pf_csv_number(out, point->case_degC);
        end_row(out);
    }
}

static void write_pair(FILE *out, const pf_part *part, double first, double second, int path)
{
    write_names(out, part);
    pf_csv_number(out, first);
    fputc(',', out);
    pf_csv_number(out, second);
    fputs(path == PF_JUNCTION_CASE ? ",case" : ",ambient", out);
    end_row(out);
}

static void write_zth(FILE *out, const pf_part *part)
{
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *curve = &part->thermal[path];
        for (size_t i = 0; i < curve->point_count; i++)
            write_pair(out, part, curve->point[i].time_s, curve->point[i].zth_KpW, path);
    }
}

static void write_foster(FILE *out, const pf_part *part)
{
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *curve = &part->thermal[path];
        for (size_t i = 0; i < curve->pair_count; i++)
            write_pair(out, part, curve->pair[i].r_KpW, curve->pair[i].tau_s, path);
    }
}

/* --- Files --------------------------------------------------------------------------------- */

const char *pf_ratings_csv_name(pf_ratings_csv kind)
{
    static const char *const name[] = {"parts.csv", "soa_points.csv", "zth_points.csv",
                                       "foster.csv"};
    return name[kind];
}

void pf_ratings_csv_head(FILE *out, pf_ratings_csv kind, const pf_drives *drives)
{
    static const char *const head[] = {
        NULL,
        "part,maker,pulse [s],vds [V],id [A],case_temperature [degC]\r\n",
        "part,maker,time [s],zth [K/W],zth_path\r\n",
        "part,maker,foster_r [K/W],foster_tau [s],zth_path\r\n",
    };
    if (kind == PF_CSV_PARTS || kind == PF_CSV_WHOLE)
        write_parts_head(out, drives, kind == PF_CSV_WHOLE);
    else
        fputs(head[kind], out);
}

void pf_ratings_csv_part(FILE *out, pf_ratings_csv kind, const pf_drives *drives,
                         const pf_part *part)
{
    switch (kind) {
    case PF_CSV_PARTS:
    case PF_CSV_WHOLE:
        write_parts_row(out, drives, part, kind == PF_CSV_WHOLE);
        break;
    case PF_CSV_SOA:
        write_soa(out, part);
        break;
    case PF_CSV_ZTH:
        write_zth(out, part);
        break;
    default:
        write_foster(out, part);
        break;
    }
}
