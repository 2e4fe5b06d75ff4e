/* plot.h: the safe operating area of a part with the stress of a card in it, as SVG. */
#ifndef REPORT_PLOT_H
#define REPORT_PLOT_H

#include <passfet/explain.h>
#include <stdio.h>

/* Log-log; the lines of the sheet at its lowest case temperature, labelled at their right ends, and every
** event by its number (slot): a rectangle as a square with a bar up to the current allowed there at its
** starting temperature, a waveform as a chain of its steps. Nothing where the part has no SOA. number: another for every plot of a page. */
void pf_plot_soa(FILE *out, size_t number, const pf_plan *plan, const pf_part *part,
                 const pf_explanation *explanation);

#endif
