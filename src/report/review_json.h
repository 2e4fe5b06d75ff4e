/* review_json.h: members that several JSON outputs of a review share. */
#ifndef REPORT_REVIEW_JSON_H
#define REPORT_REVIEW_JSON_H

#include "report/json.h"

#include <passfet/review.h>

/* part to stall. */
void pf_json_head(pf_json *json, const pf_part *part, const pf_plan *plan,
                  const pf_report_source *source);

/* The member timer_window. */
void pf_json_window(pf_json *json, const pf_timer_window *window);

/* One check as an object. */
void pf_json_check(pf_json *json, const pf_plan *plan, const pf_check *check);

void pf_json_cautions(pf_json *json);

#endif
