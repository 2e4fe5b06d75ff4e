/* error.c: statuses and the caller-owned error text. */
#include <passfet/error.h>

#include <stdarg.h>
#include <stdio.h>

const char *pf_status_text(pf_status status)
{
    static const char *const text[] = {
#define PF_STATUS_TEXT(code, words) words,
        PF_STATUS_LIST(PF_STATUS_TEXT)
#undef PF_STATUS_TEXT
    };
    return (unsigned)status < PF_STATUS_COUNT ? text[status] : "unknown status";
}

void pf_error_clear(pf_error *error)
{
    if (!error) return;
    error->status = PF_OK;
    error->text[0] = '\0';
}

pf_status pf_error_set(pf_error *error, pf_status status, const char *format, ...)
{
    if (!error || error->status != PF_OK) return status;
    error->status = status;
    va_list arguments;
    va_start(arguments, format);
    vsnprintf(error->text, sizeof error->text, format, arguments);
    va_end(arguments);
    return status;
}
