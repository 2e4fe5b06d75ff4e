/* plot.c: the safe operating area of a part with the stress of a card in it, as SVG.
**
** Black on white; what tells lines apart is the label at their right end, so that a copy in grey says as
** much as the screen.
*/
#include "report/plot.h"
#include "base/number.h"
#include "report/markup.h"
#include "report/words.h"

#include <math.h>
#include <string.h>

/* The sheet, and the frame in it, in SVG units. */
enum { WIDTH = 720, HEIGHT = 496, LEFT = 64, RIGHT = 610, TOP = 16, BOTTOM = 420 };

#define LABEL_STEP 13.0 /* least distance between two labels */

typedef struct plot {
    FILE *out;
    double low_V, high_V, low_A, high_A; /* the frame, as logarithms to 10 */
} plot;

static double across(const plot *on, double vds_V)
{
    return LEFT + (RIGHT - LEFT) * (log10(vds_V) - on->low_V) / (on->high_V - on->low_V);
}

static double up(const plot *on, double id_A)
{
    return BOTTOM - (BOTTOM - TOP) * (log10(id_A) - on->low_A) / (on->high_A - on->low_A);
}

/* --- Range --------------------------------------------------------------------------------- */

static void take_in(plot *on, double vds_V, double id_A)
{
    if (!(vds_V > 0) || !(id_A > 0) || !isfinite(vds_V) || !isfinite(id_A)) return;
    on->low_V = fmin(on->low_V, log10(vds_V));
    on->high_V = fmax(on->high_V, log10(vds_V));
    on->low_A = fmin(on->low_A, log10(id_A));
    on->high_A = fmax(on->high_A, log10(id_A));
}

/* Whole decades around all that is drawn; what lies below 0.1 V or 10 mA is left out. */
static void settle_range(plot *on, const pf_part *part, const pf_explanation *explanation)
{
    *on = (plot){on->out, 0, 1, 0, 1};
    for (size_t i = 0; i < part->soa_count; i++)
        take_in(on, part->soa[i].vds_V, part->soa[i].id_A);
    for (size_t slot = 0; slot < explanation->assessment.stress.count; slot++)
        take_in(on, explanation->view[slot].vds_V, explanation->view[slot].id_A);
    on->low_V = fmax(floor(on->low_V), -1);
    on->high_V = ceil(on->high_V);
    on->low_A = fmax(floor(on->low_A), -2);
    on->high_A = ceil(on->high_A);
}

/* --- Frame --------------------------------------------------------------------------------- */

static void line(FILE *out, double x1, double y1, double x2, double y2, const char *kind)
{
    fprintf(out, "<line class=\"%s\"", kind);
    pf_markup_at(out, "x1", x1);
    pf_markup_at(out, "y1", y1);
    pf_markup_at(out, "x2", x2);
    pf_markup_at(out, "y2", y2);
    fputs("/>\n", out);
}

static void label(FILE *out, double x, double y, const char *anchor, const char *text)
{
    fprintf(out, "<text text-anchor=\"%s\"", anchor);
    pf_markup_at(out, "x", x);
    pf_markup_at(out, "y", y);
    fputc('>', out);
    pf_markup_text(out, text);
    fputs("</text>\n", out);
}

/* One decade of grid lines, its first one labelled. */
static void draw_decade(const plot *on, int power, bool voltage)
{
    char text[PF_NUMBER_ROOM];
    double start = pow(10, power), last = voltage ? on->high_V : on->high_A;
    for (int step = 1; step < (power < last ? 10 : 2); step++) {
        const char *kind = step == 1 ? "decade" : "grid";
        if (voltage)
            line(on->out, across(on, step * start), TOP, across(on, step * start), BOTTOM, kind);
        else
            line(on->out, LEFT, up(on, step * start), RIGHT, up(on, step * start), kind);
    }
    pf_number_print(text, start, 0);
    if (voltage)
        label(on->out, across(on, start), BOTTOM + 16, "middle", text);
    else
        label(on->out, LEFT - 6, up(on, start) + 4, "end", text);
}

