/* text.c: slices, folded names, near misses. */
#include "intake/text.h"

#include <string.h>

static char lower(char c)
{
    return c >= 'A' && c <= 'Z' ? (char)(c - 'A' + 'a') : c;
}

size_t pf_blank_length(const char *text, size_t length)
{
    if (length == 0) return 0;
    if (text[0] == ' ' || (text[0] >= '\t' && text[0] <= '\r')) return 1;
    if (length >= 2 && memcmp(text, "\xC2\xA0", 2) == 0) return 2;
    if (length >= 3 && memcmp(text, "\xE2\x80", 2) == 0) {
        unsigned char last = (unsigned char)text[2];
        return (last >= 0x80 && last <= 0x8B) || last == 0xAF ? 3 : 0; /* U+2000..200B, U+202F */
    }
    return 0;
}

static bool is_plain(char c)
{
    return c > ' ' && c < 0x7F;
}

pf_slice pf_trim(pf_slice slice)
{
    size_t n = slice.length;
    if (n > 0 && is_plain(slice.text[0]) && is_plain(slice.text[n - 1])) return slice;
    size_t blank;
    while ((blank = pf_blank_length(slice.text, slice.length)) > 0) {
        slice.text += blank;
        slice.length -= blank;
    }
    for (;;) {
        size_t end = slice.length;
        for (size_t back = 1; back <= 3 && back <= slice.length; back++)
            if (pf_blank_length(slice.text + slice.length - back, back) == back)
                end = slice.length - back;
        if (end == slice.length) return slice;
        slice.length = end;
    }
}

pf_slice pf_undefused(pf_slice text)
{
    bool defused = text.length > 1 && text.text[0] == '\'' && strchr("=+-@'", text.text[1]);
    if (!defused || text.text[1] == '\0') return text;
    return (pf_slice){text.text + 1, text.length - 1};
}

bool pf_same_word(const char *left, const char *right)
{
    while (*left && lower(*left) == lower(*right))
        left++, right++;
    return lower(*left) == lower(*right);
}

bool pf_starts(pf_slice slice, const char *start)
{
    size_t length = strlen(start);
    if (slice.length < length) return false;
    for (size_t i = 0; i < length; i++)
        if (lower(slice.text[i]) != lower(start[i])) return false;
    return true;
}

bool pf_slice_is(pf_slice slice, const char *word)
{
    return slice.length == strlen(word) && pf_starts(slice, word);
}

bool pf_not_stated(pf_slice slice)
{
    static const char *const words[] = {
        "-", "\xE2\x80\x93", "\xE2\x80\x94", "\xE2\x88\x92", "n/a", "n.a.", "tbd",
    };
    slice = pf_trim(slice);
    if (slice.length == 0) return true;
    if (slice.length > 4) return false;
    for (size_t i = 0; i < sizeof words / sizeof *words; i++)
        if (pf_slice_is(slice, words[i])) return true;
    return false;
}

/* The next character of a name that counts, in small letters; 0 at the end. */
static char next_folded(pf_slice *rest)
{
    while (rest->length > 0) {
        char c = rest->text[0];
        size_t blank = is_plain(c) ? 0 : pf_blank_length(rest->text, rest->length);
        size_t taken = blank ? blank : 1;
        *rest = (pf_slice){rest->text + taken, rest->length - taken};
        if (blank == 0 && !strchr("_-().,", c)) return lower(c);
    }
    return '\0';
}

size_t pf_fold(pf_slice name, char folded[PF_FOLDED_ROOM])
{
    size_t length = 0;
    char c;
    while (length < PF_FOLDED_ROOM - 1 && (c = next_folded(&name)) != '\0')
        folded[length++] = c;
    folded[length] = '\0';
    return length;
}

static bool folds_to(pf_slice name, const char *folded)
{
    char c;
    while ((c = next_folded(&name)) != '\0')
        if (c != *folded++) return false;
    return *folded == '\0';
}

bool pf_folded_in(const char *folded, const char *names)
{
    for (;;) {
        size_t length = strcspn(names, "|");
        if (*folded && folds_to((pf_slice){names, length}, folded)) return true;
        if (names[length] == '\0') return false;
        names += length + 1;
    }
}

static size_t least(size_t a, size_t b)
{
    return a < b ? a : b;
}

/* Optimal string alignment over three rows (Damerau 1964); names are short. */
size_t pf_distance(const char *left, const char *right, size_t most)
{
    size_t rows[3][PF_FOLDED_ROOM + 1];
    size_t m = strlen(left), n = strlen(right);
    if (m >= PF_FOLDED_ROOM || n >= PF_FOLDED_ROOM) return most + 1;
    for (size_t j = 0; j <= n; j++)
        rows[0][j] = j;
    for (size_t i = 1; i <= m; i++) {
        size_t *now = rows[i % 3], *above = rows[(i + 2) % 3], *before = rows[(i + 1) % 3];
        now[0] = i;
        for (size_t j = 1; j <= n; j++) {
            size_t change = above[j - 1] + (left[i - 1] != right[j - 1]);
            now[j] = least(change, least(above[j], now[j - 1]) + 1);
            bool swapped =
                i > 1 && j > 1 && left[i - 1] == right[j - 2] && left[i - 2] == right[j - 1];
            if (swapped) now[j] = least(now[j], before[j - 2] + 1);
        }
    }
    return least(rows[m % 3][n], most + 1);
}

bool pf_near(const char *left, const char *right)
{
    size_t m = strlen(left), n = strlen(right), length = least(m, n);
    size_t most = length >= 8 ? 2 : length >= 4 ? 1 : 0;
    return most > 0 && m + n - 2 * length <= most && pf_distance(left, right, most) <= most;
}
