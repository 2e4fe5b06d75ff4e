/* random.c: PCG32. */
#include "rank/random.h"

#define MULTIPLIER 6364136223846793005u

uint32_t pf_random_word(pf_random *random)
{
    uint64_t old = random->state;
    random->state = old * MULTIPLIER + random->step;
    uint32_t shifted = (uint32_t)(((old >> 18) ^ old) >> 27), turn = (uint32_t)(old >> 59);
    return shifted >> turn | shifted << (-turn & 31);
}

void pf_random_init(pf_random *random, uint64_t seed, uint64_t sequence)
{
    *random = (pf_random){0, sequence << 1 | 1};
    pf_random_word(random);
    random->state += seed;
    pf_random_word(random);
}

double pf_random_share(pf_random *random)
{
    uint64_t high = pf_random_word(random) >> 5, low = pf_random_word(random) >> 6;
    return (double)(high << 26 | low) * 0x1p-53;
}
