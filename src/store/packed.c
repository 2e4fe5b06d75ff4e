/* packed.c: curves to packed words and back. Cost: a copy of 16 bytes per point. */
#include "store/packed.h"
#include "store/words.h"

#include <math.h>

#define FORMAT 1
enum { FORM_NONE, FORM_POINTS, FORM_PAIRS };

bool pf_part_has_curves(const pf_part *part)
{
    size_t items = part->soa_count;
    for (int path = 0; path < PF_PATH_COUNT; path++)
        items += part->thermal[path].point_count + part->thermal[path].pair_count;
    return items > 0;
}

static bool positive(double value)
{
    return isfinite(value) && value > 0;
}

static const char *judge_thermal(const pf_thermal_curve *curve)
{
    for (size_t i = 0; i < curve->point_count; i++)
        if (!positive(curve->point[i].time_s) || !positive(curve->point[i].zth_KpW))
            return "times and impedances of a Zth curve must be positive";
    for (size_t i = 0; i < curve->pair_count; i++)
        if (!positive(curve->pair[i].r_KpW) || !positive(curve->pair[i].tau_s))
            return "resistances and time constants of Foster pairs must be positive";
    return NULL;
}

const char *pf_curves_judge(const pf_part *part)
{
    for (size_t i = 0; i < part->soa_count; i++) {
        const pf_soa_point *point = &part->soa[i];
        if (!isfinite(point->case_degC) || !(point->pulse_s > 0))
            return "pulse widths of the SOA must be positive";
        if (!positive(point->vds_V) || !positive(point->id_A))
            return "voltages and currents of the SOA must be positive";
    }
    const char *wrong = NULL;
    for (int path = 0; path < PF_PATH_COUNT && !wrong; path++)
        wrong = judge_thermal(&part->thermal[path]);
    return wrong;
}

/* Items of curves have no padding. */
static bool same_items(const void *left, size_t left_count, const void *right, size_t right_count,
                       size_t size)
{
    return left_count == right_count &&
           (left_count == 0 || memcmp(left, right, left_count * size) == 0);
}

bool pf_curves_equal(const pf_part *left, const pf_part *right)
{
    bool same =
        same_items(left->soa, left->soa_count, right->soa, right->soa_count, sizeof *left->soa);
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        const pf_thermal_curve *a = &left->thermal[path], *b = &right->thermal[path];
        same = same &&
               same_items(a->point, a->point_count, b->point, b->point_count, sizeof *a->point) &&
               same_items(a->pair, a->pair_count, b->pair, b->pair_count, sizeof *a->pair);
    }
    return same;
}

/* Points from `at` on that belong to one line. */
static size_t line_length(const pf_part *part, size_t at)
{
    size_t end = at;
    while (end < part->soa_count && part->soa[end].case_degC == part->soa[at].case_degC &&
           part->soa[end].pulse_s == part->soa[at].pulse_s)
        end++;
    return end - at;
}

static void pack_soa(const pf_part *part, pf_buffer *packed)
{
    uint32_t lines = 0;
    for (size_t at = 0; at < part->soa_count; at += line_length(part, at))
        lines++;
    pf_words_add_pair(packed, FORMAT, lines);
    for (size_t at = 0, end; at < part->soa_count; at = end) {
        end = at + line_length(part, at);
        pf_words_add_double(packed, part->soa[at].case_degC);
        pf_words_add_double(packed, part->soa[at].pulse_s);
        pf_words_add(packed, end - at);
        for (size_t i = at; i < end; i++) {
            pf_words_add_double(packed, part->soa[i].vds_V);
            pf_words_add_double(packed, part->soa[i].id_A);
        }
    }
}

