/* capture_file.c: a measured waveform, time, V_DS and I_D. */
#include "base/memory.h"
#include "base/number.h"
#include "intake/sheet.h"

#include <passfet/intake.h>
#include <string.h>

#define SAMPLES_MAX ((size_t)20000000)

typedef struct capture_reading {
    pf_capture_data *data;
    size_t time_room, vds_room, id_room, dropped;
    bool stopped; /* time ran backwards: said once */
} capture_reading;

void pf_capture_data_clear(pf_capture_data *capture)
{
    pf_free(capture->name);
    pf_free(capture->time_s);
    pf_free(capture->vds_V);
    pf_free(capture->id_A);
    *capture = (pf_capture_data){0};
}

static pf_status append(capture_reading *reading, const double sample[3])
{
    pf_capture_data *data = reading->data;
    size_t needed = data->count + 1;
    if (needed > SAMPLES_MAX) return PF_LIMIT;
    pf_status status = pf_grow((void **)&data->time_s, &reading->time_room, needed, sizeof(double));
    if (status == PF_OK)
        status = pf_grow((void **)&data->vds_V, &reading->vds_room, needed, sizeof(double));
    if (status == PF_OK)
        status = pf_grow((void **)&data->id_A, &reading->id_room, needed, sizeof(double));
    if (status != PF_OK) return status;
    data->time_s[data->count] = sample[0];
    data->vds_V[data->count] = sample[1];
    data->id_A[data->count++] = sample[2];
    return PF_OK;
}

static pf_status refuse_time(pf_sheet *sheet, capture_reading *reading, const char *wrong)
{
    pf_fault fault;
    if (reading->stopped) return PF_OK;
    reading->stopped = true;
    pf_fault_set(&fault, "samples in the order in which they were taken", "%s", wrong);
    return pf_sheet_refuse(sheet, "time", pf_sheet_text(sheet, 0), &fault);
}

static pf_status take(pf_sheet *sheet, void *context)
{
    static const char *const names[] = {"time", "vds", "id"};
    capture_reading *reading = context;
    const pf_capture_data *data = reading->data;
    double sample[3];
    size_t before = sheet->problems->refusals;
    for (size_t i = 0; i < 3; i++) {
        pf_fault fault;
        pf_status status = pf_sheet_number(sheet, i, &sample[i]);
        if (status != PF_OK) return status;
        if (pf_is_stated(sample[i]) || !pf_not_stated(pf_sheet_text(sheet, i))) continue;
        pf_fault_set(&fault, "a number in every row", "the cell is blank");
        status = pf_sheet_refuse(sheet, names[i], pf_sheet_text(sheet, i), &fault);
        if (status != PF_OK) return status;
    }
    if (sheet->problems->refusals > before) return PF_OK;
    if (data->count > 0) {
        size_t last = data->count - 1;
        double step_s = sample[0] - data->time_s[last];
        bool same = sample[1] == data->vds_V[last] && sample[2] == data->id_A[last];
        if (step_s < 0) return refuse_time(sheet, reading, "time runs backwards");
        if (step_s == 0 && !same) return refuse_time(sheet, reading, "two samples at one time");
        if (step_s == 0) {
            reading->dropped++;
            return PF_OK;
        }
    }
    return append(reading, sample);
}

static pf_status check_end(pf_sheet *sheet, const capture_reading *reading)
{
    pf_fault fault;
    pf_place place = {sheet->file, 0, NULL, NULL};
    if (reading->data->count < 2) {
        pf_fault_set(&fault, "a waveform of at least two samples", "fewer than two samples");
        pf_status status =
            pf_sheet_refuse_at(sheet, sheet->last_line, NULL, (pf_slice){"", 0}, &fault);
        return status == PF_OK ? PF_BAD_INPUT : status;
    }
    if (reading->dropped == 0) return PF_OK;
    return pf_problems_add(sheet->problems, PF_SEVERITY_NOTE, place, NULL,
                           "%zu samples that repeat the one before them dropped", reading->dropped);
}

static pf_status read_capture(const pf_source *source, pf_capture_data *capture,
                              pf_problems *problems)
{
    char name[256];
    capture_reading reading = {.data = capture};
    pf_sheet sheet = {.problems = problems,
                      .column_count = 3,
                      .column = {{"time|t",
                                  true,
                                  true,
                                  {PF_TIME, 0, -1e6, 1e6, false, false, false, PF_BOUND_NONE}},
                                 {"vds|v ds|drain source voltage|v",
                                  true,
                                  true,
                                  {PF_VOLTAGE, 0, -1e4, 1e4, false, false, false, PF_BOUND_NONE}},
                                 {"id|i d|drain current|i",
                                  true,
                                  true,
                                  {PF_CURRENT, 0, -1e5, 1e5, false, false, false, PF_BOUND_NONE}}},
                      .take = take,
                      .context = &reading};
    pf_status status = pf_sheet_read(&sheet, source);
    if (status == PF_OK) status = check_end(&sheet, &reading);
    pf_base_name(source->name, name, sizeof name);
    if (status == PF_OK) status = pf_text_copy(&capture->name, name);
    if (status != PF_OK) pf_capture_data_clear(capture);
    return status;
}

pf_status pf_capture_read(const char *name, const char *bytes, size_t length,
                          pf_capture_data *capture, pf_problems *problems)
{
    pf_source source = {name, bytes ? bytes : "", length};
    return read_capture(&source, capture, problems);
}

pf_status pf_capture_read_file(const char *path, pf_capture_data *capture, pf_problems *problems)
{
    pf_source source = {.name = path};
    return read_capture(&source, capture, problems);
}
