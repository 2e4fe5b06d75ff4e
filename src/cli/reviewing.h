/* reviewing.h: timer windows and trials of the rows that rank shows. */
#ifndef CLI_REVIEWING_H
#define CLI_REVIEWING_H

#include "cli/cli.h"

#include <passfet/report.h>

/* Rows that get a timer window: it costs some ten evaluations each. */
#define PF_WINDOW_ROWS 100

typedef struct pf_reviewing {
    pf_store *store;
    const char *as_of;
    bool windows;
    const pf_trials_request *trials; /* count 0: none */
} pf_reviewing;

/* --trials, --seed and --uniform. Exit status. */
int pf_trials_read(const pf_cli *cli, const pf_arguments *arguments, pf_trials_request *request);

/* Works them out for the rows shown, under the profile that decides each; *review is to be freed by
** the caller, and source names it. Exit status. */
int pf_rows_review(const pf_cli *cli, const pf_reviewing *reviewing, const pf_ranking *ranking,
                   pf_report_source *source, pf_row_review **review);

#endif
