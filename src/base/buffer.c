/* buffer.c: growable text with a hard maximum. */
#include "base/buffer.h"
#include "base/memory.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

void pf_buffer_init(pf_buffer *buffer, size_t maximum)
{
    *buffer = (pf_buffer){.maximum = maximum};
}

void pf_buffer_clear(pf_buffer *buffer)
{
    pf_free(buffer->text);
    pf_buffer_init(buffer, buffer->maximum);
}

void pf_buffer_reset(pf_buffer *buffer)
{
    buffer->length = 0;
    buffer->status = PF_OK;
    if (buffer->text) buffer->text[0] = '\0';
}

/* Makes room for length more bytes and the NUL. */
static bool reserve(pf_buffer *buffer, size_t length)
{
    if (buffer->status != PF_OK) return false;
    if (length > buffer->maximum - buffer->length) {
        buffer->status = PF_LIMIT;
        return false;
    }
    buffer->status =
        pf_grow((void **)&buffer->text, &buffer->capacity, buffer->length + length + 1, 1);
    return buffer->status == PF_OK;
}

void pf_buffer_add(pf_buffer *buffer, const char *bytes, size_t length)
{
    if (!reserve(buffer, length)) return;
    if (length) memcpy(buffer->text + buffer->length, bytes, length);
    buffer->length += length;
    buffer->text[buffer->length] = '\0';
}

void pf_buffer_text(pf_buffer *buffer, const char *text)
{
    pf_buffer_add(buffer, text, strlen(text));
}

void pf_buffer_print(pf_buffer *buffer, const char *format, ...)
{
    va_list arguments, again;
    va_start(arguments, format);
    va_copy(again, arguments);
    int length = vsnprintf(NULL, 0, format, arguments);
    va_end(arguments);
    if (length >= 0 && reserve(buffer, (size_t)length)) {
        vsnprintf(buffer->text + buffer->length, (size_t)length + 1, format, again);
        buffer->length += (size_t)length;
    }
    va_end(again);
}

const char *pf_buffer_string(const pf_buffer *buffer)
{
    return buffer->text ? buffer->text : "";
}

pf_status pf_buffer_status(const pf_buffer *buffer)
{
    return buffer->status;
}
