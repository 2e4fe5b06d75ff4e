/* store.h: the ratings database of a team: one SQLite file, with history.
**
** What a part states is never overwritten: every act on the database (an import, an undo, a merge,
** a review) is an entry of its log, numbered from 1; an import that changes a part gives the part a
** new revision, numbered per part from 1. docs/database.md describes the tables.
**
** The store reads no clock and asks nobody who is at the keyboard: author and time come in with
** every act, time as ISO 8601 in UTC, "2025-03-01T12:00:00Z".
**
** Statuses of all functions, beside those that each names: PF_BUSY when other processes kept the
** database locked for PF_STORE_WAIT_S; PF_FILE when the file cannot be opened at all; PF_DATABASE
** when it is damaged, foreign, of a newer layout, read-only, or the disk is full; PF_NO_MEMORY;
** PF_BAD_ARGUMENT for a call that makes no sense. The text in *error names the file. After a failed
** call the database is as it was before the act, or at the latest after pf_store_import_rollback.
** A pf_store must not be used by two threads at a time.
*/
#ifndef PASSFET_STORE_H
#define PASSFET_STORE_H

#include <passfet/change.h>
#include <passfet/error.h>
#include <passfet/part.h>
#include <stdbool.h>
#include <stdint.h>

/* How long a locked database is waited for, in seconds. */
#define PF_STORE_WAIT_S 30

typedef struct pf_store pf_store;

typedef enum pf_store_mode {
    PF_STORE_READ,   /* must exist; nothing is written but the recovery of a broken-off import */
    PF_STORE_WRITE,  /* must exist; an older layout is brought up to date */
    PF_STORE_CREATE, /* as WRITE; a new file is laid out where there is none or an empty one */
    PF_STORE_MEMORY  /* no file: empty, and gone when closed; the path is a name for messages */
} pf_store_mode;

/* Opens the database. *store is NULL on failure. PF_NOT_FOUND where there is no file and mode does
** not create one. */
pf_status pf_store_open(const char *path, pf_store_mode mode, pf_store **store,
                        pf_error *error) PF_MUST_USE;

/* Closes; an import that was not committed is taken back. NULL is allowed. */
void pf_store_close(pf_store *store);

/* What the user should know about where the database lies (a network file system, and the safe
** way); NULL for nothing. Borrowed from the store. */
const char *pf_store_warning(const pf_store *store);

/* Waits this long for locks instead of PF_STORE_WAIT_S. */
void pf_store_wait(pf_store *store, int milliseconds);

/* Lets the file grow to so many pages of 8 KiB and no further, as a full disk would. */
void pf_store_limit_pages(pf_store *store, int pages);

/* ---- reading ---- */

/* Several reads that belong together see one state of the database between these two. Writers have
** to wait meanwhile, so be quick. Several stores of one file that are between these two at the same
** time see the same state: so slices are read by threads, each with a store of its own. */
pf_status pf_store_read_begin(pf_store *store, pf_error *error) PF_MUST_USE;
void pf_store_read_end(pf_store *store);

typedef enum pf_review_state { PF_UNREVIEWED, PF_ACCEPTED, PF_QUESTIONED } pf_review_state;

/* "unreviewed", "accepted", "questioned". */
const char *pf_review_text(pf_review_state state);

/* Where the values of a stored part come from. */
typedef struct pf_revision_facts {
    int64_t part_id; /* of this database only */
    int64_t number;  /* revision of the part, from 1 */
    int64_t entry;   /* the act that made it: number of the import */
    const char *author;
    const char *time;
    pf_review_state review;
} pf_revision_facts;

/* One part as stored. part and facts point into memory that belongs to this struct and is used
** again by the next read into it: keep a part with pf_part_copy; never pf_part_clear it. */
typedef struct pf_stored_part {
    pf_part part;
    pf_revision_facts facts;
    char *memory;
    size_t room;
} pf_stored_part;

void pf_stored_part_init(pf_stored_part *stored);
void pf_stored_part_clear(pf_stored_part *stored);

/* Which parts; all zero: every part as it is now, by name and maker. */
typedef struct pf_query {
    const char
        *as_of; /* what was known at this time: a UTC time, or a date (the end of that day) */
    bool reviewed_only; /* only those whose revision a second person accepted */
    bool as_stored;     /* in the order in which they lie in the file, which is quickest to read */
    unsigned slice, slices; /* the slice-th of so many parts of about equal size; slices 0: all */
} pf_query;

