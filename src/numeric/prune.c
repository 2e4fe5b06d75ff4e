/* prune.c: rows of a kernel that can never be the largest.
**
** B_aj, the flow at lag j at or above level a, is all that a regular K sees of a row: it answers a sum
** of B_aj with factors that are not negative, so a row with B at most that of another row everywhere
** never answers more. Every row is compared with the rows kept so far: rows^2 * places at worst, in
** practice a few places a pair.
*/
#include "base/memory.h"
#include "numeric/kernel.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Rounding of the sums, as a share of the largest; far below what the grid itself leaves open. */
#define ROUNDING 1e-9

/* A row with its sums over the levels. */
typedef struct candidate {
    pf_kernel_row row;
    size_t number; /* in the order of the rows, to settle ties */
    double *above; /* B, [levels][lags] */
    double mass;   /* sum of all: a row that is above another everywhere never has less */
} candidate;

static void sum_levels(candidate *at, const pf_kernel_rows *rows, size_t levels, size_t lags)
{
    size_t end = at->row.first + at->row.terms;
    for (size_t t = at->row.first; t < end; t++)
        at->above[rows->place[t]] = rows->flow[t];
    for (size_t i = levels - 1; i-- > 0;)
        for (size_t j = 0; j < lags; j++)
            at->above[i * lags + j] += at->above[(i + 1) * lags + j];
    for (size_t i = 0; i < levels * lags; i++)
        at->mass += at->above[i];
}

static bool dominates(const candidate *strong, const candidate *weak, size_t places, double slack)
{
    for (size_t i = 0; i < places; i++)
        if (weak->above[i] > strong->above[i] + slack) return false;
    return true;
}

static int by_mass(const void *left, const void *right)
{
    const candidate *a = left, *b = right;
    if (a->mass != b->mass) return a->mass > b->mass ? -1 : 1;
    return (a->number > b->number) - (a->number < b->number);
}

/* Orders the candidates kept first; returns how many. */
static size_t keep(candidate *at, size_t count, size_t places, double slack)
{
    size_t kept = 0;
    for (size_t r = 0; r < count; r++) {
        bool needed = true;
        for (size_t k = 0; k < kept && needed; k++)
            needed = !dominates(&at[k], &at[r], places, slack);
        if (!needed) continue;
        candidate swap = at[kept];
        at[kept++] = at[r];
        at[r] = swap;
    }
    return kept;
}

static double largest_flow(const pf_kernel_rows *rows)
{
    double largest = 0;
    for (size_t t = 0; t < rows->terms; t++)
        largest = fmax(largest, rows->flow[t]);
    return largest;
}

static pf_status prune_rows(pf_kernel_rows *rows, size_t levels, size_t lags)
{
    size_t places = levels * lags;
    candidate *at = pf_allocate(rows->count, sizeof *at);
    double *sums = pf_allocate(rows->count * places, sizeof(double));
    if (at && sums) {
        for (size_t r = 0; r < rows->count; r++) {
            at[r] = (candidate){rows->row[r], r, sums + r * places, 0};
            sum_levels(&at[r], rows, levels, lags);
        }
        qsort(at, rows->count, sizeof *at, by_mass);
        rows->kept = keep(at, rows->count, places, ROUNDING * largest_flow(rows));
        for (size_t r = 0; r < rows->count; r++)
            rows->row[r] = at[r].row;
    }
    pf_status status = at && sums ? PF_OK : PF_NO_MEMORY;
    pf_free(at);
    pf_free(sums);
    return status;
}

pf_status pf_kernel_prune(pf_kernel *kernel)
{
    pf_status status = prune_rows(&kernel->rows, kernel->levels, kernel->lags);
    return status == PF_OK ? prune_rows(&kernel->total, 1, kernel->lags) : status;
}

/* One level's steps; *worst becomes the least that they rise above the level below. */
static void put_level(const double *sample, size_t lags, bool lowest, double *step, double *worst)
{
    for (size_t j = 0; j < lags; j++) {
        double *at = step + j * PF_LANES;
        *at = sample[j] - (j ? sample[j - 1] : 0);
        double rise = *at - (lowest ? 0 : *(at - lags * PF_LANES));
        *worst = rise < *worst ? rise : *worst;
    }
}

bool pf_steps_put(const double *sample, size_t levels, size_t lags, double *step, size_t lane)
{
    double worst = 0;
    for (size_t i = 0; i < levels; i++)
        put_level(sample + i * lags, lags, i == 0, step + i * lags * PF_LANES + lane, &worst);
    return worst >= -ROUNDING * fabs(sample[levels * lags - 1]);
}
