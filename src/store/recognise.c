/* recognise.c: telling from the first 100 bytes whether a file is a passfet database.
**
** The header of an SQLite file: https://www.sqlite.org/fileformat.html section 1.3.
*/
#include "store/layout.h"
#include "store/page_check.h"

#include <errno.h>
#include <stdint.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>

#define HEADER_BYTES 100

static uint32_t big_endian(const unsigned char *bytes)
{
    return (uint32_t)bytes[0] << 24 | (uint32_t)bytes[1] << 16 | (uint32_t)bytes[2] << 8 | bytes[3];
}

static pf_status judge(const char *path, const unsigned char *header, size_t length,
                       pf_error *error)
{
    static const char magic[] = "SQLite format 3";
    if (length == 0) return PF_OK;
    if (length < HEADER_BYTES || memcmp(header, magic, sizeof magic) != 0)
        return pf_error_set(error, PF_DATABASE, "%s is not a passfet database", path);
    if (big_endian(header + 68) != PF_APPLICATION_ID)
        return pf_error_set(error, PF_DATABASE,
                            "%s is a database of another program, not of passfet", path);
    if (big_endian(header + 60) > PF_LAYOUT)
        return pf_error_set(error, PF_DATABASE,
                            "%s was written by a newer passfet (layout %u, this one knows %d)",
                            path, (unsigned)big_endian(header + 60), PF_LAYOUT);
    bool pages =
        header[16] << 8 == PF_PAGE_BYTES && header[17] == 0 && header[20] == PF_CHECK_BYTES;
    if (!pages || header[18] != 1 || header[19] != 1)
        return pf_error_set(error, PF_DATABASE,
                            "%s is damaged: its header is not one that passfet writes; go back to "
                            "a backup",
                            path);
    return PF_OK;
}

pf_status pf_layout_recognise(const char *path, pf_error *error)
{
    struct stat facts;
    unsigned char header[HEADER_BYTES];
    if (stat(path, &facts) != 0 && errno == ENOENT)
        return pf_error_set(error, PF_NOT_FOUND, "%s: there is no such database", path);
    FILE *file = fopen(path, "rb");
    if (!file) return pf_error_set(error, PF_FILE, "%s: %s", path, strerror(errno));
    if (fstat(fileno(file), &facts) != 0 || !S_ISREG(facts.st_mode)) {
        fclose(file);
        return pf_error_set(error, PF_FILE, "%s is no ordinary file", path);
    }
    errno = 0;
    size_t length = fread(header, 1, sizeof header, file);
    bool failed = ferror(file) != 0;
    int cause = errno;
    fclose(file);
    if (failed) return pf_error_set(error, PF_FILE, "%s: %s", path, strerror(cause));
    return judge(path, header, length, error);
}
