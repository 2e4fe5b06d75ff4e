/* markup.h: texts and numbers inside HTML and SVG. */
#ifndef REPORT_MARKUP_H
#define REPORT_MARKUP_H

#include <stdio.h>

/* Writes text with & < > " and control characters made harmless; NULL: a dash. */
void pf_markup_text(FILE *out, const char *text);

/* A number with so many significant digits; a dash where it is not stated, `inf` where infinite. */
void pf_markup_number(FILE *out, double value, int digits);

/* ` name="value"`, the value rounded to a tenth: coordinates. */
void pf_markup_at(FILE *out, const char *name, double value);

#endif
