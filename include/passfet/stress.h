/* stress.h: what a profile does to a part: events, corners, SOA margin, junction temperature.
**
** A pf_plan holds all that a profile says and that no part changes: the waveforms of every event at
** every corner and the weights of their superposition. Evaluating a part then costs little more than
** reading its curves on the plan's grid. A plan is immutable once made and may be shared by threads;
** each thread needs a pf_scratch of its own.
**
**     pf_plan *plan;
**     pf_plan_new(&profile, NULL, 0, &plan, &error);
**     pf_scratch *scratch = pf_scratch_new();
**     pf_stress stress;
**     pf_plan_evaluate(plan, &part, scratch, &stress);
**
** Numbers that cannot be worked out are NaN, with the cause beside them.
*/
#ifndef PASSFET_STRESS_H
#define PASSFET_STRESS_H

#include <passfet/error.h>
#include <passfet/part.h>
#include <passfet/profile.h>

/* code, name in outputs */
#define PF_EVENT_LIST(X)                                                                           \
    X(PF_RUNNING, "running")                                                                       \
    X(PF_START_UP, "start_up")                                                                     \
    X(PF_SHORT_AT_START, "short_at_start")                                                         \
    X(PF_SHORT_RUNNING, "short_running")                                                           \
    X(PF_TRIP, "trip")                                                                             \
    X(PF_RETRY, "retry")                                                                           \
    X(PF_SUPPLY_STEP, "supply_step")                                                               \
    X(PF_TURN_OFF, "turn_off")                                                                     \
    X(PF_RECORDED, "recorded")

typedef enum pf_event {
#define PF_EVENT_CODE(code, name) code,
    PF_EVENT_LIST(PF_EVENT_CODE)
#undef PF_EVENT_CODE
        PF_EVENT_COUNT
} pf_event;

const char *pf_event_text(pf_event event);

/* Why a number could not be worked out, or (the last ones) is as bad as it can be. */
#define PF_CAUSE_LIST(X)                                                                           \
    X(PF_CAUSE_NONE, "")                                                                           \
    X(PF_CAUSE_NO_SOA, "no SOA points are stated")                                                 \
    X(PF_CAUSE_NO_TJ_MAX, "no maximum junction temperature is stated")                             \
    X(PF_CAUSE_BEYOND_VOLTAGE, "V_DS lies beyond the last point of an SOA line that it needs")     \
    X(PF_CAUSE_NO_DC_LINE, "it lasts longer than the longest SOA line and there is no DC line")    \
    X(PF_CAUSE_NO_ZTH, "no transient thermal impedance is stated")                                 \
    X(PF_CAUSE_NO_RDSON, "no Rds(on) is stated at a gate drive that the card reaches")             \
    X(PF_CAUSE_NO_RTH, "no thermal resistance from junction to ambient can be formed")             \
    X(PF_CAUSE_NO_START, "the junction temperature at its start could not be worked out")          \
    X(PF_CAUSE_NO_LIMIT, "the profile states no current limit for it")                             \
    X(PF_CAUSE_NO_AVALANCHE, "no avalanche energy is stated")                                      \
    X(PF_CAUSE_NO_VDS_MAX, "no maximum V_DS is stated")                                            \
    X(PF_CAUSE_NO_HEADROOM, "V_DS,max is not above the supply voltage")                            \
    X(PF_CAUSE_UNBOUNDED_CURRENT, "the start load draws an unbounded current at zero output")      \
    X(PF_CAUSE_RUNAWAY, "thermal runaway: losses rise faster than they are carried off")           \
    X(PF_CAUSE_HOT_START, "the junction is at its limit before the event begins")

typedef enum pf_cause {
#define PF_CAUSE_CODE(code, words) code,
    PF_CAUSE_LIST(PF_CAUSE_CODE)
#undef PF_CAUSE_CODE
        PF_CAUSE_COUNT
} pf_cause;

const char *pf_cause_text(pf_cause cause);

/* What a reader must know beside a result: assumptions, contradictions, extensions. Bits. */
#define PF_REMARK_LIST(X)                                                                          \
    X(PF_REMARK_HOT_RATIO, 0,                                                                      \
      "Rds(on) at T_j,max is not stated: 2.0 times the value at 25 degC is assumed")               \
    X(PF_REMARK_AMBIENT_ZTH, 1, "Zth is junction to ambient, on the board of the data sheet")      \
    X(PF_REMARK_EXTENDED, 2,                                                                       \
      "SOA extended beyond its longest line by Zth and by the slope of its lines")                 \
    X(PF_REMARK_DC_BOUND, 3, "beyond the longest SOA line the DC line and Zth bound the current")  \
    X(PF_REMARK_CONTRADICTION, 4,                                                                  \
      "SOA allows clearly more than Zth does: the two curves contradict each other")               \
    X(PF_REMARK_HOT_FAMILY, 5,                                                                     \
      "SOA measured at a hot case is used instead of the linear derating")                         \
    X(PF_REMARK_CASE_FROM_RTH, 6,                                                                  \
      "retry: case warming taken from R_thJA, the profile states no case_to_ambient")              \
    X(PF_REMARK_AVALANCHE_CURRENT, 7,                                                              \
      "turn-off current is above the current at which E_AS was rated")                             \
    X(PF_REMARK_NO_CRSS, 8, "gate ramp: C_rss is not stated, the slow corner is without it")       \
    X(PF_REMARK_UNREVIEWED, 9, "ratings not yet reviewed by a second person")                      \
    X(PF_REMARK_MEMORY_RULE, 10, "derating rule quoted from memory")

