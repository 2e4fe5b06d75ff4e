/* registry.h: which change of a run belongs to a part number and maker. */
#ifndef INTAKE_REGISTRY_H
#define INTAKE_REGISTRY_H

#include "intake/text.h"

#include <passfet/change.h>
#include <stdint.h>

/* Open addressing over part numbers; makers of one number are few and are walked. */
typedef struct pf_registry {
    uint32_t *slot; /* index into the changes plus 1; 0 is free */
    size_t slots;   /* a power of two */
    size_t used;
} pf_registry;

/* Enters all changes of a run so far. O(n). */
pf_status pf_registry_init(pf_registry *registry, const pf_changes *changes) PF_MUST_USE;
void pf_registry_clear(pf_registry *registry);

/* The change of a part, made when there is none. maker empty: the file does not say; then the one
** change with that part number, whoever makes it. A maker settles a change that had none.
** PF_NOT_FOUND: two makers share the number and none is named. */
pf_status pf_registry_find(pf_registry *registry, pf_changes *changes, pf_slice name,
                           pf_slice maker, size_t *index) PF_MUST_USE;

#endif