typedef struct pf_cursor pf_cursor;

/* Reads parts one after the other. The store must stay open until the cursor is closed. */
pf_status pf_cursor_open(pf_store *store, const pf_query *query, pf_cursor **cursor,
                         pf_error *error) PF_MUST_USE;

/* The next part into *stored (initialised); *more is false behind the last one. Costs one step of
** SQLite and a copy; no parsing of curves. */
pf_status pf_cursor_next(pf_cursor *cursor, pf_stored_part *stored, bool *more,
                         pf_error *error) PF_MUST_USE;
void pf_cursor_close(pf_cursor *cursor);

/* One part by "name" or "maker/name". PF_NOT_FOUND; PF_BAD_INPUT, with the makers, where two share
** the name. as_of NULL: as it is now. */
pf_status pf_store_part_find(pf_store *store, const char *name, const char *as_of,
                             pf_stored_part *stored, pf_error *error) PF_MUST_USE;

/* Number of parts now. */
pf_status pf_store_count(pf_store *store, int64_t *parts, pf_error *error) PF_MUST_USE;

/* SHA-256 over what all parts state now, as hexadecimal digits: equal for databases that state the
** same, whatever their history. */
#define PF_HASH_ROOM 65
pf_status pf_store_content_hash(pf_store *store, char hash[PF_HASH_ROOM],
                                pf_error *error) PF_MUST_USE;

/* Name of the state of the database at as_of (NULL: now): number of the last log entry and the
** first digits of its hash, "17-3f9a2c1b"; "0" for a database without entries. */
#define PF_REVISION_NAME_ROOM 40
pf_status pf_store_revision_name(pf_store *store, const char *as_of,
                                 char name[PF_REVISION_NAME_ROOM], pf_error *error) PF_MUST_USE;

/* ---- importing ---- */

typedef struct pf_source_file {
    const char *name;   /* as the user named it */
    const char *sha256; /* 64 hexadecimal digits */
} pf_source_file;

typedef struct pf_import_facts {
    const char *author; /* required */
    const char *time;   /* required; recorded no earlier than the entry before */
    const char *why;    /* may be NULL */
    const char *key;    /* names content and options, e.g. a SHA-256; NULL: never a repeat */
    const pf_source_file *file;
    size_t file_count;
} pf_import_facts;

typedef enum pf_import_effect {
    PF_EFFECT_NEW,
    PF_EFFECT_CHANGED,
    PF_EFFECT_UNCHANGED
} pf_import_effect;

/* Begins an import: one transaction, in which nothing is visible to others until the commit. Read
** the files before, since other writers wait. *already is 0, or the number of the import that had
** this key and was not undone: then no import was begun. */
pf_status pf_store_import_begin(pf_store *store, const pf_import_facts *facts, int64_t *already,
                                pf_error *error) PF_MUST_USE;

/* What the part will state once the change is applied, without storing it: *merged (initialised)
** and the effect. PF_NOT_FOUND for curves of a part that is not there; PF_BAD_INPUT where the name
** alone fits parts of two makers (their names in the text), where a new part lacks polarity,
** vds_max or tj_max, or where a value is outside what the database accepts; all with one sentence
** that does not name the file, for the caller knows the line. The import can go on after these. */
pf_status pf_store_import_merge(pf_store *store, const pf_part_change *change, pf_part *merged,
                                pf_import_effect *effect, pf_error *error) PF_MUST_USE;

/* The same, and stores it. */
pf_status pf_store_import_part(pf_store *store, const pf_part_change *change, pf_part *merged,
                               pf_import_effect *effect, pf_error *error) PF_MUST_USE;

/* Makes the import lasting; *number is the one to show to the user. On failure it is taken back. */
pf_status pf_store_import_commit(pf_store *store, int64_t *number, pf_error *error) PF_MUST_USE;
void pf_store_import_rollback(pf_store *store);

/* ---- taking back, exchanging ---- */