static void draw_frame(const plot *on)
{
    for (int power = (int)on->low_V; power <= (int)on->high_V; power++)
        draw_decade(on, power, true);
    for (int power = (int)on->low_A; power <= (int)on->high_A; power++)
        draw_decade(on, power, false);
    label(on->out, (LEFT + RIGHT) / 2, BOTTOM + 36, "middle", "V_DS in V");
    fprintf(
        on->out,
        "<text text-anchor=\"middle\" transform=\"translate(16 %d) rotate(-90)\">I_D in A</text>\n",
        (TOP + BOTTOM) / 2);
}

/* --- Lines of the sheet -------------------------------------------------------------------- */

/* Where the points of one line begin and end; false behind the last line of the lowest family. */
static bool next_line(const pf_part *part, size_t *begin, size_t *end)
{
    *begin = *end;
    if (*begin == part->soa_count) return false;
    const pf_soa_point *first = &part->soa[*begin];
    if (first->case_degC != part->soa[0].case_degC) return false;
    while (*end < part->soa_count && part->soa[*end].pulse_s == first->pulse_s &&
           part->soa[*end].case_degC == first->case_degC)
        ++*end;
    return true;
}

static void draw_line(const plot *on, const pf_part *part, size_t begin, size_t end)
{
    char x[PF_NUMBER_ROOM], y[PF_NUMBER_ROOM];
    fputs("<polyline class=\"sheet\" points=\"", on->out);
    for (size_t i = begin; i < end; i++) {
        pf_number_print(x, nearbyint(across(on, part->soa[i].vds_V) * 10) / 10, 6);
        pf_number_print(y, nearbyint(up(on, part->soa[i].id_A) * 10) / 10, 6);
        fprintf(on->out, "%s%s,%s", i == begin ? "" : " ", x, y);
    }
    fputs("\"/>\n", on->out);
}

/* Labels at the right ends, from the top down: longer pulses lie lower, so that each label only has to
** keep its distance from the one before. */
static void label_lines(const plot *on, const pf_part *part)
{
    size_t begin, end = 0;
    double least = TOP;
    while (next_line(part, &begin, &end)) {
        char text[PF_UNIT_ROOM] = "DC";
        const pf_soa_point *last = &part->soa[end - 1];
        if (last->pulse_s != PF_DC) pf_value_print(text, last->pulse_s, PF_TIME, 3);
        double y = fmax(fmin(up(on, last->id_A) + 4, BOTTOM), least);
        label(on->out, RIGHT + 8, y, "start", text);
        line(on->out, across(on, last->vds_V), fmin(up(on, last->id_A), BOTTOM), RIGHT + 6, y - 4,
             "leader");
        least = y + LABEL_STEP;
    }
}

/* --- Stress -------------------------------------------------------------------------------- */

/* Above to the right; near the frame's end below to the left, out of the way of a chain that comes down
** from there. */
static void draw_number(const plot *on, const char *number, double x, double y)
{
    fputs("<g class=\"number\">", on->out);
    bool left = x > RIGHT - 70;
    label(on->out, x + (left ? -7 : 7), y + (left ? 15 : -5), left ? "end" : "start", number);
    fputs("</g>\n", on->out);
}

static bool is_rectangle(const pf_plan *plan, const pf_event_view *view, size_t slot)
{
    return pf_event_is_rectangle(pf_plan_event(plan, slot)) && view[slot].vds_V > 0 &&
           view[slot].id_A > 0;
}

/* Equal, or both not known. */
static bool same_number(double left, double right)
{
    return left == right || (isnan(left) && isnan(right));
}

static bool same_place(const pf_event_view *left, const pf_event_view *right)
{
    return left->vds_V == right->vds_V && left->id_A == right->id_A &&
           same_number(left->limit_A, right->limit_A);
}

/* The numbers of all rectangles at one place; false where an earlier one has drawn them. */
static bool collect_numbers(const pf_plan *plan, const pf_explanation *explanation, size_t slot,
                            char *text, size_t room)
{
    const pf_event_view *view = explanation->view;
    size_t at = 0;
    text[0] = '\0';
    for (size_t i = 0; i < explanation->assessment.stress.count; i++) {
        if (!is_rectangle(plan, view, i) || !same_place(&view[i], &view[slot])) continue;
        if (i < slot) return false;
        if (at < room) at += (size_t)snprintf(text + at, room - at, "%s%zu", at ? ", " : "", i + 1);
    }
    return true;
}

