/* digest.h: SHA-256 over what a part states.
**
** The hash covers every text, rating and curve that is stated, each with its name and in the order
** of the names: a rating that is new in fields.def, or a line that moves there, changes no hash of
** a part that does not state it.
*/
#ifndef STORE_DIGEST_H
#define STORE_DIGEST_H

#include "store/database.h"

#include <sys/types.h>

#include <sha2.h>

/* Sorts the fields by name, once per store. */
void pf_field_order_make(pf_field_order *order);

/* The digest of a state: its part, its packed curves (length 0: none), whether it is withdrawn.
** scratch is emptied first. PF_NO_MEMORY. */
pf_status pf_state_digest(const pf_field_order *order, const pf_part *part, bool withdrawn,
                          const void *packed, size_t length, pf_buffer *scratch,
                          unsigned char digest[PF_DIGEST_BYTES]) PF_MUST_USE;

/* Adds a text and its closing NUL; NULL adds the byte 1. */
void pf_digest_text(SHA2_CTX *sha, const char *text);
void pf_digest_number(SHA2_CTX *sha, uint64_t number);

void pf_digest_hex(const unsigned char digest[PF_DIGEST_BYTES], char hex[PF_HASH_ROOM]);

#endif
