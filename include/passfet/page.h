/* page.h: a ranking as one HTML page for a design file: card, shortlist, and for chosen parts their
** SOA with the stress in it. Complete in itself: no script, nothing fetched, readable in black on white.
** Writes, computes nothing.
**
** Streams as in report.h: a full disk or a closed pipe shows in ferror.
*/
#ifndef PASSFET_PAGE_H
#define PASSFET_PAGE_H

#include <passfet/explain.h>
#include <passfet/report.h>

/* The head of the page, the cards and the shortlist. */
void pf_page_begin(FILE *out, const pf_ranking *ranking, const pf_report_source *source);

/* One part in full, under the plan that the explanation was made with. */
void pf_page_part(FILE *out, size_t place, const pf_plan *plan, const pf_part *part,
                  const pf_explanation *explanation);

/* Cautions and the end of the page. */
void pf_page_end(FILE *out);

#endif
