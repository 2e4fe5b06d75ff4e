/* buffer.h: growable text with a hard maximum.
**
** A buffer remembers the first thing that went wrong (no memory, over its maximum) and then ignores
** what is appended; pf_buffer_status says so at the end, so that writers need not check every call.
*/
#ifndef BASE_BUFFER_H
#define BASE_BUFFER_H

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

typedef struct pf_buffer {
    char *text; /* always ends in NUL once something was appended; NULL before */
    size_t length, capacity, maximum;
    pf_status status;
} pf_buffer;

/* maximum: bytes that the text may grow to, the closing NUL not counted. */
void pf_buffer_init(pf_buffer *buffer, size_t maximum);
void pf_buffer_clear(pf_buffer *buffer); /* frees; the buffer can be used again */
void pf_buffer_reset(pf_buffer *buffer); /* empties, keeps the memory, forgets a failure */

void pf_buffer_add(pf_buffer *buffer, const char *bytes, size_t length);
void pf_buffer_text(pf_buffer *buffer, const char *text);
void pf_buffer_print(pf_buffer *buffer, const char *format, ...) PF_PRINTF(2, 3);

/* The text so far, never NULL. Borrowed; good until the buffer changes. */
const char *pf_buffer_string(const pf_buffer *buffer);
pf_status pf_buffer_status(const pf_buffer *buffer) PF_MUST_USE;

#endif
