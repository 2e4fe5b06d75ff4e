/* ranking.c: rows over several profiles, and their order. */
#include <passfet/ranking.h>

#include "base/memory.h"
#include "base/number.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

typedef struct sort_fact {
    const char *name;
    bool high_first;
} sort_fact;

static const sort_fact sort_facts[] = {
#define PF_SORT_FACT(code, name, high_first) {name, high_first},
    PF_SORT_LIST(PF_SORT_FACT)
#undef PF_SORT_FACT
};

pf_status pf_sort_key_read(const char *name, pf_sort_key *key)
{
    for (int i = 0; i < PF_SORT_COUNT; i++) {
        if (strcmp(sort_facts[i].name, name) != 0) continue;
        *key = (pf_sort_key)i;
        return PF_OK;
    }
    return PF_NOT_FOUND;
}

const char *pf_sort_key_text(pf_sort_key key)
{
    return sort_facts[key].name;
}

void pf_ranking_init(pf_ranking *ranking, const pf_plan *const *plan, size_t profile_count)
{
    *ranking = (pf_ranking){.profile_count = profile_count, .plan = plan};
}

static void row_clear(pf_row *row)
{
    pf_free(row->part);
    pf_free(row->maker);
    pf_free(row->package);
    pf_free(row->assessment);
    *row = (pf_row){0};
}

void pf_ranking_clear(pf_ranking *ranking)
{
    for (size_t i = 0; i < ranking->count; i++)
        row_clear(&ranking->row[i]);
    pf_free(ranking->row);
    pf_ranking_init(ranking, ranking->plan, ranking->profile_count);
}

/* Whether an assessment decides over another: the worse verdict, then the smaller margin. */
static bool decides(const pf_assessment *left, const pf_assessment *right)
{
    if (left->verdict != right->verdict) return left->verdict > right->verdict;
    return left->stress.soa_margin < right->stress.soa_margin;
}

/* The row's own numbers: the worst over its profiles. A loss or temperature that one card leaves
** open stays open: the worst is not known then. */
static void summarise(pf_row *row, size_t profile_count)
{
    row->soa_margin = row->conduction_loss_W = row->running_degC = row->peak_junction_degC =
        PF_NONE;
    row->deciding_profile = 0;
    for (size_t i = 0; i < profile_count; i++) {
        const pf_stress *stress = &row->assessment[i].stress;
        bool first = i == 0;
        if (decides(&row->assessment[i], &row->assessment[row->deciding_profile]))
            row->deciding_profile = i;
        row->soa_margin = fmin(row->soa_margin, stress->soa_margin);
        if (first || !(stress->conduction_loss_W <= row->conduction_loss_W))
            row->conduction_loss_W = stress->conduction_loss_W;
        if (first || !(stress->running_degC <= row->running_degC))
            row->running_degC = stress->running_degC;
        if (first || !(stress->peak_junction_degC <= row->peak_junction_degC))
            row->peak_junction_degC = stress->peak_junction_degC;
    }
    row->verdict = row->assessment[row->deciding_profile].verdict;
}

static pf_status fill(pf_row *row, const pf_part *part, size_t profile_count)
{
    row->price = part->price;
    pf_status status = pf_text_copy(&row->part, part->name ? part->name : "");
    if (status == PF_OK) status = pf_text_copy(&row->maker, part->maker);
    if (status == PF_OK) status = pf_text_copy(&row->package, part->package);
    row->assessment = pf_allocate(profile_count, sizeof *row->assessment);
    return row->assessment ? status : PF_NO_MEMORY;
}

/* Evaluates a batch whose rows are already filled with names. */
static pf_status assess_rows(pf_ranking *ranking, pf_row *row, const pf_part *const *part,
                             const unsigned *remarks, size_t count, pf_scratch *scratch)
{
    pf_assessment *on[PF_BATCH];
    pf_status status = PF_OK;
    for (size_t p = 0; p < ranking->profile_count && status == PF_OK; p++) {
        for (size_t i = 0; i < count; i++)
            on[i] = &row[i].assessment[p];
        status = pf_assess_batch(ranking->plan[p], part, count, scratch, on);
        for (size_t i = 0; remarks && i < count; i++)
            on[i]->stress.remarks |= remarks[i];
    }
    return status;
}

