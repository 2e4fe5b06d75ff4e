/* reading.h: the SOA and Zth of a loaded part, read with the points that were used. */
#ifndef RANK_READING_H
#define RANK_READING_H

#include "stress/response.h"

#include <passfet/explain.h>

/* I_SOA(V, t) as an event that starts where the subject does reads it. */
void pf_reading_take(const pf_subject *subject, double vds_V, double time_s, pf_reading *reading);

void pf_zth_reading_take(const pf_zth *zth, double time_s, pf_zth_reading *reading);

#endif
