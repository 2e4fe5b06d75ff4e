/* ranking.h: checks, verdict and order.
**
** A part passes when every check is met; it fails when one is not; it is unassessed when none
** failed and some could not be made. Unassessed ranks below every pass and is never one.
*/
#ifndef PASSFET_RANKING_H
#define PASSFET_RANKING_H

#include <passfet/error.h>
#include <passfet/part.h>
#include <passfet/stress.h>

typedef enum pf_verdict { PF_PASS, PF_UNASSESSED, PF_FAIL } pf_verdict;

const char *pf_verdict_text(pf_verdict verdict); /* "pass", "unassessed", "fail" */

/* code, quantity that is limited, pf_quantity of its numbers */
#define PF_CHECK_LIST(X)                                                                           \
    X(PF_CHECK_STATUS, "life-cycle status", PF_RATIO)                                              \
    X(PF_CHECK_POLARITY, "polarity", PF_RATIO)                                                     \
    X(PF_CHECK_VDS, "V_DS", PF_VOLTAGE)                                                            \
    X(PF_CHECK_VGS, "V_GS", PF_VOLTAGE)                                                            \
    X(PF_CHECK_ID_CONT, "running current per part", PF_CURRENT)                                    \
    X(PF_CHECK_ID_PULSE, "peak current", PF_CURRENT)                                               \
    X(PF_CHECK_RUNNING, "running junction temperature", PF_TEMPERATURE)                            \
    X(PF_CHECK_SOA_MARGIN, "SOA margin", PF_RATIO)                                                 \
    X(PF_CHECK_JUNCTION, "peak junction temperature", PF_TEMPERATURE)                              \
    X(PF_CHECK_AVALANCHE, "avalanche energy", PF_ENERGY)

typedef enum pf_check_kind {
#define PF_CHECK_CODE(code, words, quantity) code,
    PF_CHECK_LIST(PF_CHECK_CODE)
#undef PF_CHECK_CODE
        PF_CHECK_COUNT
} pf_check_kind;

const char *pf_check_quantity_text(pf_check_kind kind);
pf_quantity pf_check_quantity(pf_check_kind kind);

typedef struct pf_check {
    pf_check_kind kind;
    int slot; /* of the plan's event, -1 where the check is of the part as a whole */
    pf_verdict verdict;
    pf_cause cause;      /* for one that could not be made because of the stress */
    const char *missing; /* CSV name of the rating that is not stated, else NULL. Static storage */
    double value, limit; /* the SOA margin must reach its limit; all others must stay within it */
} pf_check;

#define PF_CHECKS_MAX (7 + 3 * PF_SLOTS_MAX)

typedef struct pf_assessment {
    pf_verdict verdict;
    pf_stress stress;
    size_t check_count;
    pf_check check[PF_CHECKS_MAX];
} pf_assessment;

/* Evaluates one part under one plan. PF_NO_MEMORY is the only failure. */
pf_status pf_assess(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                    pf_assessment *assessment);

/* The same for up to PF_BATCH parts at once. */
pf_status pf_assess_batch(const pf_plan *plan, const pf_part *const *part, size_t count,
                          pf_scratch *scratch, pf_assessment *const *assessment);

/* One check as a sentence: "start_up: SOA margin 0.84, required 1.3", "unassessed: …". Writes at
** most room bytes, NUL included; returns the whole length as snprintf does. */
int pf_check_print(const pf_plan *plan, const pf_check *check, char *text, size_t room);

/* The check that decides: the first that failed, else the first that could not be made, else the
** one of the limiting event; NULL for none. Borrowed from the assessment. */
const pf_check *pf_assessment_decisive(const pf_assessment *assessment);

/* --- Ranking ------------------------------------------------------------------------------- */

/* code, name for --sort, whether high is good */
#define PF_SORT_LIST(X)                                                                            \
    X(PF_SORT_MARGIN, "margin", true)                                                              \
    X(PF_SORT_LOSS, "loss", false)                                                                 \
    X(PF_SORT_JUNCTION, "junction", false)                                                         \
    X(PF_SORT_RUNNING, "running", false)                                                           \
    X(PF_SORT_PRICE, "price", false)                                                               \
    X(PF_SORT_NAME, "part", false)

