/* random_case.h: parts and profiles from a seed: the same on every machine.
**
** Parts are invented from a plausible die: Zth that first grows with the square root of time and
** levels off, an SOA at that Zth's limit with hot-spot knees at high voltage, a DC line, Rds(on)
** flanks. Nothing of them is read from a data sheet.
*/
#ifndef SUPPORT_RANDOM_CASE_H
#define SUPPORT_RANDOM_CASE_H

#include <passfet/part.h>
#include <passfet/profile.h>
#include <stdint.h>

/* splitmix64, Steele, Lea, Flood 2014 (from memory). */
typedef struct random_source {
    uint64_t state;
} random_source;

uint64_t random_word(random_source *source);
double random_between(random_source *source, double low, double high);
double random_log_between(random_source *source, double low, double high);
int random_below(random_source *source, int count);

/* A part whose ratings are all stated; V_DS,max from vds_max_V up to twice that. */
void random_part(random_source *source, double vds_max_V, pf_part *part);

/* A card of the control that starts, with intervals around its values where spread > 0, not yet
** finished. Its start takes from 50 us to some 100 ms. */
void random_profile(random_source *source, pf_start_control control, double spread,
                    pf_profile *profile);

#endif
