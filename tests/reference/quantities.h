/* quantities.h: what a reference record can ask passfet for.
**
** A quantity takes the settings of its record (support/settings.h), laid over the bench's part and
** card, and returns one number in SI. Settings that no quantity and no rating knows end the run.
*/
#ifndef REFERENCE_QUANTITIES_H
#define REFERENCE_QUANTITIES_H

#include "support/settings.h"

typedef struct quantity {
    const char *name;
    double (*evaluate)(settings *inputs);
    const char *meaning; /* with the settings of its own */
} quantity;

/* NULL for an unknown name. */
const quantity *quantity_find(const char *name);

/* All of them; *count how many. */
const quantity *quantities(size_t *count);

#endif