static void draw_rectangle(const plot *on, const char *number, const pf_event_view *view)
{
    double x = across(on, view->vds_V), y = up(on, view->id_A);
    if (view->limit_A > 0) {
        double top = up(on, view->limit_A);
        line(on->out, x, y, x, top, "room");
        line(on->out, x - 5, top, x + 5, top, "room");
    }
    fputs("<rect class=\"stress\" width=\"7\" height=\"7\"", on->out);
    pf_markup_at(on->out, "x", x - 3.5);
    pf_markup_at(on->out, "y", y - 3.5);
    fputs("/>\n", on->out);
    draw_number(on, number, x, y);
}

static bool can_be_drawn(const pf_step *step)
{
    return step->vds_V > 0 && step->id_A > 0;
}

static void draw_waveform(const plot *on, size_t slot, const pf_event_view *view)
{
    char number[24];
    const pf_step *before = NULL, *hottest = NULL;
    for (size_t i = 0; i < view->step_count; i++) {
        const pf_step *step = &view->step[i];
        if (!can_be_drawn(step)) continue;
        double x = across(on, step->vds_V), y = up(on, step->id_A);
        if (before) line(on->out, across(on, before->vds_V), up(on, before->id_A), x, y, "chain");
        fputs("<circle class=\"step\" r=\"3\"", on->out);
        pf_markup_at(on->out, "cx", x);
        pf_markup_at(on->out, "cy", y);
        fputs("/>\n", on->out);
        before = step;
        if (!hottest || step->vds_V * step->id_A > hottest->vds_V * hottest->id_A) hottest = step;
    }
    snprintf(number, sizeof number, "%zu", slot + 1);
    if (hottest) draw_number(on, number, across(on, hottest->vds_V), up(on, hottest->id_A));
}

static void draw_stress(const plot *on, const pf_plan *plan, const pf_explanation *explanation)
{
    char numbers[120];
    for (size_t slot = 0; slot < explanation->assessment.stress.count; slot++) {
        const pf_event_view *view = &explanation->view[slot];
        if (view->step_count)
            draw_waveform(on, slot, view);
        else if (is_rectangle(plan, explanation->view, slot) &&
                 collect_numbers(plan, explanation, slot, numbers, sizeof numbers))
            draw_rectangle(on, numbers, view);
    }
}

/* What the numbers stand for, so that a plot taken off its page still says it. */
static void draw_key(const plot *on, const pf_plan *plan, const pf_explanation *explanation)
{
    enum { PER_LINE = 6 };
    size_t written = 0;
    for (size_t slot = 0; slot < explanation->assessment.stress.count; slot++) {
        const pf_event_view *view = &explanation->view[slot];
        if (!view->step_count && !is_rectangle(plan, explanation->view, slot)) continue;
        if (written % PER_LINE == 0)
            fprintf(on->out, "%s<text x=\"%d\" y=\"%zu\">", written ? "</text>\n" : "", LEFT,
                    BOTTOM + 56 + written / PER_LINE * 15);
        fprintf(on->out, "%s%zu ", written % PER_LINE ? "; " : "", slot + 1);
        pf_markup_text(on->out, pf_plan_event_name(plan, slot));
        written++;
    }
    if (written) fputs("</text>\n", on->out);
}

void pf_plot_soa(FILE *out, size_t number, const pf_plan *plan, const pf_part *part,
                 const pf_explanation *explanation)
{
    plot on = {.out = out};
    size_t begin, end = 0;
    if (part->soa_count == 0) return;
    settle_range(&on, part, explanation);
    fprintf(out,
            "<svg viewBox=\"0 0 %d %d\" role=\"img\" aria-label=\"Safe operating area\">\n"
            "<defs><clipPath id=\"frame%zu\"><rect x=\"%d\" y=\"%d\" width=\"%d\" height=\"%d\"/>"
            "</clipPath></defs>\n",
            WIDTH, HEIGHT, number, LEFT, TOP, RIGHT - LEFT, BOTTOM - TOP);
    draw_frame(&on);
    fprintf(out, "<g clip-path=\"url(#frame%zu)\">\n", number);
    while (next_line(part, &begin, &end))
        draw_line(&on, part, begin, end);
    draw_stress(&on, plan, explanation);
    fputs("</g>\n", out);
    label_lines(&on, part);
    draw_key(&on, plan, explanation);
    fputs("</svg>\n", out);
}
