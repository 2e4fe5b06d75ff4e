/* memory.c: allocation with checked sizes. */
#include "base/memory.h"

#include <stdint.h>
#include <stdlib.h>
#include <string.h>

void *pf_allocate(size_t count, size_t size)
{
    return calloc(count ? count : 1, size ? size : 1);
}

pf_status pf_grow(void **items, size_t *capacity, size_t needed, size_t size)
{
    if (needed <= *capacity) return PF_OK;
    size_t room = *capacity < 8 ? 8 : *capacity;
    while (room < needed)
        room = room > SIZE_MAX / 2 ? needed : room * 2;
    if (room > SIZE_MAX / size) return PF_NO_MEMORY;
    void *grown = realloc(*items, room * size);
    if (!grown) return PF_NO_MEMORY;
    *items = grown;
    *capacity = room;
    return PF_OK;
}

pf_status pf_text_copy_n(char **out, const char *text, size_t length)
{
    char *copy = pf_allocate(length + 1, 1);
    if (!copy) return PF_NO_MEMORY;
    memcpy(copy, text, length);
    *out = copy;
    return PF_OK;
}

pf_status pf_text_copy(char **out, const char *text)
{
    *out = NULL;
    return text ? pf_text_copy_n(out, text, strlen(text)) : PF_OK;
}

void *pf_reallocate(void *memory, size_t size)
{
    return realloc(memory, size ? size : 1);
}

void pf_free(void *memory)
{
    free(memory);
}
