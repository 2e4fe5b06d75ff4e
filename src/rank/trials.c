/* trials.c: many draws of a profile on one part. */
#include <passfet/trials.h>

#include "base/memory.h"
#include "base/number.h"
#include "rank/draw.h"
#include "rank/surface.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define SEQUENCE_TRIALS 1

struct pf_trials {
    pf_trials_request request;
    pf_box box;
    bool any_drawn;
    size_t kept_count;
    size_t kept[PF_SLOTS_MAX]; /* slots that each trial works out itself */
};

/* One part's run. */
typedef struct run {
    const pf_trials *trials;
    const pf_part *part;
    pf_scratch *scratch;
    pf_surface surface;
    pf_assessment worst;      /* the worst case */
    pf_plan plan;             /* of a draw, without starts */
    pf_assessment assessment; /* of a draw, without starts */
} run;

void pf_wilson_interval(size_t passed, size_t count, double *low, double *high)
{
    const double z = 1.959963984540054; /* of 97.5 % */
    double n = (double)count, share = (double)passed / n, squared = z * z;
    double middle = share + squared / (2 * n);
    double half = z * sqrt(share * (1 - share) / n + squared / (4 * n * n));
    *low = passed ? fmax(0, (middle - half) / (1 + squared / n)) : 0;
    *high = passed < count ? fmin(1, (middle + half) / (1 + squared / n)) : 1;
}

pf_status pf_trials_new(const pf_plan *plan, const pf_trials_request *request, pf_trials **trials,
                        pf_error *error)
{
    *trials = NULL;
    pf_trials *made = pf_allocate(1, sizeof *made);
    if (!made) return pf_error_set(error, PF_NO_MEMORY, "no memory for trials");
    made->request = *request;
    for (int i = 0; i < PF_PARAMETER_COUNT; i++)
        made->any_drawn |= pf_is_drawn(&plan->profile, (pf_parameter)i);
    for (size_t i = 0; i < plan->count; i++) {
        pf_event event = plan->slot[i].event;
        if (event != PF_START_UP && event != PF_SUPPLY_STEP) made->kept[made->kept_count++] = i;
    }
    pf_status status = pf_box_init(&made->box, plan, request, error);
    if (status != PF_OK)
        pf_free(made);
    else
        *trials = made;
    return status;
}

void pf_trials_free(pf_trials *trials)
{
    if (!trials) return;
    pf_box_clear(&trials->box);
    pf_free(trials);
}

/* The plan of a draw, without the starts. */
static void plan_of(run *on, const pf_profile *drawn)
{
    on->plan.profile = *drawn;
    for (size_t i = 0; i < on->plan.count; i++)
        pf_corners_init(&on->plan.slot[i].corners, drawn, on->plan.slot[i].event);
}

static pf_verdict judged(double value, double limit)
{
    return value <= limit ? PF_PASS : value > limit ? PF_FAIL : PF_UNASSESSED;
}

static pf_verdict worse(pf_verdict left, pf_verdict right)
{
    return left > right ? left : right;
}

/* Verdict of the checks of a start that no draw changes: its peak current at the worst corner. */
static pf_verdict fixed_verdict(const run *on, size_t slot)
{
    for (size_t i = 0; i < on->worst.check_count; i++)
        if (on->worst.check[i].slot == (int)slot && on->worst.check[i].kind == PF_CHECK_ID_PULSE)
            return on->worst.check[i].verdict;
    return PF_PASS;
}

/* An event that is not in the plan of a draw: its margin from its rises, and its verdict taken into
** *verdict. */
static double margin_from(const run *on, size_t slot, pf_rise rise, const pf_profile *drawn,
                          pf_verdict *verdict)
{
    const pf_stress *stress = &on->assessment.stress;
    bool start = on->trials->box.base->slot[slot].event == PF_START_UP;
    double start_degC = start && drawn->start_from_ambient
                            ? drawn->value[PF_AMBIENT_TEMPERATURE].max
                            : stress->running_degC;
    double room = stress->allowed_degC - start_degC;
    double margin = room <= 0 ? 0 : room / rise.hot_K;
    *verdict = worse(*verdict, judged(drawn->value[PF_REQUIRED_MARGIN].max, margin));
    *verdict = worse(*verdict, judged(start_degC + rise.junction_K, stress->allowed_degC));
    *verdict = worse(*verdict, fixed_verdict(on, slot));
    return margin;
}

