/* packed.h: the curves of a part as one run of little-endian 8-byte words, read without parsing.
**
**   word 0            format 1, then the number of SOA lines (two 32-bit numbers)
**   each SOA line     case_degC, pulse_s (infinity: the DC line), number of points n (64 bit),
**                     n times vds_V, id_A
**   each of 2 paths   form (0 not stated, 1 points, 2 Foster pairs), count (two 32-bit numbers),
**                     count times time_s, zth_KpW or r_KpW, tau_s
** Paths: junction to case, then junction to ambient. A part without any curve has no packed form.
*/
#ifndef STORE_PACKED_H
#define STORE_PACKED_H

#include "base/buffer.h"

#include <passfet/part.h>
#include <stdbool.h>

/* How many items an unpacked part needs room for. */
typedef struct pf_packed_counts {
    size_t soa;
    size_t point[PF_PATH_COUNT], pair[PF_PATH_COUNT];
} pf_packed_counts;

bool pf_part_has_curves(const pf_part *part);

/* What is wrong with the curves of a part, as a sentence; NULL for nothing: all numbers finite and
** positive, the pulse width of a DC line infinite. */
const char *pf_curves_judge(const pf_part *part);

/* Whether the curves of two parts are the same, bit for bit. */
bool pf_curves_equal(const pf_part *left, const pf_part *right);

/* Appends the packed form; failures are the buffer's. */
void pf_curves_pack(const pf_part *part, pf_buffer *packed);

/* Counts and checks a packed form (length 0: no curves). False where it is not one. */
bool pf_packed_count(const unsigned char *packed, size_t length, pf_packed_counts *counts);

/* Fills the arrays of *part, which have the room that pf_packed_count asked for. */
void pf_curves_unpack(const unsigned char *packed, size_t length, pf_part *part);

#endif
