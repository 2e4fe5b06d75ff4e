/* model.c: a part made ready for evaluation. */
#include "device/model.h"
#include "base/memory.h"
#include "base/number.h"

#include <math.h>

void pf_model_init(pf_model *model)
{
    *model = (pf_model){0};
}

void pf_model_clear(pf_model *model)
{
    pf_free(model->logs);
    pf_free(model->curves);
    pf_free(model->family_memory);
    pf_model_init(model);
}

static bool same_curve(const pf_soa_point *left, const pf_soa_point *right)
{
    return left->case_degC == right->case_degC && left->pulse_s == right->pulse_s;
}

/* Points at from .. return value - 1 are one curve. */
static size_t curve_end(const pf_part *part, size_t from)
{
    size_t end = from + 1;
    while (end < part->soa_count && same_curve(&part->soa[from], &part->soa[end]))
        end++;
    return end;
}

/* One current per voltage. Where a sheet draws a vertical edge at the end of a curve, its upper end
** is the limit at that voltage and the rest only the voltage rating; elsewhere the smaller counts. */
static double current_at(const pf_part *part, size_t from, size_t to, size_t curve_stop)
{
    double current = part->soa[from].id_A;
    bool edge = to == curve_stop;
    for (size_t i = from + 1; i < to; i++)
        current = edge ? fmax(current, part->soa[i].id_A) : fmin(current, part->soa[i].id_A);
    return current;
}

/* Logarithms of one curve from where it first reaches its highest current; returns how many. */
static size_t load_curve(const pf_part *part, size_t from, size_t to, double *log_v, double *log_i)
{
    size_t kept = 0, next;
    double highest = 0;
    for (size_t at = from; at < to; at = next) {
        next = at + 1;
        while (next < to && part->soa[next].vds_V == part->soa[at].vds_V)
            next++;
        double current = current_at(part, at, next, to);
        if (current > highest) {
            highest = current;
            kept = 0;
        }
        log_v[kept] = log(part->soa[at].vds_V);
        log_i[kept++] = log(current);
    }
    return kept;
}

static void close_family(pf_model *model, pf_soa_family *family, size_t first, size_t end)
{
    family->curve = model->curves + first;
    family->dc = end > first && isinf(model->curves[end - 1].pulse_s);
    family->pulses = end - first - (family->dc ? 1 : 0);
}

static pf_status load_families(pf_model *model, const pf_part *part, double *logs)
{
    size_t curves = 0, first = 0;
    for (size_t at = 0, end; at < part->soa_count; at = end) {
        end = curve_end(part, at);
        bool fresh = at == 0 || part->soa[at].case_degC != part->soa[at - 1].case_degC;
        if (fresh) {
            if (at) close_family(model, &model->family_memory[model->families - 1], first, curves);
            first = curves;
            model->family_memory[model->families++] = (pf_soa_family){
                .case_degC = part->soa[at].case_degC,
                .span_K = part->tj_max_degC - part->soa[at].case_degC,
            };
        }
        pf_soa_curve *curve = &model->curves[curves++];
        *curve = (pf_soa_curve){.pulse_s = part->soa[at].pulse_s,
                                .log_pulse = log(part->soa[at].pulse_s),
                                .log_v = logs,
                                .log_i = logs + (end - at)};
        curve->points = load_curve(part, at, end, logs, logs + (end - at));
        logs += 2 * (end - at);
        if (curves - first > PF_PULSES_MAX) return PF_LIMIT;
    }
    if (part->soa_count)
        close_family(model, &model->family_memory[model->families - 1], first, curves);
    return PF_OK;
}

static double *load_zth(pf_zth *zth, const pf_part *part, pf_thermal_path path, double *logs)
{
    const pf_thermal_curve *curve = &part->thermal[path];
    double steady = path == PF_JUNCTION_CASE ? part->rth_jc_KpW : part->rth_ja_KpW;
    *zth = (pf_zth){.path = path, .pair = curve->pair, .pairs = curve->pair_count};
    if (curve->point_count == 0) return logs;
    zth->points = curve->point_count;
    zth->log_t = logs;
    zth->log_z = logs + curve->point_count;
    for (size_t i = 0; i < curve->point_count; i++) {
        logs[i] = log(curve->point[i].time_s);
        logs[curve->point_count + i] = log(curve->point[i].zth_KpW);
    }
    zth->beyond_KpW = fmax(curve->point[curve->point_count - 1].zth_KpW, steady);
    return logs + 2 * curve->point_count;
}

static size_t count_logs(const pf_part *part)
{
    return 2 * (part->soa_count + part->thermal[PF_JUNCTION_CASE].point_count +
                part->thermal[PF_JUNCTION_AMBIENT].point_count);
}

pf_status pf_model_load(pf_model *model, const pf_part *part)
{
    pf_status status = pf_grow((void **)&model->logs, &model->logs_room, count_logs(part) + 1,
                               sizeof *model->logs);
    if (status == PF_OK)
        status = pf_grow((void **)&model->curves, &model->curves_room, part->soa_count + 1,
                         sizeof *model->curves);
    if (status == PF_OK)
        status = pf_grow((void **)&model->family_memory, &model->families_room, part->soa_count + 1,
                         sizeof *model->family_memory);
    if (status != PF_OK) return status;
    model->part = part;
    model->families = 0;
    model->family = model->family_memory;
    double *logs = load_zth(&model->zth[PF_JUNCTION_CASE], part, PF_JUNCTION_CASE, model->logs);
    logs = load_zth(&model->zth[PF_JUNCTION_AMBIENT], part, PF_JUNCTION_AMBIENT, logs);
    return load_families(model, part, logs);
}

const pf_zth *pf_model_zth(const pf_model *model)
{
    const pf_zth *to_case = &model->zth[PF_JUNCTION_CASE];
    const pf_zth *to_ambient = &model->zth[PF_JUNCTION_AMBIENT];
    return pf_zth_stated(to_case) || !pf_zth_stated(to_ambient) ? to_case : to_ambient;
}

const pf_soa_family *pf_model_family(const pf_model *model, double start_degC)
{
    if (model->families == 0) return NULL;
    size_t at = model->families - 1;
    while (at > 0 && model->family[at].case_degC > start_degC)
        at--;
    return &model->family[at];
}
