/* source.h: where the bytes of an input come from. */
#ifndef INTAKE_SOURCE_H
#define INTAKE_SOURCE_H

#include <passfet/error.h>
#include <passfet/problem.h>

/* A text in memory, or where bytes is NULL the file of that name; "-" is standard input. */
typedef struct pf_source {
    const char *name;
    const char *bytes;
    size_t length;
} pf_source;

/* Takes the next bytes; anything but PF_OK ends the reading and is returned. */
typedef pf_status pf_source_sink(void *context, const char *bytes, size_t length);

/* Hands the whole source over, piece by piece. PF_FILE, with a refusal that says why: it cannot be
** read. */
pf_status pf_source_read(const pf_source *source, pf_source_sink *sink, void *context,
                         pf_problems *problems) PF_MUST_USE;

#endif
