/* encoding.h: what bytes a text file is made of. */
#ifndef INTAKE_ENCODING_H
#define INTAKE_ENCODING_H

#include "base/buffer.h"

#include <passfet/error.h>
#include <stdbool.h>
#include <stddef.h>

typedef enum pf_encoding { PF_UTF_8, PF_WINDOWS_1252 } pf_encoding;

/* NULL, "utf-8", "utf8", "windows-1252" or "cp1252" in either case; else PF_BAD_ARGUMENT. */
pf_status pf_encoding_read(const char *name, pf_encoding *encoding);

/* True when the bytes are all from 0x01 to 0x7F: nothing to check. */
bool pf_bytes_plain(const char *bytes, size_t length);

/* How many bytes of the start are UTF-8 without NUL; length when all are. */
size_t pf_utf8_valid(const char *bytes, size_t length);

/* What bytes that are not UTF-8 look like, in words: "UTF-16", "Windows-1252", …; *right gets what
** to do about it. Static storage. */
const char *pf_encoding_guess(const char *bytes, size_t length, const char **right);

/* Appends Windows-1252 bytes as UTF-8. False at a byte that Windows-1252 does not have, or NUL. */
bool pf_windows_1252_decode(const char *bytes, size_t length, pf_buffer *out);

#endif
