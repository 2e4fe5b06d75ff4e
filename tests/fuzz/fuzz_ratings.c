/* fuzz_ratings.c: any bytes as a ratings file, strict and with good rows kept. What is accepted holds
** only values in their ranges and sorted curves, and can be judged. */
#include <passfet/intake.h>

#include <math.h>
#include <stdint.h>
#include <stdlib.h>

static void ignore_row(void *context, const pf_bad_row *row)
{
    (void)context;
    if (row->cell_count > 0 && !row->reason[0]) abort();
}

static void check_part(const pf_part *part)
{
    size_t count;
    const pf_rating_field *field = pf_rating_fields(&count);
    if (!part->name || !part->name[0]) abort();
    for (size_t i = 0; i < count; i++) {
        double value = pf_part_rating_value(part, &field[i]);
        if (!isnan(value) && !(value >= field[i].lowest && value <= field[i].highest)) abort();
    }
    for (size_t i = 0; i < part->soa_count; i++)
        if (!(part->soa[i].id_A > 0) || !(part->soa[i].vds_V > 0) || !(part->soa[i].pulse_s > 0))
            abort();
}

static void read_once(const char *text, size_t size, bool keep_good)
{
    pf_problems problems;
    pf_changes changes = {0};
    pf_intake_summary summary = {0};
    pf_intake_options options = {.part_name = "X", .keep_good = keep_good, .bad_row = ignore_row};
    pf_problems_init(&problems);
    pf_status status =
        pf_ratings_read("fuzz.csv", text, size, &options, &changes, &summary, &problems);
    if (status == PF_BAD_INPUT && problems.refusals == 0) abort();
    if (status == PF_OK && !keep_good && problems.refusals > 0) abort();
    for (size_t i = 0; i < changes.count && status == PF_OK; i++) {
        check_part(&changes.item[i].part);
        pf_status judged = pf_part_judge(&changes.item[i].part, "fuzz.csv", 1, false, &problems);
        if (judged != PF_OK && judged != PF_BAD_INPUT && judged != PF_LIMIT) abort();
    }
    pf_changes_clear(&changes);
    pf_problems_clear(&problems);
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    read_once((const char *)data, size, false);
    read_once((const char *)data, size, true);
    return 0;
}
