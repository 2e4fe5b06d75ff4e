/* plausibility.c: ratings of one part held against each other.
**
** Two numbers that should be alike are compared by their ratio: beyond WARN they are worth a look,
** beyond REFUSE one of them is wrong. Charts are read to 1 or 2 %, makers round and leave reserves;
** the bars are wide of that.
*/
#include <passfet/plausibility.h>

#include "base/number.h"
#include "device/model.h"
#include "device/on_resistance.h"
#include "numeric/curve.h"

#include <math.h>
#include <stdio.h>

#define WARN 1.5
#define REFUSE 3.0
#define CHART 1.05 /* how far a chart may be misread */

typedef struct checking {
    const pf_part *part;
    const pf_model *model;
    pf_finding_listener *listener;
    void *context;
} checking;

const char *pf_oddity_text(pf_oddity oddity)
{
    static const char *const text[] = {
#define PF_ODDITY_TEXT(code, quantity, words, look) words,
        PF_ODDITY_LIST(PF_ODDITY_TEXT)
#undef PF_ODDITY_TEXT
    };
    return text[oddity];
}

const char *pf_oddity_look(pf_oddity oddity)
{
    static const char *const text[] = {
#define PF_ODDITY_LOOK(code, quantity, words, look) look,
        PF_ODDITY_LIST(PF_ODDITY_LOOK)
#undef PF_ODDITY_LOOK
    };
    return text[oddity];
}

static pf_quantity quantity_of(pf_oddity oddity)
{
    static const pf_quantity quantity[] = {
#define PF_ODDITY_QUANTITY(code, quantity, words, look) quantity,
        PF_ODDITY_LIST(PF_ODDITY_QUANTITY)
#undef PF_ODDITY_QUANTITY
    };
    return quantity[oddity];
}

int pf_finding_print(const pf_finding *finding, char *text, size_t room)
{
    char found[PF_UNIT_ROOM], expected[PF_UNIT_ROOM], pulse[PF_UNIT_ROOM + 8] = "";
    char width[PF_UNIT_ROOM];
    pf_quantity quantity = quantity_of(finding->oddity);
    pf_value_print(found, finding->found, quantity, 3);
    pf_value_print(expected, finding->expected, quantity, 3);
    if (quantity == PF_TEMPERATURE) { /* a difference */
        snprintf(found, sizeof found, "%.3g K", finding->found);
        snprintf(expected, sizeof expected, "%.3g K", finding->expected);
    }
    pf_value_print(width, finding->pulse_s, PF_TIME, 3);
    if (finding->pulse_s == PF_DC) snprintf(width, sizeof width, "DC");
    if (pf_is_stated(finding->pulse_s)) snprintf(pulse, sizeof pulse, " (%s)", width);
    return snprintf(text, room, "%s: %s and %s%s", pf_oddity_text(finding->oddity), found, expected,
                    pulse);
}

static void tell(const checking *work, pf_oddity oddity, double found, double expected,
                 double pulse_s, double refuse)
{
    double ratio = found > expected ? found / expected : expected / found;
    pf_finding finding = {oddity, ratio, ratio > refuse, found, expected, pulse_s};
    work->listener(work->context, &finding);
}

/* Tells of two numbers that should be alike. Comparisons with a NaN are false. */
static void alike(const checking *work, pf_oddity oddity, double found, double expected,
                  double pulse_s, double refuse)
{
    if (found > expected * WARN || found < expected / WARN)
        tell(work, oddity, found, expected, pulse_s, refuse);
}

/* Tells where found is above expected by more than a chart is misread by. */
static void not_above(const checking *work, pf_oddity oddity, double found, double expected,
                      double pulse_s, double refuse)
{
    if (found > expected * CHART) tell(work, oddity, found, expected, pulse_s, refuse);
}

/* --- SOA ----------------------------------------------------------------------------------- */

static double slope_at(const pf_soa_curve *curve, size_t from)
{
    return pf_slope(curve->log_v[from], curve->log_i[from], curve->log_v[from + 1],
                    curve->log_i[from + 1]);
}

/* The mean power on the segments of a curve that run along constant power, in W; NaN for none. Hot
** spots make a curve fall faster and say nothing about Zth (Spirito et al.), Rds(on) and bond wires
** make it fall more slowly. */
static double thermal_power_W(const pf_soa_curve *curve)
{
    double sum = 0;
    size_t count = 0;
    for (size_t i = 0; i + 1 < curve->points; i++) {
        double slope = slope_at(curve, i);
        if (slope > -0.9 || slope < -1.1) continue;
        sum += curve->log_v[i] + curve->log_i[i] + curve->log_v[i + 1] + curve->log_i[i + 1];
        count += 2;
    }
    return count ? exp(sum / (double)count) : PF_NONE;
}