static void pack_thermal(const pf_thermal_curve *curve, pf_buffer *packed)
{
    size_t count = curve->pair_count ? curve->pair_count : curve->point_count;
    uint32_t form = curve->pair_count ? FORM_PAIRS : curve->point_count ? FORM_POINTS : FORM_NONE;
    pf_words_add_pair(packed, form, (uint32_t)count);
    for (size_t i = 0; i < count; i++) {
        pf_words_add_double(packed,
                            form == FORM_PAIRS ? curve->pair[i].r_KpW : curve->point[i].time_s);
        pf_words_add_double(packed,
                            form == FORM_PAIRS ? curve->pair[i].tau_s : curve->point[i].zth_KpW);
    }
}

void pf_curves_pack(const pf_part *part, pf_buffer *packed)
{
    pack_soa(part, packed);
    for (int path = 0; path < PF_PATH_COUNT; path++)
        pack_thermal(&part->thermal[path], packed);
}

/* Steps over count pairs of numbers that must be finite and positive. */
static bool skip_pairs(pf_words *words, uint64_t count)
{
    if (count > pf_words_left(words) / 2) return false;
    for (uint64_t i = 0; i < 2 * count; i++)
        if (!positive(pf_words_double(words))) return false;
    return true;
}

static bool count_soa(pf_words *words, uint32_t lines, pf_packed_counts *counts)
{
    for (uint32_t line = 0; line < lines; line++) {
        if (pf_words_left(words) < 3) return false;
        double case_degC = pf_words_double(words), pulse_s = pf_words_double(words);
        uint64_t points = pf_words_next(words);
        if (!isfinite(case_degC) || !(pulse_s > 0) || points == 0) return false;
        if (!skip_pairs(words, points)) return false;
        counts->soa += (size_t)points;
    }
    return true;
}

bool pf_packed_count(const unsigned char *packed, size_t length, pf_packed_counts *counts)
{
    pf_words words = {packed, length / 8};
    *counts = (pf_packed_counts){0};
    if (length == 0) return true;
    uint32_t format, lines, form, count;
    if (length % 8) return false;
    pf_words_pair(&words, &format, &lines);
    if (format != FORMAT || !count_soa(&words, lines, counts)) return false;
    for (int path = 0; path < PF_PATH_COUNT; path++) {
        if (pf_words_left(&words) < 1) return false;
        pf_words_pair(&words, &form, &count);
        if (form > FORM_PAIRS || (form == FORM_NONE) != (count == 0)) return false;
        if (!skip_pairs(&words, count)) return false;
        if (form == FORM_PAIRS) counts->pair[path] = count;
        if (form == FORM_POINTS) counts->point[path] = count;
    }
    return pf_words_left(&words) == 0;
}

static void unpack_soa(pf_words *words, uint32_t lines, pf_part *part)
{
    pf_soa_point *to = part->soa;
    for (uint32_t line = 0; line < lines; line++) {
        double case_degC = pf_words_double(words), pulse_s = pf_words_double(words);
        for (uint64_t left = pf_words_next(words); left; left--, to++) {
            to->case_degC = case_degC;
            to->pulse_s = pulse_s;
            to->vds_V = pf_words_double(words);
            to->id_A = pf_words_double(words);
        }
    }
    part->soa_count = (size_t)(to - part->soa);
}

static void unpack_thermal(pf_words *words, pf_thermal_curve *curve)
{
    uint32_t form, count;
    pf_words_pair(words, &form, &count);
    for (uint32_t i = 0; i < count; i++) {
        double first = pf_words_double(words), second = pf_words_double(words);
        if (form == FORM_PAIRS)
            curve->pair[i] = (pf_foster_pair){first, second};
        else
            curve->point[i] = (pf_zth_point){first, second};
    }
    curve->pair_count = form == FORM_PAIRS ? count : 0;
    curve->point_count = form == FORM_POINTS ? count : 0;
}

void pf_curves_unpack(const unsigned char *packed, size_t length, pf_part *part)
{
    pf_words words = {packed, length / 8};
    uint32_t format, lines;
    if (length == 0) return;
    pf_words_pair(&words, &format, &lines);
    unpack_soa(&words, lines, part);
    for (int path = 0; path < PF_PATH_COUNT; path++)
        unpack_thermal(&words, &part->thermal[path]);
}
