/* curve_install.c: repaired points into the change of a part, and what was repaired into words. */
#include "base/buffer.h"
#include "base/memory.h"
#include "base/number.h"
#include "intake/curve_repair.h"
#include "intake/reader.h"

#include <stdio.h>
#include <string.h>

typedef struct installing {
    pf_reader *reader;
    const pf_curve_place *place;
    pf_status status; /* of reporting */
    bool good;
} installing;

static void report(installing *work, pf_severity severity, size_t line, const pf_fault *fault)
{
    pf_place place = {work->reader->file, line, work->place->column, work->place->part};
    pf_status status = pf_reader_report(work->reader, severity, place, fault);
    if (work->status == PF_OK) work->status = status;
    if (severity != PF_SEVERITY_REFUSAL) return;
    work->good = false;
    work->reader->row_refused = true;
    if (!work->reader->reason[0])
        snprintf(work->reader->reason, sizeof work->reader->reason, "%.300s", fault->wrong);
}

static void on_fault(void *context, uint32_t line, const pf_fault *fault)
{
    report(context, PF_SEVERITY_REFUSAL, line, fault);
}

/* --- Raw curves ----------------------------------------------------------------------------- */

static void print_number(pf_buffer *out, double value)
{
    char text[PF_NUMBER_ROOM];
    if (value == PF_DC) {
        pf_buffer_text(out, "dc");
        return;
    }
    pf_number_print(text, value, 0);
    pf_buffer_text(out, text);
}

/* The points as they stood, one a line: kind, case in degC, pulse or time in s, V, A or K/W. */
static pf_status keep_raw(pf_part_change *change, const pf_raw_points *points, pf_file_kind kind)
{
    pf_buffer out;
    pf_buffer_init(&out, (size_t)16 << 20);
    if (change->raw_curves) pf_buffer_text(&out, change->raw_curves);
    for (size_t i = 0; i < points->count; i++) {
        const pf_raw_point *point = &points->item[i];
        bool soa = kind == PF_KIND_SOA;
        pf_buffer_text(&out, soa ? "soa," : "zth,,");
        if (soa) print_number(&out, point->case_degC);
        if (soa) pf_buffer_text(&out, ",");
        print_number(&out, point->pulse_s);
        pf_buffer_text(&out, ",");
        if (soa) print_number(&out, point->x);
        pf_buffer_text(&out, ",");
        print_number(&out, point->y);
        pf_buffer_text(&out, "\n");
    }
    pf_status status = pf_buffer_status(&out);
    char *text = NULL;
    if (status == PF_OK) status = pf_text_copy(&text, pf_buffer_string(&out));
    if (status == PF_OK) {
        pf_free(change->raw_curves);
        change->raw_curves = text;
    }
    pf_buffer_clear(&out);
    return status;
}

static bool changed(const pf_repair *repair)
{
    return repair->dropped + repair->averaged + repair->raised > 0;
}

static void tell_repair(installing *work, const pf_repair *repair)
{
    pf_fault fault = {"", ""};
    size_t at = 0;
    const struct {
        size_t count;
        const char *words;
    } done[] = {{repair->sorted, "out of order, sorted"},
                {repair->dropped, "exact duplicates dropped"},
                {repair->averaged, "within 3 % of each other at one place, averaged"},
                {repair->raised, "fallen by up to 2 %, raised to a level line"}};
    for (size_t i = 0; i < sizeof done / sizeof *done; i++)
        if (done[i].count > 0 && at < sizeof fault.wrong)
            at += (size_t)snprintf(fault.wrong + at, sizeof fault.wrong - at, "%s%zu points %s",
                                   at ? "; " : "curve repaired: ", done[i].count, done[i].words);
    if (at > 0) report(work, PF_SEVERITY_NOTE, work->place->line, &fault);
}

/* A minus belongs to P-channel parts. */
static void check_polarity(installing *work, const pf_raw_points *points, const pf_part *part)
{
    pf_fault fault;
    if (part->polarity != PF_N_CHANNEL) return;
    for (size_t i = 0; i < points->count; i++) {
        if (!points->item[i].negative_x && !points->item[i].negative_y) continue;
        pf_fault_set(&fault, "positive values; are these logarithms?",
                     "negative, and the part is N-channel");
        report(work, PF_SEVERITY_REFUSAL, points->item[i].line, &fault);
        return;
    }
}

static void tell_suspicion(installing *work, const pf_repair *repair)
{
    pf_fault fault;
    if (!repair->suspicious) return;
    bool accept = work->reader->options->accept;
    pf_fault_set(&fault, accept ? "" : "volts and amperes, or --accept", "%s", repair->why);
    report(work, accept ? PF_SEVERITY_WARNING : PF_SEVERITY_REFUSAL, work->place->line, &fault);
}

/* --- Into the change ------------------------------------------------------------------------ */

static bool holds_curve(const pf_part *part, double case_degC, double pulse_s)
{
    for (size_t i = 0; i < part->soa_count; i++)
        if (part->soa[i].case_degC == case_degC && part->soa[i].pulse_s == pulse_s) return true;
    return false;
}

