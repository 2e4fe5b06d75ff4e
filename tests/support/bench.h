/* bench.h: one part and one profile of round numbers, changed by texts, evaluated.
**
**     bench b;
**     bench_run(&b, "soa=", "fault_time=2e-3");
**     assert_int_equal(bench_outcome(&b, PF_SHORT_RUNNING)->cause, PF_CAUSE_NO_SOA);
**     bench_clear(&b);
*/
#ifndef SUPPORT_BENCH_H
#define SUPPORT_BENCH_H

#include <passfet/ranking.h>

/* What every bench starts from; see bench.c. */
extern const char bench_part_text[];
extern const char bench_profile_text[];

typedef struct bench {
    pf_part part;
    pf_profile profile;
    pf_plan *plan;
    pf_scratch *scratch;
    pf_assessment assessment;
    const pf_stress *stress; /* of the assessment */
} bench;

/* Makes part and profile, finishes the profile, plans, assesses. */
void bench_run(bench *b, const char *part_changes, const char *profile_changes);

/* The same with a capture. */
void bench_run_capture(bench *b, const char *part_changes, const char *profile_changes,
                       const pf_capture *capture);

/* Assesses again after b->part was changed. */
void bench_again(bench *b);

void bench_clear(bench *b);

int bench_slot(const bench *b, pf_event event);
const pf_outcome *bench_outcome(const bench *b, pf_event event);

/* A check of the assessment; slot -1 for one of the part as a whole. NULL where there is none. */
const pf_check *bench_check(const bench *b, pf_check_kind kind, int slot);

/* One value of a fresh bench, for tests that compare. */
double bench_margin(const char *part_changes, const char *profile_changes, pf_event event);

#endif
