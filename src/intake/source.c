/* source.c: reading a file or standard input in pieces of 64 KiB. */
#include "intake/source.h"

#include <errno.h>
#include <fcntl.h>
#include <string.h>
#include <unistd.h>

static pf_status refuse(const char *name, pf_problems *problems)
{
    char reason[128] = "";
    int error = errno;
    if (strerror_r(error, reason, sizeof reason) != 0) strcpy(reason, "unknown cause");
    pf_place place = {.file = name};
    pf_status status = pf_problems_add(problems, PF_SEVERITY_REFUSAL, place,
                                       error == EISDIR ? "name the files in it" : NULL,
                                       "cannot be read: %s", reason);
    return status == PF_BAD_INPUT ? PF_FILE : status;
}

static pf_status pump(int file, const char *name, pf_source_sink *sink, void *context,
                      pf_problems *problems)
{
    char piece[65536];
    for (;;) {
        ssize_t got = read(file, piece, sizeof piece);
        if (got < 0 && errno == EINTR) continue;
        if (got < 0) return refuse(name, problems);
        if (got == 0) return PF_OK;
        pf_status status = sink(context, piece, (size_t)got);
        if (status != PF_OK) return status;
    }
}

pf_status pf_source_read(const pf_source *source, pf_source_sink *sink, void *context,
                         pf_problems *problems)
{
    if (source->bytes) return sink(context, source->bytes, source->length);
    if (strcmp(source->name, "-") == 0)
        return pump(STDIN_FILENO, source->name, sink, context, problems);
    int file = open(source->name, O_RDONLY | O_CLOEXEC);
    if (file < 0) return refuse(source->name, problems);
    pf_status status = pump(file, source->name, sink, context, problems);
    close(file);
    return status;
}
