/* flip.c: where a verdict flips as one number moves. */
#include "rank/flip.h"
#include "base/number.h"

#include <math.h>

/* First step of widening on each scale, and by what the next is longer. */
static const double first_step[] = {0.05, 2, 1};
#define WIDEN 1.6

/* On a logarithmic scale 0 is taken for this share of the larger end. */
#define ALMOST_NOTHING 1e-9

/* A place on the scale, with what the probe said there. */
typedef struct point {
    double place, number;
    pf_answer answer;
} point;

static double place_of(const pf_search *search, double number)
{
    double floor = ALMOST_NOTHING * fmax(search->from, search->end);
    return search->scale == PF_SCALE_LOG ? log(fmax(number, floor)) : number;
}

static double number_at(const pf_search *search, double place)
{
    if (search->scale == PF_SCALE_LOG) return exp(place);
    return search->scale == PF_SCALE_WHOLE ? round(place) : place;
}

static pf_status look(const pf_search *search, point *at)
{
    at->answer = (pf_answer){.valid = true, .measure = PF_NONE};
    return search->probe(search->context, at->number, &at->answer);
}

static bool is_same(const point *left, const point *right)
{
    return right->answer.valid && right->answer.state == left->answer.state;
}

/* Steps outwards from *same until the state flips (*other, true) or the range ends (false). */
static pf_status widen(const pf_search *search, point *same, point *other, bool *flips)
{
    double end = place_of(search, search->end), step = first_step[search->scale];
    double sign = end < same->place ? -1 : 1;
    *flips = false;
    while (same->number != search->end) {
        point next = {.place = same->place + sign * step};
        next.number = number_at(search, next.place);
        if ((end - next.place) * sign <= 0) next = (point){.place = end, .number = search->end};
        pf_status status = look(search, &next);
        if (status != PF_OK) return status;
        *flips = !is_same(same, &next);
        if (*flips) {
            *other = next;
            return PF_OK;
        }
        *same = next;
        step *= WIDEN;
    }
    return PF_OK;
}

/* The ITP estimate between left and right; the middle where no measure helps. */
static double estimate(const point *left, const point *right, double reach, double shrink)
{
    double a = left->place, b = right->place, middle = (a + b) / 2;
    double ya = left->answer.measure, yb = right->answer.measure;
    if (!right->answer.valid || !isfinite(ya) || !isfinite(yb) || !(ya * yb < 0)) return middle;
    double straight = (yb * a - ya * b) / (yb - ya);
    double towards = middle > straight ? 1 : -1, shift = shrink * (b - a) * (b - a);
    double trial = shift <= fabs(middle - straight) ? straight + towards * shift : middle;
    return fabs(trial - middle) <= reach ? trial : middle - towards * reach;
}

static bool is_close(const pf_search *search, const point *same, const point *other)
{
    double width = fabs(same->place - other->place);
    return search->scale == PF_SCALE_WHOLE ? width <= 1 : width <= search->tolerance;
}

/* The whole number nearest to a place that lies strictly between two that are more than 1 apart. */
static double whole_between(double place, const point *same, const point *other)
{
    double low = fmin(same->place, other->place), high = fmax(same->place, other->place);
    return fmin(fmax(round(place), low + 1), high - 1);
}

static pf_status close_in(const pf_search *search, point *same, point *other)
{
    double half = search->scale == PF_SCALE_WHOLE ? 0.5 : search->tolerance / 2;
    double width = fabs(other->place - same->place), shrink = 0.2 / width;
    double reach = half * exp2(ceil(log2(width / (2 * half))) + 1);
    for (int i = 0; i < 200 && !is_close(search, same, other); i++) {
        double left = fabs(other->place - same->place) / 2;
        point next = {.place = estimate(same, other, fmax(0, reach - left), shrink)};
        if (search->scale == PF_SCALE_WHOLE) next.place = whole_between(next.place, same, other);
        next.number = number_at(search, next.place);
        pf_status status = look(search, &next);
        if (status != PF_OK) return status;
        if (is_same(same, &next))
            *same = next;
        else
            *other = next;
        reach /= 2;
    }
    return PF_OK;
}

pf_status pf_flip_find(const pf_search *search, pf_flip *flip)
{
    point same = {.place = place_of(search, search->from), .number = search->from}, other = {0};
    pf_status status = look(search, &same);
    bool state = same.answer.state;
    *flip = (pf_flip){.state = state};
    if (status == PF_OK) status = widen(search, &same, &other, &flip->found);
    if (status == PF_OK && flip->found) status = close_in(search, &same, &other);
    flip->same = same.number;
    flip->flipped = flip->found ? other.number : PF_NONE;
    flip->invalid = flip->found && !other.answer.valid;
    if (flip->invalid) flip->found = false;
    return status;
}
