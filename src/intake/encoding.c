/* encoding.c: UTF-8 checked, UTF-16 and Windows-1252 recognised, the latter decoded on demand.
**
** A cell whose bytes were guessed wrong is a wrong unit: micro and ohm are not ASCII. So nothing is
** guessed; what is not UTF-8 is named and refused.
*/
#include "intake/encoding.h"
#include "intake/text.h"

#include <stdint.h>
#include <string.h>

pf_status pf_encoding_read(const char *name, pf_encoding *encoding)
{
    if (!name || pf_same_word(name, "utf-8") || pf_same_word(name, "utf8"))
        *encoding = PF_UTF_8;
    else if (pf_same_word(name, "windows-1252") || pf_same_word(name, "cp1252"))
        *encoding = PF_WINDOWS_1252;
    else
        return PF_BAD_ARGUMENT;
    return PF_OK;
}

bool pf_bytes_plain(const char *bytes, size_t length)
{
    const uint64_t ones = UINT64_C(0x0101010101010101), tops = UINT64_C(0x8080808080808080);
    size_t at = 0;
    for (; at + 8 <= length; at += 8) {
        uint64_t word;
        memcpy(&word, bytes + at, 8);
        if ((word | (word - ones)) & tops) return false; /* a high bit, or a zero byte */
    }
    for (; at < length; at++)
        if (bytes[at] == 0 || bytes[at] & 0x80) return false;
    return true;
}

/* Bytes of one UTF-8 character; 0 for none (overlong forms, surrogates, beyond U+10FFFF). */
static size_t utf8_character(const unsigned char *s, size_t length)
{
    if (s[0] < 0x80) return s[0] != 0;
    size_t size = s[0] >= 0xF0 ? 4 : s[0] >= 0xE0 ? 3 : 2;
    if (s[0] < 0xC2 || s[0] > 0xF4 || size > length) return 0;
    for (size_t i = 1; i < size; i++)
        if ((s[i] & 0xC0) != 0x80) return 0;
    if (s[0] == 0xE0 && s[1] < 0xA0) return 0;
    if (s[0] == 0xED && s[1] > 0x9F) return 0;
    if (s[0] == 0xF0 && s[1] < 0x90) return 0;
    if (s[0] == 0xF4 && s[1] > 0x8F) return 0;
    return size;
}

size_t pf_utf8_valid(const char *bytes, size_t length)
{
    size_t at = 0;
    while (at < length) {
        size_t size = utf8_character((const unsigned char *)bytes + at, length - at);
        if (size == 0) break;
        at += size;
    }
    return at;
}

const char *pf_encoding_guess(const char *bytes, size_t length, const char **right)
{
    const unsigned char *s = (const unsigned char *)bytes;
    *right = "save the sheet as \"CSV UTF-8\"";
    if (length >= 2 && ((s[0] == 0xFF && s[1] == 0xFE) || (s[0] == 0xFE && s[1] == 0xFF)))
        return "the file is UTF-16, not UTF-8";
    if (length >= 4 && memcmp(bytes, "PK\003\004", 4) == 0)
        return "the file is a spreadsheet or archive, not CSV";
    if (memchr(bytes, 0, length)) return "zero bytes: the file is UTF-16 or no text at all";
    *right = "save the sheet as \"CSV UTF-8\"; import also takes --encoding windows-1252";
    return "bytes that are not UTF-8; they look like Windows-1252";
}

/* U+0080 to U+009F as Windows-1252 has them; 0 where it has none. */
static const uint16_t windows_1252[32] = {
    0x20AC, 0,      0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160,
    0x2039, 0x0152, 0,      0x017D, 0,      0,      0x2018, 0x2019, 0x201C, 0x201D, 0x2022,
    0x2013, 0x2014, 0x02DC, 0x2122, 0x0161, 0x203A, 0x0153, 0,      0x017E, 0x0178};

bool pf_windows_1252_decode(const char *bytes, size_t length, pf_buffer *out)
{
    for (size_t i = 0; i < length; i++) {
        unsigned code = (unsigned char)bytes[i];
        if (code >= 0x80 && code < 0xA0) code = windows_1252[code - 0x80];
        if (code == 0) return false;
        char encoded[3] = {(char)code};
        size_t size = 1;
        if (code >= 0x800) {
            encoded[0] = (char)(0xE0 | code >> 12);
            encoded[1] = (char)(0x80 | (code >> 6 & 0x3F));
            encoded[2] = (char)(0x80 | (code & 0x3F));
            size = 3;
        } else if (code >= 0x80) {
            encoded[0] = (char)(0xC0 | code >> 6);
            encoded[1] = (char)(0x80 | (code & 0x3F));
            size = 2;
        }
        pf_buffer_add(out, encoded, size);
    }
    return true;
}