typedef enum pf_remark {
#define PF_REMARK_CODE(code, bit, words) code = 1 << bit,
    PF_REMARK_LIST(PF_REMARK_CODE)
#undef PF_REMARK_CODE
} pf_remark;

/* The words of one bit, NULL for an unknown one. */
const char *pf_remark_text(unsigned bit);

#define PF_SLOTS_MAX 24 /* events of one plan, captures among them */

/* One event of a part at its worst corner. */
typedef struct pf_outcome {
    pf_cause cause;          /* why soa_margin is NaN or 0 */
    pf_cause junction_cause; /* why peak_junction_degC is NaN */
    unsigned corner;         /* the worst, by SOA margin; see pf_plan_corner_value */
    double soa_margin;       /* (T_allow - T_start)/max dT_hot; NaN for running and turn_off too */
    double start_degC;
    double peak_junction_degC; /* highest over all corners */
    double worst_time_s;       /* when dT_hot is highest, from the start of the event */
    double peak_current_A;     /* highest over all corners */
    double peak_power_W, energy_J, duration_s; /* of the worst corner */
    double avalanche_J, avalanche_limit_J;     /* turn_off only */
} pf_outcome;

typedef struct pf_stress {
    double allowed_degC;      /* T_allow */
    double running_degC;      /* junction, worst corner; infinite for runaway */
    double conduction_loss_W; /* all parts in parallel together */
    double rdson_cold_ohm;    /* at 25 degC and the gate drive used */
    double rdson_drive_V;     /* rated gate drive used */
    pf_cause running_cause;
    double soa_margin;         /* smallest of the outcomes'; NaN where none could be assessed */
    int limiting_slot;         /* its slot, -1 for none */
    double peak_junction_degC; /* highest of all events; NaN where some event's is not known */
    unsigned remarks;
    size_t count;
    pf_outcome outcome[PF_SLOTS_MAX]; /* by slot of the plan */
} pf_stress;

typedef struct pf_plan pf_plan;
typedef struct pf_scratch pf_scratch;

/* Makes the plan of a finished profile (pf_profile_finish) and its captures; all are copied.
** PF_BAD_ARGUMENT: more captures than slots, or one with fewer than two samples. */
pf_status pf_plan_new(const pf_profile *profile, const pf_capture *captures, size_t capture_count,
                      pf_plan **plan, pf_error *error);
void pf_plan_free(pf_plan *plan);

const pf_profile *pf_plan_profile(const pf_plan *plan);

/* Why the card never starts or is cut off by its own timer, with the numbers; NULL when it starts.
** A fault of the profile, not of a part. */
const char *pf_plan_stall(const pf_plan *plan);

/* Slowest and fastest start over all corners in s; NaN when it never ends. For parts whose C_rss
** slows the gate ramp the outcome's duration is longer. */
double pf_plan_slowest_start_s(const pf_plan *plan);
double pf_plan_fastest_start_s(const pf_plan *plan);

size_t pf_plan_slots(const pf_plan *plan);
pf_event pf_plan_event(const pf_plan *plan, size_t slot);

/* "start_up", …; the capture's own name for a recorded one. */
const char *pf_plan_event_name(const pf_plan *plan, size_t slot);

/* The value (magnitude) that a parameter takes at a corner of a slot's event; NaN where the event
** does not depend on it. */
double pf_plan_corner_value(const pf_plan *plan, size_t slot, unsigned corner,
                            pf_parameter parameter);

/* How many corners a slot has. */
unsigned pf_plan_corners(const pf_plan *plan, size_t slot);

pf_scratch *pf_scratch_new(void); /* NULL: no memory */
void pf_scratch_free(pf_scratch *scratch);

/* Works out every event of the part at every corner. The only failure is PF_NO_MEMORY; what cannot
** be worked out is NaN in *stress, with its cause.
** Sources: Carslaw & Jaeger 1959 (Duhamel's integral); the rest as numbered in docs/methods.md. */
pf_status pf_plan_evaluate(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                           pf_stress *stress);

/* The same for up to PF_BATCH parts at once, which costs less than one by one and gives the same. */
#define PF_BATCH 8
pf_status pf_plan_evaluate_batch(const pf_plan *plan, const pf_part *const *part, size_t count,
                                 pf_scratch *scratch, pf_stress *const *stress);

/* Sets aside, for all evaluations to come, corners and moments that can be proved never to be the worst
** (docs/methods.md, section 2). The results are the same; it costs as much as evaluating some thousand
** parts. PF_NO_MEMORY leaves the plan as good as before. Not while other threads use the plan. */
pf_status pf_plan_prune(pf_plan *plan) PF_MUST_USE;

#endif
