/* memory.h: allocation with checked sizes. Everything that passfet allocates goes through here. */
#ifndef BASE_MEMORY_H
#define BASE_MEMORY_H

#include <passfet/error.h>
#include <stddef.h>

/* Zeroed memory for count items of size bytes, or NULL; count 0 gives a block that may be freed. */
void *pf_allocate(size_t count, size_t size) PF_MUST_USE;

/* Grows *items (of size bytes each, *capacity of them) so that at least needed fit, at least
** doubling. PF_NO_MEMORY leaves *items and *capacity as they were. */
pf_status pf_grow(void **items, size_t *capacity, size_t needed, size_t size) PF_MUST_USE;

/* A copy of a string or NULL for NULL; *out owns it. */
pf_status pf_text_copy(char **out, const char *text) PF_MUST_USE;

/* The same of the first length bytes. */
pf_status pf_text_copy_n(char **out, const char *text, size_t length) PF_MUST_USE;

/* Makes a block (NULL: a new one) size bytes long; NULL leaves it as it was. */
void *pf_reallocate(void *memory, size_t size) PF_MUST_USE;

void pf_free(void *memory);

#endif
