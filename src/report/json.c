/* json.c: a streaming JSON writer. */
#include "report/json.h"
#include "base/number.h"

#include <math.h>
#include <string.h>

void pf_json_begin(pf_json *json, FILE *out)
{
    *json = (pf_json){.out = out};
}

void pf_json_end(pf_json *json)
{
    fputc('\n', json->out);
}

/* A new line with the indent of the present depth. */
static void start_line(pf_json *json)
{
    fputc('\n', json->out);
    for (int i = 0; i < json->depth; i++)
        fputs("  ", json->out);
}

/* What comes before a name, or before a value that has none. */
static void separate(pf_json *json)
{
    if (json->named) {
        json->named = false;
        return;
    }
    if (json->filled) fputc(',', json->out);
    if (json->depth) start_line(json);
    json->filled = true;
}

void pf_json_open(pf_json *json, char bracket)
{
    separate(json);
    fputc(bracket, json->out);
    json->depth++;
    json->filled = false;
}

void pf_json_close(pf_json *json, char bracket)
{
    json->depth--;
    if (json->filled) start_line(json);
    fputc(bracket, json->out);
    json->filled = true;
}

/* Length of the UTF-8 character at text, 0 for bytes that are none (RFC 3629). */
static size_t utf8_length(const unsigned char *text)
{
    unsigned char c = text[0];
    size_t length = c < 0x80                ? 1
                    : c >= 0xC2 && c < 0xE0 ? 2
                    : c >= 0xE0 && c < 0xF0 ? 3
                    : c >= 0xF0 && c < 0xF5 ? 4
                                            : 0;
    for (size_t i = 1; i < length; i++)
        if ((text[i] & 0xC0) != 0x80) return 0;
    if ((c == 0xE0 && text[1] < 0xA0) || (c == 0xED && text[1] > 0x9F)) return 0;
    if ((c == 0xF0 && text[1] < 0x90) || (c == 0xF4 && text[1] > 0x8F)) return 0;
    return length;
}

static void write_string(pf_json *json, const char *text)
{
    const unsigned char *at = (const unsigned char *)text;
    fputc('"', json->out);
    while (*at) {
        size_t length = utf8_length(at);
        if (length == 0)
            fputs("\xEF\xBF\xBD", json->out);
        else if (*at == '"' || *at == '\\')
            fprintf(json->out, "\\%c", *at);
        else if (*at < 0x20 || *at == 0x7F)
            fprintf(json->out, "\\u%04x", (unsigned)*at);
        else
            fwrite(at, 1, length, json->out);
        at += length ? length : 1;
    }
    fputc('"', json->out);
}

void pf_json_name(pf_json *json, const char *name)
{
    separate(json);
    write_string(json, name);
    fputs(": ", json->out);
    json->named = true;
}

void pf_json_text(pf_json *json, const char *text)
{
    separate(json);
    if (text)
        write_string(json, text);
    else
        fputs("null", json->out);
}

void pf_json_number(pf_json *json, double value)
{
    char number[PF_NUMBER_ROOM];
    separate(json);
    pf_number_print(number, value, 0);
    fputs(isfinite(value) ? number : "null", json->out);
}

void pf_json_named_text(pf_json *json, const char *name, const char *text)
{
    pf_json_name(json, name);
    pf_json_text(json, text);
}

void pf_json_named_number(pf_json *json, const char *name, double value)
{
    pf_json_name(json, name);
    pf_json_number(json, value);
}

void pf_json_named_bool(pf_json *json, const char *name, bool value)
{
    pf_json_name(json, name);
    separate(json);
    fputs(value ? "true" : "false", json->out);
}
