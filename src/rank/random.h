/* random.h: PCG32 (XSH-RR 64/32), after O'Neill 2014. Integer arithmetic alone: the same everywhere. */
#ifndef RANK_RANDOM_H
#define RANK_RANDOM_H

#include <stdint.h>

typedef struct pf_random {
    uint64_t state, step; /* step is odd: which of 2^63 sequences */
} pf_random;

void pf_random_init(pf_random *random, uint64_t seed, uint64_t sequence);

uint32_t pf_random_word(pf_random *random);

/* [0, 1), a multiple of 2^-53: 27 bits of one word above 26 of the next. */
double pf_random_share(pf_random *random);

#endif