pf_status pf_ranking_add_batch(pf_ranking *ranking, const pf_part *const *part,
                               const unsigned *remarks, size_t count, pf_scratch *scratch)
{
    if (count > PF_BATCH) return PF_BAD_ARGUMENT;
    pf_status status = pf_grow((void **)&ranking->row, &ranking->capacity, ranking->count + count,
                               sizeof *ranking->row);
    if (status != PF_OK) return status;
    pf_row *row = &ranking->row[ranking->count];
    memset(row, 0, count * sizeof *row);
    for (size_t i = 0; i < count && status == PF_OK; i++)
        status = fill(&row[i], part[i], ranking->profile_count);
    if (status == PF_OK) status = assess_rows(ranking, row, part, remarks, count, scratch);
    for (size_t i = 0; i < count; i++) {
        if (status != PF_OK) {
            row_clear(&row[i]);
            continue;
        }
        summarise(&row[i], ranking->profile_count);
        ranking->tally[row[i].verdict]++;
        ranking->count++;
    }
    return status;
}

pf_status pf_ranking_add(pf_ranking *ranking, const pf_part *part, unsigned remarks,
                         pf_scratch *scratch)
{
    return pf_ranking_add_batch(ranking, &part, &remarks, 1, scratch);
}

pf_status pf_ranking_take(pf_ranking *ranking, pf_ranking *other)
{
    pf_status status = pf_grow((void **)&ranking->row, &ranking->capacity,
                               ranking->count + other->count, sizeof *ranking->row);
    if (status != PF_OK) return status;
    if (other->count)
        memcpy(&ranking->row[ranking->count], other->row, other->count * sizeof *other->row);
    ranking->count += other->count;
    for (int i = 0; i < 3; i++)
        ranking->tally[i] += other->tally[i];
    other->count = 0;
    pf_ranking_clear(other);
    return PF_OK;
}

void pf_ranking_cut(pf_ranking *ranking, size_t top)
{
    while (ranking->count > top)
        row_clear(&ranking->row[--ranking->count]);
}

/* A row with its keys: smaller comes first, verdict before all. */
#define KEYS_MAX (1 + PF_SORT_COUNT + 3)

typedef struct place {
    double key[KEYS_MAX];
    pf_row row;
} place;

static double key_of(const pf_row *row, pf_sort_key key)
{
    const double value[] = {row->soa_margin,
                            row->conduction_loss_W,
                            row->peak_junction_degC,
                            row->running_degC,
                            row->price,
                            0};
    if (!pf_is_stated(value[key])) return INFINITY;
    return sort_facts[key].high_first ? -value[key] : value[key];
}

static int compare_text(const char *left, const char *right)
{
    return strcmp(left ? left : "", right ? right : "");
}

static int compare_places(const void *left, const void *right)
{
    const place *a = left, *b = right;
    for (int i = 0; i < KEYS_MAX; i++)
        if (a->key[i] != b->key[i]) return a->key[i] < b->key[i] ? -1 : 1;
    int order = compare_text(a->row.part, b->row.part);
    return order ? order : compare_text(a->row.maker, b->row.maker);
}

static void fill_keys(place *at, const pf_sort_key *key, size_t key_count)
{
    static const pf_sort_key standard[] = {PF_SORT_MARGIN, PF_SORT_LOSS, PF_SORT_JUNCTION};
    size_t filled = 0;
    memset(at->key, 0, sizeof at->key);
    at->key[filled++] = at->row.verdict;
    for (size_t i = 0; i < key_count && i < PF_SORT_COUNT; i++) {
        if (key[i] == PF_SORT_NAME) return; /* names end the comparison, see compare_places */
        at->key[filled++] = key_of(&at->row, key[i]);
    }
    for (size_t i = 0; i < 3; i++)
        at->key[filled++] = key_of(&at->row, standard[i]);
}

pf_status pf_ranking_sort(pf_ranking *ranking, const pf_sort_key *key, size_t key_count)
{
    place *order = pf_allocate(ranking->count, sizeof *order);
    if (!order) return PF_NO_MEMORY;
    for (size_t i = 0; i < ranking->count; i++) {
        order[i].row = ranking->row[i];
        fill_keys(&order[i], key, key_count);
    }
    qsort(order, ranking->count, sizeof *order, compare_places);
    for (size_t i = 0; i < ranking->count; i++)
        ranking->row[i] = order[i].row;
    pf_free(order);
    return PF_OK;
}
