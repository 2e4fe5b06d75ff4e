/* csv.h: cells of CSV as passfet writes them. */
#ifndef REPORT_CSV_H
#define REPORT_CSV_H

#include <stdio.h>

/* Quoted where it must be; a text that a spreadsheet would run as a formula gets a leading `'`, which
** import takes off again. NULL: nothing. */
void pf_csv_text(FILE *out, const char *text);

/* As few digits as read back unchanged; nothing where not stated. */
void pf_csv_number(FILE *out, double value);

#endif
