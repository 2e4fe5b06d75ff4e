/* sensitivity.h: what the SOA margin of a part answers to, one input at a time. */
#ifndef PASSFET_SENSITIVITY_H
#define PASSFET_SENSITIVITY_H

#include <passfet/ranking.h>

/* How far each input is moved: this share of it, temperatures this many K. A profile's interval moves
** as a whole. */
#define PF_SENSITIVITY_SHARE 0.1
#define PF_SENSITIVITY_K 10.0

/* change = margin with the input moved over margin without, less 1; NaN where the moved input makes
** no sense or the margin cannot be worked out. */
typedef struct pf_influence {
    const char *name;         /* parameter, or CSV name of a rating. Static storage */
    bool rating;              /* of the part, else of the profile */
    bool kelvin;              /* moved by PF_SENSITIVITY_K */
    double fall, rise;        /* change with the input lower and higher */
    pf_verdict fallen, risen; /* the part's verdict then */
} pf_influence;

#define PF_INFLUENCES_MAX (PF_PARAMETER_COUNT + 24)

/* Fills influence, the strongest first (by the larger of |fall| and |rise|, then in the order of the
** lists of parameters and ratings); *count is how many. PF_NO_MEMORY is the only failure. */
pf_status pf_sensitivity(const pf_plan *plan, const pf_part *part, pf_scratch *scratch,
                         pf_influence influence[PF_INFLUENCES_MAX], size_t *count) PF_MUST_USE;

#endif
