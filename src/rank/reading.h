/* reading.h: the SOA and Zth of a loaded part, read with the points that were used. */
#ifndef RANK_READING_H
#define RANK_READING_H

#include "stress/response.h"

#include <passfet/explain.h>

/* What readings from one start temperature share; it has no room for waveforms. */
pf_subject pf_reading_subject(const pf_model *model, double start_degC, bool extend);

/* I_SOA(V, t) as an event that starts where the subject does reads it. */
void pf_reading_take(const pf_subject *subject, double vds_V, double time_s, pf_reading *reading);

void pf_zth_reading_take(const pf_zth *zth, double time_s, pf_zth_reading *reading);

#endif