typedef enum pf_sort_key {
#define PF_SORT_CODE(code, name, high_first) code,
    PF_SORT_LIST(PF_SORT_CODE)
#undef PF_SORT_CODE
        PF_SORT_COUNT
} pf_sort_key;

/* Reads "margin" and so on; PF_NOT_FOUND. */
pf_status pf_sort_key_read(const char *name, pf_sort_key *key);
const char *pf_sort_key_text(pf_sort_key key);

/* One part of a ranking, over all its profiles. */
typedef struct pf_row {
    char *part, *maker, *package; /* maker and package NULL where not stated */
    double price;
    pf_verdict verdict;       /* worst over the profiles */
    size_t deciding_profile;  /* the one with that verdict and the smallest margin */
    double soa_margin;        /* smallest over the profiles, NaN where none was assessed */
    double conduction_loss_W; /* highest */
    double running_degC, peak_junction_degC; /* highest */
    pf_assessment *assessment;               /* one per profile */
} pf_row;

typedef struct pf_ranking {
    size_t profile_count;
    const pf_plan *const *plan; /* borrowed, profile_count of them */
    pf_row *row;
    size_t count, capacity;
    size_t tally[3]; /* of all parts added, by pf_verdict */
} pf_ranking;

/* plan: an array of profile_count plans that outlives the ranking. */
void pf_ranking_init(pf_ranking *ranking, const pf_plan *const *plan, size_t profile_count);
void pf_ranking_clear(pf_ranking *ranking);

/* Evaluates parts, up to PF_BATCH of them, under every plan and adds their rows. remarks[i] are added
** to those of part i; NULL: none. PF_NO_MEMORY leaves the ranking as it was. */
pf_status pf_ranking_add_batch(pf_ranking *ranking, const pf_part *const *part,
                               const unsigned *remarks, size_t count,
                               pf_scratch *scratch) PF_MUST_USE;

/* The same for one part. */
pf_status pf_ranking_add(pf_ranking *ranking, const pf_part *part, unsigned remarks,
                         pf_scratch *scratch) PF_MUST_USE;

/* Moves all rows of another ranking over the same plans to this one, and leaves that empty. */
pf_status pf_ranking_take(pf_ranking *ranking, pf_ranking *other) PF_MUST_USE;

/* Keeps only the first top rows of a sorted ranking; the tally still counts all. */
void pf_ranking_cut(pf_ranking *ranking, size_t top);

/* Orders the rows: pass, unassessed, fail; within each by the keys in turn, then by the default
** keys (margin, loss, junction), then by part and maker, so that the order never depends on the input's.
** Values that are not stated come last. PF_NO_MEMORY leaves the order as it was. */
pf_status pf_ranking_sort(pf_ranking *ranking, const pf_sort_key *key,
                          size_t key_count) PF_MUST_USE;

/* Whether no other part of the ranking that passes beats this one, which must pass too, in margin,
** loss, peak junction temperature and, where it states one, price together. O(rows). */
bool pf_row_is_unbeaten(const pf_ranking *ranking, size_t place);

/* --- Conditions of --where ----------------------------------------------------------------- */

typedef enum pf_comparison {
    PF_EQUAL,
    PF_UNEQUAL,
    PF_LESS,
    PF_AT_MOST,
    PF_MORE,
    PF_AT_LEAST
} pf_comparison;

/* One comparison on a rating, a text field or polarity. A rating that is not stated meets none. */
typedef struct pf_condition {
    const pf_rating_field *rating; /* exactly one of rating and text, or neither: polarity */
    const pf_text_field *text;
    pf_comparison comparison;
    double value;
    char word[128]; /* text conditions, letters in either case */
} pf_condition;

/* Reads "package=LFP8", "vds_max>=80", "vds_max >= 80 V", "polarity=N", "status!=obsolete".
** PF_BAD_INPUT with what would be right in *error. */
pf_status pf_condition_read(const char *text, pf_condition *condition, pf_error *error);
bool pf_condition_met(const pf_condition *condition, const pf_part *part);

#endif
