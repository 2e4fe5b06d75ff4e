/* pollute.h: every single-defect copy of a clean CSV text. */
#ifndef SUPPORT_POLLUTE_H
#define SUPPORT_POLLUTE_H

#include <stddef.h>

typedef struct polluted {
    const char *text;
    size_t length;
    size_t line; /* on which the defect lies */
    const char *what;
} polluted;

typedef void pollute_sink(void *context, const polluted *file);

/* Hands every polluted copy to the sink; returns how many. delimiter is the clean text's. Defects:
** delimiters left out, doubled, exchanged; quotes put in and left out; line ends left out, put in,
** written otherwise; cells too few and too many; lines above and below; bytes that are no UTF-8;
** whole encodings; decimal marks exchanged; headers misspelt, left out, doubled; the text cut off. */
size_t pollute(const char *clean, size_t length, char delimiter, pollute_sink *sink, void *context);

#endif
