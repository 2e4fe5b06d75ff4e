/* sheet_table.h: tables of a calculation sheet. */
#ifndef REPORT_SHEET_TABLE_H
#define REPORT_SHEET_TABLE_H

#include <passfet/review.h>
#include <stdio.h>

/* A row per event: V, I, t, energy, peak power, start, SOA limit cold and as used, margin, moment. */
void pf_sheet_table(FILE *out, const pf_sheet_subject *subject);

/* What the margin answers to, strongest first. */
void pf_sheet_influences(FILE *out, const pf_sheet_subject *subject);

#endif
