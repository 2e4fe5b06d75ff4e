/* report.h: results as text, CSV and JSON. Writes, computes nothing.
**
** Every writer takes an open stream and leaves its error flag to the caller: a full disk or a closed
** pipe shows there (ferror), not in a return value.
*/
#ifndef PASSFET_REPORT_H
#define PASSFET_REPORT_H

#include <passfet/headroom.h>
#include <passfet/ranking.h>
#include <passfet/trials.h>
#include <stdio.h>

/* What can be said of a row beside its verdict, under the profile that decides. */
typedef struct pf_row_review {
    bool has_window, has_trials;
    pf_timer_window window;
    pf_trials_result trials;
} pf_row_review;

/* What a ranking rests on, for the head of every output. */
typedef struct pf_report_source {
    const char *database;        /* as the user named it */
    const char *revision;        /* of the database; NULL: not from one */
    size_t top;                  /* rows to show; 0: all */
    const pf_row_review *review; /* by row, review_count of them; NULL: none */
    size_t review_count;
    const pf_trials_request *trials; /* NULL: none were asked for */
} pf_report_source;

/* A table of at most PF_TABLE_COLUMNS columns: head with the profile's decisive values and the count
** of verdicts, a row per part with what decides, remarks, cautions. The ranking must be sorted. */
#define PF_TABLE_COLUMNS 100
void pf_report_table(FILE *out, const pf_ranking *ranking, const pf_report_source *source);

/* RFC 4180, one row a part; cells that a spreadsheet would run as a formula begin with `'`. */
void pf_report_csv(FILE *out, const pf_ranking *ranking, const pf_report_source *source);

/* One object as docs/passfet.1 describes it; numbers read back unchanged, null for not stated. */
void pf_report_json(FILE *out, const pf_ranking *ranking, const pf_report_source *source);

/* The cautions that go with every result, one line each, the last followed by NULL. */
const char *const *pf_report_cautions(void);

/* Whether some value of a derating rule is marked as quoted from memory ("M" or words with "memory"):
** that has to be said wherever the rule is shown. */
bool pf_rule_is_from_memory(const pf_derating *rule);

#endif