static void check_soa_zth(const checking *work, const pf_soa_family *family)
{
    const pf_zth *zth = &work->model->zth[PF_JUNCTION_CASE];
    double steady = work->part->rth_jc_KpW;
    for (size_t i = 0; i < family->pulses + family->dc; i++) {
        const pf_soa_curve *curve = &family->curve[i];
        double rise_KpW = isinf(curve->pulse_s) ? steady : PF_NONE;
        if (!isinf(curve->pulse_s) && pf_zth_stated(zth))
            rise_KpW = pf_zth_at(zth, curve->pulse_s, curve->log_pulse);
        /* makers draw DC lines for a package on a board as well: far apart is worth a look only */
        alike(work, PF_ODD_SOA_ZTH, thermal_power_W(curve) * rise_KpW, family->span_K,
              curve->pulse_s, isinf(curve->pulse_s) ? INFINITY : REFUSE);
    }
}

static double right_end_V(const pf_soa_curve *curve)
{
    return exp(curve->log_v[curve->points - 1]);
}

static void check_soa_voltage(const checking *work, const pf_soa_family *family)
{
    double reach = 0, rated = work->part->vds_max_V;
    for (size_t i = 0; i < family->pulses + family->dc; i++) {
        double end = right_end_V(&family->curve[i]);
        not_above(work, PF_ODD_SOA_VOLTAGE, end, rated, family->curve[i].pulse_s, WARN);
        reach = fmax(reach, end);
    }
    if (reach < rated / 2) tell(work, PF_ODD_SOA_SHORT, reach, rated, PF_NONE, 10);
}

static void check_soa_current(const checking *work, const pf_soa_family *family)
{
    for (size_t i = 0; i < family->pulses + family->dc; i++)
        not_above(work, PF_ODD_SOA_CURRENT, exp(family->curve[i].log_i[0]), work->part->id_pulse_A,
                  family->curve[i].pulse_s, REFUSE);
}

/* At each point of the longer pulse that the shorter one reaches. */
static void check_soa_pair(const checking *work, const pf_soa_curve *shorter,
                           const pf_soa_curve *longer)
{
    double worst = 0, found = 0, expected = 0;
    for (size_t i = 0; i < longer->points; i++) {
        double at = longer->log_v[i];
        if (at > shorter->log_v[shorter->points - 1]) continue;
        double allowed = pf_curve_log_at(shorter->log_v, shorter->log_i, shorter->points, at);
        if (longer->log_i[i] - allowed <= worst) continue;
        worst = longer->log_i[i] - allowed;
        found = exp(longer->log_i[i]);
        expected = exp(allowed);
    }
    if (worst > 0) not_above(work, PF_ODD_SOA_ORDER, found, expected, longer->pulse_s, REFUSE);
}

static void check_soa_order(const checking *work, const pf_soa_family *family)
{
    for (size_t i = 1; i < family->pulses + family->dc; i++)
        check_soa_pair(work, &family->curve[i - 1], &family->curve[i]);
}

/* V/I on the rising left flank of a curve, as the part states it, against cold and hot Rds(on). */
static void check_soa_edge(const checking *work)
{
    const pf_part *part = work->part;
    pf_on_resistance rdson = pf_on_resistance_at(part, 1000);
    double hot_ratio =
        pf_is_stated(part->rdson_hot_ratio) ? part->rdson_hot_ratio : PF_HOT_RATIO_ASSUMED;
    double hot = rdson.cold_ohm * hot_ratio;
    for (size_t i = 0; i + 1 < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i], *next = point + 1;
        bool first = i == 0 || point[-1].pulse_s != point->pulse_s ||
                     point[-1].case_degC != point->case_degC;
        bool same = next->pulse_s == point->pulse_s && next->case_degC == point->case_degC;
        double slope = log(next->id_A / point->id_A) / log(next->vds_V / point->vds_V);
        if (!first || !same || !(slope > 0.8 && slope < 1.2)) continue;
        double edge = point->vds_V / point->id_A;
        if (edge > hot * WARN) tell(work, PF_ODD_SOA_EDGE, edge, hot, point->pulse_s, 10);
        if (edge < rdson.cold_ohm / (2 * WARN)) /* typical values lie well below the maximum */
            tell(work, PF_ODD_SOA_EDGE, edge, rdson.cold_ohm, point->pulse_s, 10);
        return; /* one flank stands for all */
    }
}

/* --- Zth ----------------------------------------------------------------------------------- */

