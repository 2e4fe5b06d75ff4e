/* profile.h: how a card starts, runs and fails: what every part is held against. */
#ifndef PASSFET_PROFILE_H
#define PASSFET_PROFILE_H

#include <passfet/error.h>
#include <passfet/part.h>
#include <passfet/units.h>

typedef enum pf_parameter {
#define PF_PARAMETER(code, name, quantity, lowest, highest, meaning) code,
#include <passfet/parameters.def>
    PF_PARAMETER_COUNT
} pf_parameter;

typedef enum pf_switch_side { PF_SIDE_NONE, PF_HIGH_SIDE, PF_LOW_SIDE } pf_switch_side;

typedef enum pf_start_control {
    PF_START_NONE,
    PF_START_SLEW,
    PF_START_CURRENT_LIMIT,
    PF_START_POWER_LIMIT,
    PF_START_FOLDBACK
} pf_start_control;

/* min <= typ <= max, all NaN where not stated. */
typedef struct pf_interval {
    double min, typ, max;
} pf_interval;

/* Factors of a derating rule; NaN where the rule says nothing. */
typedef struct pf_derating {
    char name[64];    /* "" for none */
    char mark[32];    /* "published", "from memory" */
    char source[160]; /* clause, as the rule file words it */
    double voltage_use, gate_use, current_use, power_use;
    double junction_limit_degC;  /* absolute */
    double junction_below_max_K; /* T_j,max less this */
    double junction_share;       /* of T_j,max in degC */
} pf_derating;

typedef struct pf_profile {
    char name[128];
    pf_interval value[PF_PARAMETER_COUNT]; /* magnitudes; defaults filled in by pf_profile_finish */
    bool stated[PF_PARAMETER_COUNT];       /* whether the user gave it (a default is not stated) */
    bool negative_supply;                  /* entered with a sign: outputs show it again */
    pf_polarity polarity;
    pf_switch_side side;
    pf_start_control control;
    bool start_from_ambient; /* default false: from the running junction temperature */
    bool endless_retry;
    bool extend_soa; /* beyond_soa, extend */
    pf_derating derating;
} pf_profile;

typedef struct pf_parameter_fact {
    const char *name;
    pf_quantity quantity;
    double lowest, highest;
    const char *meaning;
} pf_parameter_fact;

/* One fact per pf_parameter, in its order. Static storage. */
const pf_parameter_fact *pf_parameter_facts(void);

const char *pf_start_control_text(pf_start_control control); /* "slew", "current_limit", … */

void pf_profile_init(pf_profile *profile);

/* Fills the defaults of parallel_count (1), required_margin (1.3) and the uses (0.8, or the rule's;
** the smaller where the profile states one and the rule another), takes magnitudes of a
** negative supply's voltages, and checks what only the whole can show: what the start control
** needs, pairs given by half, clamp above supply, retry interval longer than the fault. Every finding is
** handed to found(context, parameter or PF_PARAMETER_COUNT, what is wrong, what would be right).
** Returns PF_OK or PF_BAD_INPUT. */
typedef void pf_profile_finding(void *context, pf_parameter parameter, const char *wrong,
                                const char *right);
pf_status pf_profile_finish(pf_profile *profile, pf_profile_finding *found, void *context);

/* A measured waveform, by rising time. The arrays belong to whoever made the capture. */
typedef struct pf_capture {
    const char *name;
    size_t count; /* >= 2 */
    const double *time_s, *vds_V, *id_A;
} pf_capture;

#endif
