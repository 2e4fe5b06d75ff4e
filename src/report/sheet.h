/* sheet.h: the lines of a calculation sheet, written as text or as JSON. */
#ifndef REPORT_SHEET_H
#define REPORT_SHEET_H

#include "report/json.h"

#include <passfet/review.h>
#include <stdio.h>

typedef struct pf_sheet {
    FILE *out;
    pf_json *json; /* NULL: text */
    bool open;     /* a section is open */
} pf_sheet;

/* Begins a section, ending the one before. NULL: only ends. */
void pf_sheet_section(pf_sheet *sheet, const char *title);

/* A sentence, wrapped. */
void pf_sheet_note(pf_sheet *sheet, const char *format, ...) PF_PRINTF(2, 3);

/* label = formula = value unit. Each # in the formula stands for the next double. "#" alone is a value
** read from the data sheet or profile: the line has no formula then. */
void pf_sheet_value(pf_sheet *sheet, const char *label, double value, const char *unit,
                    const char *formula, ...);

/* Sections of the sheet, in their order. */
void pf_sheet_head(pf_sheet *sheet, const pf_sheet_subject *subject);
void pf_sheet_ratings(pf_sheet *sheet, const pf_sheet_subject *subject);
void pf_sheet_running(pf_sheet *sheet, const pf_sheet_subject *subject);
void pf_sheet_event(pf_sheet *sheet, const pf_sheet_subject *subject, size_t slot);
void pf_sheet_window(pf_sheet *sheet, const pf_sheet_subject *subject);
void pf_sheet_open(pf_sheet *sheet, const pf_sheet_subject *subject);

/* A reading of the SOA, step by step; name: "I_SOA". */
void pf_sheet_reading(pf_sheet *sheet, const pf_reading *reading, const char *name);

/* Zth, step by step. */
void pf_sheet_zth(pf_sheet *sheet, const pf_part *part, const pf_zth_reading *reading);

/* All sections as the member `sheet` of an open object. */
void pf_sheet_json_lines(pf_json *json, const pf_sheet_subject *subject);

/* A value with a prefix, for words: "3 ms". Room: PF_UNIT_ROOM. Returns text. */
const char *pf_sheet_words(char *text, double value, pf_quantity quantity);

#endif
