/* paging.h: rank --report: the ranking as an HTML page. */
#ifndef CLI_PAGING_H
#define CLI_PAGING_H

#include "cli/cards.h"
#include "cli/selection.h"

#include <passfet/report.h>

/* Writes the page to path, with the first rows of the ranking in full: source->top of them, ten where it
** is 0. Returns an exit status. */
int pf_page_write(const pf_cli *cli, const char *path, pf_store *store, const pf_query *query,
                  const pf_cards *cards, const pf_ranking *ranking, const pf_report_source *source);

#endif