/* Start and supply step; the step at its worst corner always, for its supply is never drawn. */
static double starts_margin(const run *on, const pf_profile *drawn, pf_verdict *verdict)
{
    const pf_plan *base = on->trials->box.base;
    double margin = PF_NONE;
    for (size_t slot = 0; slot < base->count; slot++) {
        bool start = base->slot[slot].event == PF_START_UP;
        if (!start && base->slot[slot].event != PF_SUPPLY_STEP) continue;
        pf_rise rise =
            start ? pf_surface_at(&on->surface, drawn) : pf_rise_of(&on->worst.stress, slot);
        margin = fmin(margin, margin_from(on, slot, rise, drawn, verdict));
    }
    return margin;
}

static pf_status try_once(run *on, const pf_profile *drawn, pf_verdict *verdict, double *margin)
{
    plan_of(on, drawn);
    pf_status status = pf_assess(&on->plan, on->part, on->scratch, &on->assessment);
    if (status != PF_OK) return status;
    *verdict = on->assessment.verdict;
    *margin = fmin(on->assessment.stress.soa_margin, starts_margin(on, drawn, verdict));
    return PF_OK;
}

static int rising(const void *left, const void *right)
{
    double a = *(const double *)left, b = *(const double *)right;
    if (!pf_is_stated(a) || !pf_is_stated(b)) return (int)pf_is_stated(a) - (int)pf_is_stated(b);
    return (a > b) - (a < b);
}

/* The smallest margin that at least the share of all is not above: never rounded upwards. */
static double percentile(const double *margin, size_t count, double share)
{
    double place = floor(share * (double)count);
    return margin[place < (double)count ? (size_t)place : count - 1];
}

static pf_status try_all(run *on, double *margin, pf_trials_result *result)
{
    const pf_trials_request *request = &on->trials->request;
    const pf_profile *profile = &on->trials->box.base->profile;
    size_t tally[3] = {0, 0, 0};
    pf_random random;
    pf_status status = PF_OK;
    pf_random_init(&random, request->seed, SEQUENCE_TRIALS);
    for (size_t i = 0; i < request->count && status == PF_OK; i++) {
        pf_profile drawn;
        pf_verdict verdict = PF_UNASSESSED;
        pf_draw(profile, request->distribution, &random, &drawn);
        status = try_once(on, &drawn, &verdict, &margin[i]);
        tally[verdict]++;
    }
    result->passed = tally[PF_PASS];
    result->unassessed = tally[PF_UNASSESSED];
    result->failed = tally[PF_FAIL];
    if (status != PF_OK) return status;
    qsort(margin, request->count, sizeof *margin, rising);
    result->margin_p01 = percentile(margin, request->count, 0.01);
    result->margin_p50 = percentile(margin, request->count, 0.5);
    return PF_OK;
}

/* Every trial is the worst case. */
static void repeat_worst(const run *on, pf_trials_result *result)
{
    pf_verdict verdict = on->worst.verdict;
    result->passed = verdict == PF_PASS ? result->count : 0;
    result->unassessed = verdict == PF_UNASSESSED ? result->count : 0;
    result->failed = verdict == PF_FAIL ? result->count : 0;
    result->margin_p01 = result->margin_p50 = on->worst.stress.soa_margin;
}

static pf_status run_trials(run *on, pf_trials_result *result)
{
    const pf_trials *trials = on->trials;
    pf_status status = pf_surface_init(&on->surface, &trials->box, on->part, on->scratch);
    if (status != PF_OK) return status;
    double *margin = pf_allocate(trials->request.count, sizeof *margin);
    on->plan = *trials->box.base;
    on->plan.count = trials->kept_count;
    for (size_t i = 0; i < trials->kept_count; i++)
        on->plan.slot[i] = trials->box.base->slot[trials->kept[i]];
    status = margin ? try_all(on, margin, result) : PF_NO_MEMORY;
    result->raised_by = on->surface.raise.hot_K - 1;
    pf_free(margin);
    pf_surface_clear(&on->surface);
    return status;
}

pf_status pf_trials_run(const pf_trials *trials, const pf_part *part, pf_scratch *scratch,
                        pf_trials_result *result)
{
    run on = {.trials = trials, .part = part, .scratch = scratch};
    *result = (pf_trials_result){.count = trials->request.count};
    pf_status status = pf_assess(trials->box.base, part, scratch, &on.worst);
    if (status != PF_OK) return status;
    if (trials->any_drawn)
        status = run_trials(&on, result);
    else
        repeat_worst(&on, result);
    result->share = (double)result->passed / (double)result->count;
    pf_wilson_interval(result->passed, result->count, &result->low, &result->high);
    return status;
}