static void refuse_second(installing *work, const char *what)
{
    pf_fault fault;
    pf_fault_set(&fault, "each curve once", "the files of this run state this part's %s twice",
                 what);
    report(work, PF_SEVERITY_REFUSAL, work->place->line, &fault);
}

/* Adds to what another file of the run states, curve by curve; the same curve again is refused. */
static pf_status put_soa(installing *work, const pf_raw_points *points, pf_part_change *change)
{
    pf_part *part = &change->part;
    pf_soa_point *all = pf_allocate(part->soa_count + points->count, sizeof *all);
    if (!all) return PF_NO_MEMORY;
    size_t count = part->soa_count;
    if (count > 0) memcpy(all, part->soa, count * sizeof *all);
    bool second = false;
    for (size_t i = 0; i < points->count; i++) {
        const pf_raw_point *point = &points->item[i];
        second |= part->soa_count > 0 && holds_curve(part, point->case_degC, point->pulse_s);
        all[count++] = (pf_soa_point){point->case_degC, point->pulse_s, point->x, point->y};
    }
    pf_status status = PF_OK;
    bool same = second && points->count == part->soa_count &&
                memcmp(all, all + points->count, points->count * sizeof *all) == 0;
    if (second && !same)
        refuse_second(work, "SOA");
    else if (!same)
        status = pf_part_set_soa(part, all, count);
    if (status == PF_OK) change->soa_given = true;
    pf_free(all);
    return status;
}

static pf_status put_zth(installing *work, const pf_raw_points *points, pf_thermal_path path,
                         pf_part_change *change)
{
    const pf_thermal_curve *old = &change->part.thermal[path];
    pf_zth_point *all = pf_allocate(points->count, sizeof *all);
    if (!all) return PF_NO_MEMORY;
    for (size_t i = 0; i < points->count; i++)
        all[i] = (pf_zth_point){points->item[i].pulse_s, points->item[i].y};
    pf_status status = PF_OK;
    bool stated = old->point_count + old->pair_count > 0;
    bool same = old->point_count == points->count &&
                memcmp(old->point, all, points->count * sizeof *all) == 0;
    if (stated && !same)
        refuse_second(work, "Zth");
    else if (!stated)
        status = pf_part_set_zth(&change->part, path, all, points->count);
    if (status == PF_OK) change->thermal_given[path] = true;
    pf_free(all);
    return status;
}

static pf_status put_foster(installing *work, const pf_raw_points *points, pf_thermal_path path,
                            pf_part_change *change)
{
    const pf_thermal_curve *old = &change->part.thermal[path];
    pf_foster_pair *all = pf_allocate(points->count, sizeof *all);
    if (!all) return PF_NO_MEMORY;
    for (size_t i = 0; i < points->count; i++)
        all[i] = (pf_foster_pair){points->item[i].y, points->item[i].pulse_s};
    pf_status status = PF_OK;
    if (old->point_count + old->pair_count > 0)
        refuse_second(work, "Zth");
    else
        status = pf_part_set_foster(&change->part, path, all, points->count);
    if (status == PF_OK) change->thermal_given[path] = true;
    pf_free(all);
    return status;
}

static pf_status put(installing *work, const pf_raw_points *points, pf_file_kind kind,
                     pf_thermal_path path, pf_part_change *change)
{
    if (kind == PF_KIND_FOSTER) return put_foster(work, points, path, change);
    if (kind == PF_KIND_ZTH) return put_zth(work, points, path, change);
    return put_soa(work, points, change);
}

pf_status pf_curve_install(pf_reader *reader, pf_raw_points *points, pf_file_kind kind,
                           pf_thermal_path path, const pf_curve_place *place,
                           pf_part_change *change, bool *good)
{
    installing work = {reader, place, PF_OK, true};
    pf_repair repair = {0};
    pf_raw_points raw = {0};
    pf_status status = PF_OK;
    kind = kind == PF_KIND_SOA_WIDE ? PF_KIND_SOA : kind;
    for (size_t i = 0; i < points->count && status == PF_OK; i++)
        status = pf_raw_points_add(&raw, points->item[i]);
    if (status == PF_OK && kind == PF_KIND_SOA) pf_soa_repair(points, &repair, on_fault, &work);
    if (status == PF_OK && kind == PF_KIND_ZTH) pf_zth_repair(points, &repair, on_fault, &work);
    if (repair.faults == 0) tell_repair(&work, &repair);
    tell_suspicion(&work, &repair);
    check_polarity(&work, &raw, &change->part);
    if (status == PF_OK) status = work.status;
    if (status == PF_OK && work.good) status = put(&work, points, kind, path, change);
    if (status == PF_OK && work.good && changed(&repair)) status = keep_raw(change, &raw, kind);
    if (status == PF_OK) status = work.status;
    if (work.good) reader->summary->points += points->count;
    *good = work.good;
    pf_raw_points_clear(&raw);
    return status;
}
