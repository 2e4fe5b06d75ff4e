/* start_up.c: charging C_out through the FET, as a waveform. */
#include "stress/start_up.h"
#include "base/memory.h"
#include "base/number.h"

#include <math.h>

/* Abscissae and weights of three-point Gauss-Legendre quadrature on [-1, 1]. */
static const double gauss_x[] = {-0.774596669241483377, 0, 0.774596669241483377};
static const double gauss_w[] = {5.0 / 9, 8.0 / 9, 5.0 / 9};

static double load_current(const pf_start *start, double out_V, bool load_on)
{
    if (!load_on) return 0;
    double power = start->load_W > 0 ? start->load_W / out_V : 0;
    return start->load_A + out_V / start->load_ohm + power;
}

double pf_start_current(const pf_start *start, double out_V, bool load_on)
{
    double vds = start->supply_V - out_V, limit = start->current_limit_A;
    switch (start->control) {
    case PF_START_SLEW: {
        double demand =
            start->capacitance_F * start->slew_Vps + load_current(start, out_V, load_on);
        return pf_is_stated(limit) ? fmin(demand, limit) : demand;
    }
    case PF_START_POWER_LIMIT:
        return vds > 0 ? fmin(limit, start->power_limit_W / vds) : limit;
    case PF_START_FOLDBACK:
        return start->foldback_A + (limit - start->foldback_A) * out_V / start->supply_V;
    default:
        return limit;
    }
}

/* What is left to charge the capacitor; not above 0 where the output sticks. */
static double charging_current(const pf_start *start, double out_V, bool load_on)
{
    return pf_start_current(start, out_V, load_on) - load_current(start, out_V, load_on);
}

void pf_waveform_clear(pf_waveform *wave)
{
    pf_free(wave->time_s);
    *wave = (pf_waveform){0};
}

/* One block holds the three arrays: PF_START_CELLS cells of two points, those of two kinks, and a hold. */
static pf_status waveform_init(pf_waveform *wave)
{
    *wave = (pf_waveform){.capacity = 2 * (PF_START_CELLS + 8)};
    wave->time_s = pf_allocate(3 * wave->capacity, sizeof(double));
    if (!wave->time_s) return PF_NO_MEMORY;
    wave->vds_V = wave->time_s + wave->capacity;
    wave->id_A = wave->vds_V + wave->capacity;
    return PF_OK;
}

/* Adds a point unless it repeats the last one. */
static void add_point(pf_waveform *wave, double time_s, double vds_V, double id_A)
{
    size_t at = wave->count;
    wave->peak_power_W = fmax(wave->peak_power_W, vds_V * id_A);
    wave->peak_current_A = fmax(wave->peak_current_A, id_A);
    wave->duration_s = time_s;
    if (at && wave->time_s[at - 1] == time_s && wave->vds_V[at - 1] == vds_V &&
        wave->id_A[at - 1] == id_A)
        return;
    wave->time_s[at] = time_s;
    wave->vds_V[at] = vds_V;
    wave->id_A[at] = id_A;
    wave->count++;
}

/* Charges from left_V to right_V, where the charging current is positive all the way. */
static void charge(const pf_start *start, pf_waveform *wave, double left_V, double right_V, bool on)
{
    double half = (right_V - left_V) / 2, middle = (left_V + right_V) / 2;
    double duration = 0, energy = 0;
    for (int i = 0; i < 3; i++) {
        double out_V = middle + half * gauss_x[i];
        double step = start->capacitance_F * half * gauss_w[i] / charging_current(start, out_V, on);
        duration += step;
        energy += step * (start->supply_V - out_V) * pf_start_current(start, out_V, on);
    }
    double begin = wave->duration_s;
    add_point(wave, begin, start->supply_V - left_V, pf_start_current(start, left_V, on));
    add_point(wave, begin + duration, start->supply_V - right_V,
              pf_start_current(start, right_V, on));
    wave->energy_J += energy;
}

/* Where the charging current ends between a good and a bad output voltage. */
static double find_stuck(const pf_start *start, double good_V, double bad_V, bool on)
{
    for (int i = 0; i < 60; i++) {
        double middle = (good_V + bad_V) / 2;
        if (charging_current(start, middle, on) > 0)
            good_V = middle;
        else
            bad_V = middle;
    }
    return good_V;
}

/* The first of left, Gauss points and right that does not charge; NaN when all do. */
static double first_bad(const pf_start *start, double left_V, double right_V, bool on)
{
    double half = (right_V - left_V) / 2, middle = (left_V + right_V) / 2;
    if (!(charging_current(start, left_V, on) > 0)) return left_V;
    for (int i = 0; i < 3; i++)
        if (!(charging_current(start, middle + half * gauss_x[i], on) > 0))
            return middle + half * gauss_x[i];
    return charging_current(start, right_V, on) > 0 ? PF_NONE : right_V;
}

/* The output stays at stuck_V; the FET carries what the control lets through until hold_s. */
static void hold(const pf_start *start, pf_waveform *wave, bool on, double hold_s)
{
    double current = pf_start_current(start, wave->stuck_V, on);
    double vds = start->supply_V - wave->stuck_V, begin = wave->duration_s;
    wave->stuck = true;
    if (!isfinite(current)) {
        wave->unbounded = true;
        return;
    }
    add_point(wave, begin, vds, current);
    if (hold_s <= begin) return;
    add_point(wave, hold_s, vds, current);
    wave->energy_J += (hold_s - begin) * vds * current;
}

/* One cell. Returns false when the output sticks within it. */
static bool walk_cell(const pf_start *start, pf_waveform *wave, double left_V, double right_V,
                      double hold_s)
{
    bool on = (left_V + right_V) / 2 > start->load_above_V;
    double bad = first_bad(start, left_V, right_V, on);
    if (!pf_is_stated(bad)) {
        charge(start, wave, left_V, right_V, on);
        return true;
    }
    wave->stuck_V = bad > left_V ? find_stuck(start, left_V, bad, on) : left_V;
    double creep_V = wave->stuck_V - 1e-3 * start->supply_V;
    if (creep_V > left_V) charge(start, wave, left_V, creep_V, on);
    hold(start, wave, on, hold_s);
    return false;
}

/* The kink nearest above out_V and below limit_V, or limit_V. */
static double next_stop(const pf_start *start, double out_V, double limit_V)
{
    double kinks[] = {start->load_above_V, PF_NONE};
    if (start->control == PF_START_POWER_LIMIT)
        kinks[1] = start->supply_V - start->power_limit_W / start->current_limit_A;
    for (int i = 0; i < 2; i++)
        if (kinks[i] > out_V && kinks[i] < limit_V) limit_V = kinks[i];
    return limit_V;
}

/* Cells end where V_DS is a multiple of the step, so that starts from different supplies share their
** cells from where they meet. */
pf_status pf_start_waveform(const pf_start *start, double hold_s, pf_waveform *wave)
{
    pf_status status = waveform_init(wave);
    if (status != PF_OK) return status;
    double out_V = start->from_V, range_V = start->supply_V - start->from_V;
    double step_V = fmax(start->step_V, range_V / PF_START_CELLS);
    for (double cell = ceil(range_V / step_V - 1e-9) - 1; cell >= 0; cell--) {
        double end_V = cell > 0 ? start->supply_V - cell * step_V : start->supply_V;
        while (out_V < end_V) {
            double stop_V = next_stop(start, out_V, end_V);
            if (!walk_cell(start, wave, out_V, stop_V, hold_s)) return PF_OK;
            out_V = stop_V;
        }
    }
    return PF_OK;
}