/* The end of the curve to the case: last point, or the sum of the Foster pairs. NaN for none. */
static double zth_end_KpW(const pf_thermal_curve *curve)
{
    double sum = 0;
    if (curve->point_count) return curve->point[curve->point_count - 1].zth_KpW;
    for (size_t i = 0; i < curve->pair_count; i++)
        sum += curve->pair[i].r_KpW;
    return curve->pair_count ? sum : PF_NONE;
}

/* Whether the curve has come to its end: it no longer rises, or goes beyond a second. */
static bool is_settled(const pf_thermal_curve *curve)
{
    size_t count = curve->point_count;
    if (curve->pair_count) return true;
    if (count < 2) return false;
    const pf_zth_point *last = &curve->point[count - 1], *before = last - 1;
    double slope = log(last->zth_KpW / before->zth_KpW) / log(last->time_s / before->time_s);
    return last->time_s >= 1 || slope < 0.05;
}

static void check_zth_end(const checking *work)
{
    const pf_thermal_curve *curve = &work->part->thermal[PF_JUNCTION_CASE];
    double end = zth_end_KpW(curve), steady = work->part->rth_jc_KpW;
    bool apart = end > steady * WARN || end < steady / WARN;
    if (apart && end > 0.95 && end < 1.05) {
        tell(work, PF_ODD_ZTH_NORMALISED, end, steady, PF_NONE, WARN);
        return;
    }
    if (end > steady || is_settled(curve))
        alike(work, PF_ODD_ZTH_END, end, steady, PF_NONE, REFUSE);
}

/* A curve for a duty cycle D starts at D times its end; a single pulse starts as the square root of
** time (Carslaw & Jaeger). Flat over the first decade, and already a fair share of the end: the
** former. */
static void check_zth_duty(const checking *work, pf_thermal_path path)
{
    const pf_thermal_curve *curve = &work->part->thermal[path];
    double end = zth_end_KpW(curve);
    size_t at = 1;
    if (curve->point_count < 4) return;
    const pf_zth_point *first = &curve->point[0];
    while (at + 1 < curve->point_count && curve->point[at].time_s < 10 * first->time_s)
        at++;
    const pf_zth_point *next = &curve->point[at];
    double slope = log(next->zth_KpW / first->zth_KpW) / log(next->time_s / first->time_s);
    bool early = next->time_s <= 2e-3 && first->zth_KpW < 0.95 * end;
    if (early && slope < 0.1 && first->zth_KpW > 0.008 * end)
        tell(work, PF_ODD_ZTH_DUTY, first->zth_KpW,
             next->zth_KpW * sqrt(first->time_s / next->time_s), first->time_s, 1);
}

/* --- Single ratings ------------------------------------------------------------------------- */

static void check_ratings(const checking *work)
{
    const pf_part *part = work->part;
    for (size_t i = 1; i < part->rdson_count; i++)
        if (part->rdson[i - 1].rdson_ohm < part->rdson[i].rdson_ohm)
            tell(work, PF_ODD_RDSON_ORDER, part->rdson[i - 1].rdson_ohm, part->rdson[i].rdson_ohm,
                 PF_NONE, REFUSE);
    if (part->vth_min_V > part->vth_max_V)
        tell(work, PF_ODD_VTH_ORDER, part->vth_min_V, part->vth_max_V, PF_NONE, 1);
    if (part->id_pulse_A < part->id_cont_A)
        tell(work, PF_ODD_ID_ORDER, part->id_pulse_A, part->id_cont_A, PF_NONE, REFUSE);
    if (part->rth_ja_KpW < part->rth_jc_KpW)
        tell(work, PF_ODD_RTH_ORDER, part->rth_ja_KpW, part->rth_jc_KpW, PF_NONE, 1);
    if (part->crss_F >= part->ciss_F)
        tell(work, PF_ODD_CAPACITANCE, part->crss_F, part->ciss_F, PF_NONE, 1);
}

static void check_family(const checking *work, const pf_soa_family *family)
{
    check_soa_zth(work, family);
    check_soa_voltage(work, family);
    check_soa_current(work, family);
    check_soa_order(work, family);
}

pf_status pf_part_check(const pf_part *part, pf_finding_listener *listener, void *context)
{
    pf_model model;
    pf_model_init(&model);
    checking work = {part, &model, listener, context};
    pf_status status = pf_model_load(&model, part);
    for (size_t i = 0; i < model.families && status == PF_OK; i++)
        check_family(&work, &model.family[i]);
    if (status == PF_OK) {
        check_soa_edge(&work);
        check_zth_end(&work);
        check_zth_duty(&work, PF_JUNCTION_CASE);
        check_zth_duty(&work, PF_JUNCTION_AMBIENT);
        check_ratings(&work);
    }
    pf_model_clear(&model);
    return status;
}
