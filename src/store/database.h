/* database.h: the open database as the files of this layer share it. */
#ifndef STORE_DATABASE_H
#define STORE_DATABASE_H

#include "base/buffer.h"

#include <passfet/store.h>
#include <sqlite3.h>

#define PF_APPLICATION_ID 0x50465431 /* "PFT1" */
#define PF_LAYOUT 1                  /* user_version */
#define PF_PAGE_BYTES 8192
#define PF_DIGEST_BYTES 32
#define PF_SQL_MAX ((size_t)1 << 20)

/* Statements that are prepared once and kept; their texts are in statements.c. */
typedef enum pf_statement {
    PF_SQL_LAST_ENTRY,
    PF_SQL_ENTRY_AT,
    PF_SQL_ENTRY_BY_KEY,
    PF_SQL_UNDO_OF,
    PF_SQL_ADD_ENTRY,
    PF_SQL_ADD_SOURCE,
    PF_SQL_SET_HASH,
    PF_SQL_READ_HASH,
    PF_SQL_READ_ENTRY,
    PF_SQL_READ_SOURCES,
    PF_SQL_READ_REVIEW,
    PF_SQL_PARTS_NAMED,
    PF_SQL_LOAD,
    PF_SQL_ADD_PART,
    PF_SQL_SET_PART,
    PF_SQL_ARCHIVE,
    PF_SQL_ADD_CURVE,
    PF_SQL_ADD_CURVE_JSON,
    PF_SQL_STATES_OF,
    PF_SQL_CHANGED_SINCE,
    PF_SQL_LOAD_PAST,
    PF_SQL_ALL_STATES,
    PF_SQL_KNEW,
    PF_SQL_PART_OF_MAKER,
    PF_SQL_UNSEEN_AUTHORS,
    PF_SQL_ADD_REVIEW,
    PF_SQL_REVIEWS_OF,
    PF_SQL_ENTRY_WORDS,
    PF_SQL_READ_JSON,
    PF_SQL_COUNT
} pf_statement;

/* One state that an import wrote: what the hash of its entry covers. */
typedef struct pf_written {
    int64_t part, number;
    unsigned char content[PF_DIGEST_BYTES];
} pf_written;

typedef struct pf_import {
    bool open, broken; /* broken: a statement failed half-way, only rollback is left */
    int64_t entry;
    char *why;
    pf_written *written;
    size_t count, capacity;
} pf_import;

/* Most texts and most ratings that fields.def may hold (pf_part_change has one bit for each). */
#define PF_FIELDS_MAX 64

/* Indices into pf_text_fields and pf_rating_fields, by name. */
typedef struct pf_field_order {
    unsigned char text[PF_FIELDS_MAX], rating[PF_FIELDS_MAX];
    size_t texts, ratings;
} pf_field_order;

struct pf_store {
    sqlite3 *db;
    sqlite3_vfs *vfs; /* ours, with checksums of pages */
    char *path;       /* as the user named it, for messages */
    int wait_ms;
    int64_t waiting_since_ms; /* of the lock at hand */
    const char *warning;
    sqlite3_stmt *statement[PF_SQL_COUNT];
    pf_field_order order;
    /* 1 where an older database lacks the column */
    unsigned char text_missing[PF_FIELDS_MAX], rating_missing[PF_FIELDS_MAX];
    pf_import import;
    pf_stored_part current; /* what the part at hand states before a change */
    pf_buffer packed, json; /* the curves at hand in both forms */
    pf_buffer scratch;
};

/* Sets *error from the last failure of SQLite on this store, mapped to a status and a sentence. */
pf_status pf_store_fail(pf_store *store, int code, pf_error *error);

/* PF_NO_MEMORY with its words. */
pf_status pf_store_no_memory(pf_store *store, pf_error *error);

/* PF_DATABASE: a row says what cannot be; what completes "FILE is damaged: …". */
pf_status pf_store_damaged(pf_store *store, pf_error *error, const char *what);

/* Runs SQL that gives no rows. */
pf_status pf_store_run(pf_store *store, const char *sql, pf_error *error) PF_MUST_USE;

/* Waits for locks of this connection up to store->wait_ms. */
void pf_store_queue(pf_store *store);

/* A kept statement, reset. Bind all its parameters, texts as SQLITE_STATIC: copying one could fail for
** lack of memory, and what is not bound is NULL, which finds nothing. */
pf_status pf_store_statement(pf_store *store, pf_statement which, sqlite3_stmt **statement,
                             pf_error *error) PF_MUST_USE;

/* A fresh statement; the caller finalizes it. */
pf_status pf_store_prepare(pf_store *store, const char *sql, sqlite3_stmt **statement,
                           pf_error *error) PF_MUST_USE;

/* One step: *row says whether there is a row. At the end and on failure the statement is reset. */
pf_status pf_store_step(pf_store *store, sqlite3_stmt *statement, bool *row,
                        pf_error *error) PF_MUST_USE;

/* Steps a statement that gives no rows. */
pf_status pf_store_do(pf_store *store, sqlite3_stmt *statement, pf_error *error) PF_MUST_USE;

/* First column of the first row of a query as a number; `otherwise` where there is none. */
pf_status pf_store_number(pf_store *store, const char *sql, int64_t otherwise, int64_t *number,
                          pf_error *error) PF_MUST_USE;

#endif
