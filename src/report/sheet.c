/* sheet.c: the lines of a calculation sheet, written as text or as JSON. */
#include "report/sheet.h"
#include "base/buffer.h"
#include "base/number.h"
#include "report/sheet_table.h"
#include "report/words.h"

#include <stdarg.h>
#include <string.h>

/* Significant digits of numbers put into a formula, and of what comes out. */
#define DIGITS_IN 9
#define DIGITS_OUT 6

#define LINE_MAXIMUM 4000

void pf_sheet_section(pf_sheet *sheet, const char *title)
{
    if (sheet->json && sheet->open) {
        pf_json_close(sheet->json, ']');
        pf_json_close(sheet->json, '}');
    }
    sheet->open = title != NULL;
    if (!title) return;
    if (!sheet->json) {
        fprintf(sheet->out, "\n%s\n", title);
        return;
    }
    pf_json_open(sheet->json, '{');
    pf_json_named_text(sheet->json, "section", title);
    pf_json_name(sheet->json, "lines");
    pf_json_open(sheet->json, '[');
}

void pf_sheet_note(pf_sheet *sheet, const char *format, ...)
{
    char text[1200];
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(text, sizeof text, format, arguments);
    va_end(arguments);
    if (!sheet->json) {
        pf_wrapped_print(sheet->out, text, 4);
        return;
    }
    pf_json_open(sheet->json, '{');
    pf_json_named_text(sheet->json, "note", text);
    pf_json_close(sheet->json, '}');
}

/* Puts the numbers into a formula, negative ones in brackets. */
static void fill_formula(pf_buffer *filled, const char *formula, va_list numbers)
{
    char number[PF_NUMBER_ROOM];
    for (; *formula; formula++) {
        if (*formula != '#') {
            pf_buffer_add(filled, formula, 1);
            continue;
        }
        double value = va_arg(numbers, double);
        pf_number_print(number, value, DIGITS_IN);
        pf_buffer_print(filled, value < 0 ? "(%s)" : "%s", number);
    }
}

static void print_value(pf_sheet *sheet, const char *label, double value, const char *unit,
                        const char *formula)
{
    char number[PF_NUMBER_ROOM] = "-";
    if (pf_is_stated(value)) pf_number_print(number, value, DIGITS_OUT);
    size_t width =
        4 + pf_text_width(label) + 3 + strlen(formula) + 3 + strlen(number) + 1 + strlen(unit);
    const char *gap = width > PF_TABLE_COLUMNS ? "\n        = " : " = ";
    fprintf(sheet->out, "    %s", label);
    if (*formula) fprintf(sheet->out, "%s%s", gap, formula);
    fprintf(sheet->out, "%s%s%s%s\n", *formula ? gap : " = ", number, *unit ? " " : "", unit);
}

static void write_value(pf_json *json, const char *label, double value, const char *unit,
                        const char *formula)
{
    char number[PF_NUMBER_ROOM];
    double rounded = PF_NONE;
    if (pf_number_print(number, value, DIGITS_OUT))
        pf_number_read(number, strlen(number), &rounded);
    pf_json_open(json, '{');
    pf_json_named_text(json, "label", label);
    pf_json_named_text(json, "formula", *formula ? formula : NULL);
    pf_json_named_number(json, "value", rounded);
    pf_json_named_text(json, "unit", unit);
    pf_json_close(json, '}');
}

void pf_sheet_value(pf_sheet *sheet, const char *label, double value, const char *unit,
                    const char *formula, ...)
{
    pf_buffer filled;
    va_list numbers;
    bool bare = strcmp(formula, "#") == 0 || !pf_is_stated(value);
    pf_buffer_init(&filled, LINE_MAXIMUM);
    va_start(numbers, formula);
    if (!bare) fill_formula(&filled, formula, numbers);
    va_end(numbers);
    if (sheet->json)
        write_value(sheet->json, label, value, unit, pf_buffer_string(&filled));
    else
        print_value(sheet, label, value, unit, pf_buffer_string(&filled));
    pf_buffer_clear(&filled);
}

const char *pf_sheet_words(char *text, double value, pf_quantity quantity)
{
    pf_value_print(text, value, quantity, 4);
    return text;
}

static void write_sections(pf_sheet *sheet, const pf_sheet_subject *subject)
{
    pf_sheet_ratings(sheet, subject);
    pf_sheet_running(sheet, subject);
    for (size_t slot = 0; slot < pf_plan_slots(subject->plan); slot++)
        if (pf_plan_event(subject->plan, slot) != PF_RUNNING) pf_sheet_event(sheet, subject, slot);
    pf_sheet_window(sheet, subject);
    pf_sheet_open(sheet, subject);
    pf_sheet_section(sheet, NULL);
}

void pf_report_sheet_text(FILE *out, const pf_sheet_subject *subject)
{
    pf_sheet sheet = {.out = out};
    pf_sheet_head(&sheet, subject);
    pf_sheet_table(out, subject);
    write_sections(&sheet, subject);
    pf_sheet_influences(out, subject);
    fputc('\n', out);
    for (const char *const *line = pf_report_cautions(); *line; line++)
        fprintf(out, "%s\n", *line);
}

void pf_sheet_json_lines(pf_json *json, const pf_sheet_subject *subject)
{
    pf_sheet sheet = {.out = json->out, .json = json};
    pf_json_name(json, "sheet");
    pf_json_open(json, '[');
    write_sections(&sheet, subject);
    pf_json_close(json, ']');
}
