/* trials.h: what rank says of rows beside their verdicts. */
#ifndef REPORT_TRIALS_H
#define REPORT_TRIALS_H

#include "report/json.h"

#include <passfet/report.h>

/* A row per part that has trials; nothing where none were asked for. */
void pf_trials_table(FILE *out, const pf_ranking *ranking, const pf_report_source *source);

/* The members timer_window and trials of a row's object, null or left out where there is none. */
void pf_json_row_review(pf_json *json, const pf_report_source *source, size_t place);

#endif
