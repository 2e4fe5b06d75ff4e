/* name.c: names for the state of the whole database. */
#include "store/digest.h"
#include "store/log.h"

#include <stdio.h>

pf_status pf_store_content_hash(pf_store *store, char hash[PF_HASH_ROOM], pf_error *error)
{
    unsigned char digest[PF_DIGEST_BYTES];
    sqlite3_stmt *statement;
    SHA2_CTX sha;
    bool row;
    SHA256Init(&sha);
    pf_status status = pf_store_prepare(store,
                                        "SELECT content FROM part WHERE withdrawn = 0 "
                                        "ORDER BY name, ifnull(maker, '')",
                                        &statement, error);
    if (status != PF_OK) return status;
    while ((status = pf_store_step(store, statement, &row, error)) == PF_OK && row)
        SHA256Update(&sha, sqlite3_column_blob(statement, 0),
                     (size_t)sqlite3_column_bytes(statement, 0));
    sqlite3_finalize(statement);
    SHA256Final(digest, &sha);
    pf_digest_hex(digest, hash);
    return status;
}

pf_status pf_store_revision_name(pf_store *store, const char *as_of,
                                 char name[PF_REVISION_NAME_ROOM], pf_error *error)
{
    char time[24], hex[PF_HASH_ROOM];
    pf_log_head head;
    pf_status status = as_of ? pf_log_time(as_of, time, error) : PF_OK;
    if (status == PF_OK) status = pf_log_head_read(store, as_of ? time : NULL, &head, error);
    if (status != PF_OK) return status;
    pf_digest_hex(head.hash, hex);
    if (head.id)
        snprintf(name, PF_REVISION_NAME_ROOM, "%lld-%.8s", (long long)head.id, hex);
    else
        snprintf(name, PF_REVISION_NAME_ROOM, "0");
    return PF_OK;
}
