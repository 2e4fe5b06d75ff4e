/* comparison.h: may a candidate take the place of a reference on a card?
**
** The verdict is about the card: it follows from the candidate's own checks under the profile, never
** from a score. The differences beside it are listed in the order in which they stop an exchange.
** Values that were given under different conditions are not comparable: they have no ratio.
*/
#ifndef PASSFET_COMPARISON_H
#define PASSFET_COMPARISON_H

#include <passfet/headroom.h>
#include <passfet/ranking.h>

/* code, words; the application follows them */
#define PF_ACCEPTANCE_LIST(X)                                                                      \
    X(PF_ACCEPTABLE, "acceptable")                                                                 \
    X(PF_ACCEPTABLE_IF, "acceptable with conditions")                                              \
    X(PF_NOT_ACCEPTABLE, "not acceptable")                                                         \
    X(PF_CANNOT_DECIDE, "cannot decide")

typedef enum pf_acceptance {
#define PF_ACCEPTANCE_CODE(code, words) code,
    PF_ACCEPTANCE_LIST(PF_ACCEPTANCE_CODE)
#undef PF_ACCEPTANCE_CODE
} pf_acceptance;

const char *pf_acceptance_text(pf_acceptance acceptance);

/* In stop-first order. */
#define PF_STAGE_LIST(X)                                                                           \
    X(PF_STAGE_FIT, "polarity, package, gate ratings")                                             \
    X(PF_STAGE_VOLTAGE, "voltage and avalanche")                                                   \
    X(PF_STAGE_HOT, "hot SOA and Zth")                                                             \
    X(PF_STAGE_GATE, "gate side")                                                                  \
    X(PF_STAGE_LOSS, "on-resistance, loss, thermal resistance")                                    \
    X(PF_STAGE_DATA, "data behind both")

typedef enum pf_stage {
#define PF_STAGE_CODE(code, words) code,
    PF_STAGE_LIST(PF_STAGE_CODE)
#undef PF_STAGE_CODE
        PF_STAGE_COUNT
} pf_stage;

const char *pf_stage_text(pf_stage stage);

#define PF_DIFFERENCE_ROOM 96

typedef struct pf_difference {
    pf_stage stage;
    char name[PF_DIFFERENCE_ROOM];
    pf_quantity quantity;
    double reference, candidate; /* NaN where not stated, or for texts */
    char reference_text[PF_DIFFERENCE_ROOM],
        candidate_text[PF_DIFFERENCE_ROOM]; /* of texts, else "" */
    double ratio;                           /* candidate/reference; NaN where there is none */
    const char *why; /* why they are not comparable; NULL where they are. Static storage */
    bool flagged;    /* look at it: a hot SOA below 0.8 of the reference's, a text that differs */
} pf_difference;

#define PF_DIFFERENCES_MAX 128
#define PF_CONDITIONS_MAX 8
#define PF_MISSING_MAX 16
#define PF_SENTENCE_ROOM 240

typedef struct pf_exchange {
    pf_acceptance acceptance;
    pf_assessment reference, candidate; /* each under the profile */
    char decides[PF_SENTENCE_ROOM];     /* of PF_NOT_ACCEPTABLE: what decides, else "" */
    size_t condition_count;
    char condition[PF_CONDITIONS_MAX][PF_SENTENCE_ROOM]; /* testable, each a sentence */
    size_t missing_count;
    char missing[PF_MISSING_MAX][PF_SENTENCE_ROOM]; /* what, and where it would come from */
    size_t difference_count;
    pf_difference difference[PF_DIFFERENCES_MAX];
} pf_exchange;

/* A hot SOA below this share of the reference's is flagged. */
#define PF_SOA_SHARE_FLAGGED 0.8

/* Fills *comparison. PF_NO_MEMORY is the only failure. */
pf_status pf_compare(const pf_plan *plan, const pf_part *reference, const pf_part *candidate,
                     pf_scratch *scratch, pf_exchange *comparison) PF_MUST_USE;

#endif
