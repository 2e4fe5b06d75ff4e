/* prune.c: rows of a kernel that can never be the largest.
**
** Q_ab, the sum of a row's weights over all nodes at or above level a and lag b, is what the row
*makes
** of the indicator of that quadrant. A regular K is a sum of such indicators with factors that are
*not
** negative, so a row with Q at most that of another row everywhere never answers more. Every row is
** compared with the rows kept so far: rows^2 * samples at worst, in practice a few samples a pair.
*/
#include "base/memory.h"
#include "numeric/kernel.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Rounding of the sums, as a share of the largest; far below what the grid itself leaves open. */
#define ROUNDING 1e-9

/* A row with its quadrant sums. */
typedef struct candidate {
    pf_kernel_row row;
    double *quadrant;
    double mass; /* sum of all quadrants: a dominating row never has less */
} candidate;

/* Sums from the far corner towards (0, 0). */
static void sum_quadrants(candidate *at, size_t levels, size_t lags)
{
    for (size_t i = levels; i-- > 0;) {
        double along = 0;
        for (size_t j = lags; j-- > 0;) {
            along += at->row.weight[i * lags + j];
            double above = i + 1 < levels ? at->quadrant[(i + 1) * lags + j] : 0;
            at->quadrant[i * lags + j] = along + above;
            at->mass += at->quadrant[i * lags + j];
        }
    }
}

static bool dominates(const candidate *strong, const candidate *weak, size_t samples, double slack)
{
    for (size_t i = 0; i < samples; i++)
        if (weak->quadrant[i] > strong->quadrant[i] + slack) return false;
    return true;
}

static int by_mass(const void *left, const void *right)
{
    const candidate *a = left, *b = right;
    if (a->mass != b->mass) return a->mass > b->mass ? -1 : 1;
    return (a->row.weight > b->row.weight) - (a->row.weight < b->row.weight);
}

/* Orders the candidates kept first; returns how many. */
static size_t keep(candidate *at, size_t count, size_t samples, double slack)
{
    size_t kept = 0;
    for (size_t r = 0; r < count; r++) {
        bool needed = true;
        for (size_t k = 0; k < kept && needed; k++)
            needed = !dominates(&at[k], &at[r], samples, slack);
        if (!needed) continue;
        candidate swap = at[kept];
        at[kept++] = at[r];
        at[r] = swap;
    }
    return kept;
}

static double largest_quadrant(const candidate *at, size_t count, size_t samples)
{
    double largest = 0;
    for (size_t r = 0; r < count; r++)
        for (size_t i = 0; i < samples; i++)
            largest = fmax(largest, fabs(at[r].quadrant[i]));
    return largest;
}

static pf_status prune_rows(pf_kernel_rows *rows, size_t levels, size_t lags)
{
    size_t samples = levels * lags;
    candidate *at = pf_allocate(rows->count, sizeof *at);
    double *quadrants = pf_allocate(rows->count * samples, sizeof(double));
    if (at && quadrants) {
        for (size_t r = 0; r < rows->count; r++) {
            at[r] = (candidate){rows->row[r], quadrants + r * samples, 0};
            sum_quadrants(&at[r], levels, lags);
        }
        qsort(at, rows->count, sizeof *at, by_mass);
        double slack = ROUNDING * largest_quadrant(at, rows->count, samples);
        rows->kept = keep(at, rows->count, samples, slack);
        for (size_t r = 0; r < rows->count; r++)
            rows->row[r] = at[r].row;
    }
    pf_status status = at && quadrants ? PF_OK : PF_NO_MEMORY;
    pf_free(at);
    pf_free(quadrants);
    return status;
}

pf_status pf_kernel_prune(pf_kernel *kernel)
{
    pf_status status = prune_rows(&kernel->rows, kernel->levels, kernel->lags);
    return status == PF_OK ? prune_rows(&kernel->total, 1, kernel->lags) : status;
}

bool pf_kernel_is_regular(const double *sample, size_t levels, size_t lags)
{
    double slack = -ROUNDING * fabs(sample[levels * lags - 1]);
    for (size_t i = 0; i < levels; i++) {
        const double *here = sample + i * lags, *below = i ? here - lags : NULL;
        double worst = below ? here[0] - below[0] : here[0];
        for (size_t j = 1; j < lags; j++) {
            double rise = here[j] - here[j - 1] - (below ? below[j] - below[j - 1] : 0);
            worst = rise < worst ? rise : worst;
        }
        if (!(worst >= slack)) return false;
    }
    return true;
}
