/* fuzz_cell.c: any text as an `soa` cell, a `zth` cell and a header; what is read is repaired, and then
** must be sorted, positive and finite. */
#include "intake/column.h"
#include "intake/curve_repair.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

static void count_fault(void *context, uint32_t line, const pf_fault *fault)
{
    (void)line;
    if (!fault->wrong[0]) abort();
    ++*(size_t *)context;
}

static void check_points(const pf_raw_points *points, bool soa)
{
    for (size_t i = 0; i < points->count; i++) {
        const pf_raw_point *point = &points->item[i], *before = point - 1;
        if (!(point->y > 0) || !isfinite(point->y) || !(point->pulse_s > 0)) abort();
        if (soa && (!(point->x > 0) || !isfinite(point->x))) abort();
        if (i == 0) continue;
        if (before->pulse_s > point->pulse_s) abort();
        if (soa && before->pulse_s == point->pulse_s && before->x > point->x) abort();
        if (!soa && (before->pulse_s == point->pulse_s || before->y > point->y)) abort();
    }
}

static void try_cell(pf_slice text, bool soa)
{
    pf_number_style style = {0, ',', 0};
    pf_raw_points points = {0};
    pf_fault fault = {"", ""};
    pf_repair repair = {0};
    size_t faults = 0;
    pf_thermal_path path = PF_JUNCTION_CASE;
    bool foster = false;
    if (!soa) pf_zth_cell_words(&text, &path, &foster);
    pf_status status = soa ? pf_soa_cell_read(text, 25, &style, &points, &fault)
                           : pf_zth_cell_read(text, foster, &style, &points, &fault);
    if (status == PF_BAD_INPUT && !fault.wrong[0]) abort();
    if (status == PF_OK && soa) pf_soa_repair(&points, &repair, count_fault, &faults);
    if (status == PF_OK && !soa && !foster) pf_zth_repair(&points, &repair, count_fault, &faults);
    if (faults != repair.faults) abort();
    if (status == PF_OK && faults == 0 && !foster) check_points(&points, soa);
    pf_raw_points_clear(&points);
}

static void try_header(pf_slice text)
{
    pf_column_kind list[PF_COLUMN_KINDS_MAX];
    for (int kind = PF_KIND_PARTS; kind < PF_FILE_KIND_COUNT; kind++) {
        pf_column column;
        pf_fault fault = {"", ""};
        const char *remark;
        size_t count = pf_column_kinds((pf_file_kind)kind, list);
        pf_status status =
            pf_column_read(text, (pf_file_kind)kind, list, count, &column, &remark, &fault);
        if (status == PF_BAD_INPUT && !fault.wrong[0]) abort();
        bool gate = status == PF_OK && column.kind.role == PF_ROLE_RDSON;
        if (gate && !(column.condition >= 0.1 && column.condition <= 100)) abort();
        pf_column_near(text, list, count);
    }
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    pf_slice text = {(const char *)data, size};
    if (size == 0 || memchr(data, 0, size)) return 0;
    try_cell(text, true);
    try_cell(text, false);
    if (size < 300) try_header(text);
    return 0;
}
