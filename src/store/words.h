/* words.h: little-endian 8-byte words in a row, the same on every machine. */
#ifndef STORE_WORDS_H
#define STORE_WORDS_H

#include "base/buffer.h"

#include <stdint.h>
#include <string.h>

typedef struct pf_words {
    const unsigned char *at;
    size_t left;
} pf_words;

static inline uint64_t pf_word_turn(uint64_t word)
{
#if __BYTE_ORDER__ == __ORDER_BIG_ENDIAN__
    return __builtin_bswap64(word);
#else
    return word;
#endif
}

static inline size_t pf_words_left(const pf_words *words)
{
    return words->left;
}

/* The caller has looked at pf_words_left. */
static inline uint64_t pf_words_next(pf_words *words)
{
    uint64_t word;
    memcpy(&word, words->at, 8);
    words->at += 8;
    words->left--;
    return pf_word_turn(word);
}

static inline double pf_words_double(pf_words *words)
{
    uint64_t word = pf_words_next(words);
    double value;
    memcpy(&value, &word, 8);
    return value;
}

static inline void pf_words_pair(pf_words *words, uint32_t *first, uint32_t *second)
{
    uint64_t word = pf_words_next(words);
    *first = (uint32_t)word;
    *second = (uint32_t)(word >> 32);
}

static inline void pf_words_add(pf_buffer *to, uint64_t word)
{
    word = pf_word_turn(word);
    pf_buffer_add(to, (const char *)&word, 8);
}

static inline void pf_words_add_double(pf_buffer *to, double value)
{
    uint64_t word;
    memcpy(&word, &value, 8);
    pf_words_add(to, word);
}

static inline void pf_words_add_pair(pf_buffer *to, uint32_t first, uint32_t second)
{
    pf_words_add(to, (uint64_t)second << 32 | first);
}

#endif
