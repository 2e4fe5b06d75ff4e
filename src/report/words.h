/* words.h: pieces of text that several reports share. */
#ifndef REPORT_WORDS_H
#define REPORT_WORDS_H

#include <passfet/ranking.h>
#include <stdbool.h>
#include <stdio.h>

/* A parameter as entered: "-40.5 ... -57 V", "4 A", "-" where it is not stated. */
#define PF_INTERVAL_ROOM (2 * PF_UNIT_ROOM + 8)
void pf_interval_print(char text[PF_INTERVAL_ROOM], const pf_profile *profile,
                       pf_parameter parameter);

/* A value of a parameter with the sign of the supply as entered, in SI. */
double pf_parameter_signed(const pf_profile *profile, pf_parameter parameter, double magnitude);

/* Name of the event that limits a part; "" where no event could be assessed. */
const char *pf_limiting_event(const pf_plan *plan, const pf_assessment *assessment);

/* Whether an event's stress is one pulse of constant voltage and current, or a train of such pulses. */
bool pf_event_is_rectangle(pf_event event);

/* "N low side, power_limit start, from running temperature". */
int pf_setting_print(const pf_profile *profile, char *text, size_t room);

/* Characters of a UTF-8 text. */
size_t pf_text_width(const char *text);

/* Writes text in a field of width characters: padded, or cut with an ellipsis. */
void pf_text_field_print(FILE *out, const char *text, size_t width, bool right);

/* A text of any length on lines of at most PF_TABLE_COLUMNS that begin with an indent. */
void pf_wrapped_print(FILE *out, const char *text, size_t indent);

#endif
