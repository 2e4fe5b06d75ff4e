/* json.h: a streaming JSON writer.
**
** Commas and nesting are kept by the writer; names and values in turn are the caller's business. Text
** is written as valid UTF-8 always: bytes that are none become U+FFFD. Numbers read back unchanged;
** what is not stated or not finite is null.
*/
#ifndef REPORT_JSON_H
#define REPORT_JSON_H

#include <stdbool.h>
#include <stdio.h>

typedef struct pf_json {
    FILE *out;
    int depth;
    bool filled; /* something stands before at this depth */
    bool named;  /* a name was written, its value follows */
} pf_json;

void pf_json_begin(pf_json *json, FILE *out);
void pf_json_end(pf_json *json); /* a newline behind the outermost value */

void pf_json_open(pf_json *json, char bracket); /* '{' or '[' */
void pf_json_close(pf_json *json, char bracket);
void pf_json_name(pf_json *json, const char *name);
void pf_json_text(pf_json *json, const char *text); /* NULL: null */
void pf_json_number(pf_json *json, double value);

/* A name with its value. */
void pf_json_named_text(pf_json *json, const char *name, const char *text);
void pf_json_named_number(pf_json *json, const char *name, double value);
void pf_json_named_bool(pf_json *json, const char *name, bool value);

#endif
