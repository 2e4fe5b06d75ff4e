/* markup.c: texts and numbers inside HTML and SVG. */
#include "report/markup.h"
#include "base/number.h"

#include <math.h>

void pf_markup_text(FILE *out, const char *text)
{
    if (!text) text = "\xE2\x80\x93";
    for (; *text; text++) {
        if (*text == '&')
            fputs("&amp;", out);
        else if (*text == '<')
            fputs("&lt;", out);
        else if (*text == '>')
            fputs("&gt;", out);
        else if (*text == '"')
            fputs("&quot;", out);
        else if ((unsigned char)*text < 0x20)
            fputc(' ', out);
        else
            fputc(*text, out);
    }
}

void pf_markup_number(FILE *out, double value, int digits)
{
    char text[PF_NUMBER_ROOM];
    pf_number_print(text, value, digits);
    fputs(isinf(value) ? "inf" : isnan(value) ? "\xE2\x80\x93" : text, out);
}

void pf_markup_at(FILE *out, const char *name, double value)
{
    char text[PF_NUMBER_ROOM];
    pf_number_print(text, nearbyint(value * 10) / 10, 6);
    fprintf(out, " %s=\"%s\"", name, text);
}
