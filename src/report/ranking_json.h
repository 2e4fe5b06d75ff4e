/* ranking_json.h: what several JSON outputs say of a part under a profile. */
#ifndef REPORT_RANKING_JSON_H
#define REPORT_RANKING_JSON_H

#include "report/json.h"

#include <passfet/ranking.h>

/* The members that a part has for one profile: verdict to events. */
void pf_json_assessment(pf_json *json, const pf_plan *plan, const pf_assessment *on);

#endif
