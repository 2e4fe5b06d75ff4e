/* judge.h: what the database accepts of a part. The tables hold the same as CHECKs, which are the
** second wall; this one answers before anything is written, with the part's name. */
#ifndef STORE_JUDGE_H
#define STORE_JUDGE_H

#include <passfet/part.h>

/* A part always states polarity, vds_max and tj_max, whether it is new or a change would take them
** away. curves_only: the file has nothing but curves, so that the part itself is what is missing. */
pf_status pf_judge_needs(const pf_part *part, bool curves_only, pf_error *error) PF_MUST_USE;

/* Ranges of fields.def, order of the thresholds, SOA within the voltage rating, sound curves. */
pf_status pf_judge_values(const pf_part *part, pf_error *error) PF_MUST_USE;

#endif