/* Takes one import (or undo, or merge) back as a new entry: every part that it changed gets a new
** revision that states what the part stated before; a part that it brought in is withdrawn, its
** history stays. PF_NOT_FOUND for an entry that is not there, PF_BAD_INPUT for a review, for one that
** is undone already, and where a later import changed one of its parts (undo that one first). */
pf_status pf_store_undo(pf_store *store, int64_t entry, const pf_import_facts *facts,
                        int64_t *number, pf_error *error) PF_MUST_USE;

typedef enum pf_prefer {
    PF_PREFER_NONE,
    PF_PREFER_OURS,
    PF_PREFER_THEIRS,
    PF_PREFER_NEWER
} pf_prefer;

typedef struct pf_merge_summary {
    size_t added;     /* parts that were not here */
    size_t unchanged; /* both state the same */
    size_t forward;   /* theirs goes on from what was here: taken */
    size_t ahead;     /* ours goes on from what is there: kept */
    size_t conflicts; /* changed on both sides, */
    size_t taken;     /* of which theirs was taken */
} pf_merge_summary;

/* One part that both sides changed; take says whether theirs will be taken. */
typedef pf_status pf_conflict_visitor(void *context, const pf_stored_part *ours,
                                      const pf_stored_part *theirs, bool take, pf_error *error);

/* Takes the parts of another database as one entry. Part by part, history decides: where one side's
** newest state is an older state of the other, the other goes on from it and there is no conflict.
** True conflicts are shown to visit (may be NULL). With PF_PREFER_NONE any conflict is PF_BAD_INPUT
** after all were shown, and nothing is stored. NEWER: the later revision, ours on a tie. *already as
** in pf_store_import_begin. */
pf_status pf_store_merge(pf_store *store, pf_store *other, const pf_import_facts *facts,
                         pf_prefer prefer, pf_conflict_visitor *visit, void *context,
                         pf_merge_summary *summary, int64_t *already, int64_t *number,
                         pf_error *error) PF_MUST_USE;

/* ---- history and review ---- */

typedef struct pf_review_facts {
    const char *author, *time, *why;
    bool accept; /* false: questioned */
    int64_t entry;
} pf_review_facts;

/* One revision of a part, for a visitor; everything is borrowed until it returns. */
typedef struct pf_history_step {
    const pf_stored_part *now;
    const pf_stored_part *before; /* NULL for the first revision and behind a withdrawal */
    bool withdrawn;               /* an undo took the part out */
    const char *kind;             /* of the entry: "import", "undo", "merge" */
    const char *why;              /* NULL where not said */
    const char *files;            /* names and SHA-256, "; " between; NULL for none */
    const pf_review_facts *review;
    size_t review_count;
} pf_history_step;

typedef pf_status pf_history_visitor(void *context, const pf_history_step *step, pf_error *error);

/* All revisions of a part ("name" or "maker/name"; also one that is withdrawn), oldest first. A
** status other than PF_OK from the visitor ends the walk and is returned. */
pf_status pf_store_history(pf_store *store, const char *name, pf_history_visitor *visit,
                           void *context, pf_error *error) PF_MUST_USE;

/* What differs between two parts, field by field and curve by curve: texts for people, with units.
** before or after is "" where not stated. */
typedef void pf_difference_visitor(void *context, const char *what, const char *before,
                                   const char *after);
void pf_part_differences(const pf_part *before, const pf_part *after, pf_difference_visitor *visit,
                         void *context);

/* Accepts or questions the newest revision of a part, as an entry of its own. Who made one of the
** revisions since the last accepted one cannot accept: PF_BAD_INPUT. Letter case and blanks around a
** name do not make a second person. facts->entry receives the number. */
pf_status pf_store_review(pf_store *store, const char *name, pf_review_facts *facts,
                          pf_error *error) PF_MUST_USE;

/* ---- backup and health ---- */

/* A consistent copy into a new file, while others work, verified after writing. PF_FILE where the
** file exists or cannot be written; nothing is left behind then. */
pf_status pf_store_backup(pf_store *store, const char *path, pf_error *error) PF_MUST_USE;

/* Checks everything: SQLite's structure, references, every row, packed curves against JSON, hashes
** of all states and the chain over the log. Each finding is a sentence; *findings counts them. */
typedef void pf_finding_visitor(void *context, const char *sentence);
pf_status pf_store_verify(pf_store *store, pf_finding_visitor *visit, void *context,
                          size_t *findings, pf_error *error) PF_MUST_USE;

#endif
