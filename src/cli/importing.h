/* importing.h: one run of import: files read, merged with the database, judged, stored or refused. */
#ifndef CLI_IMPORTING_H
#define CLI_IMPORTING_H

#include "cli/cli.h"

#include <passfet/intake.h>
#include <sys/types.h>

#include <sha2.h>

typedef struct pf_import_run {
    const pf_cli *cli;
    pf_intake_options options;
    bool dry;
    pf_changes changes;
    pf_intake_summary summary;
    pf_problems problems;
    pf_source_file *source; /* name borrowed, sha256 owned */
    size_t source_count, source_room;
    SHA2_CTX sha; /* of the file being read */
    FILE *bad_rows;
    const char *bad_file;    /* its name */
    size_t effect[3];        /* parts, by pf_import_effect */
    int64_t number, already; /* of this import; of the one that had the same content before */
    size_t moved;            /* parts of the latter that state something else by now */
    bool stored;
    bool progress_shown;
} pf_import_run;

/* options and dry are set. keep_good: file for bad rows, NULL for none. Returns an exit status. */
int pf_import_run_start(pf_import_run *run, const char *keep_good);

/* Reads one file into the run. */
pf_status pf_import_run_read(pf_import_run *run, const char *path);

/* SHA-256 over the contents read and the options that change what they mean. */
void pf_import_run_key(const pf_import_run *run, char key[PF_HASH_ROOM]);

/* Merges, judges and stores every part; all or nothing (with keep_good: all good parts). PF_BAD_INPUT
** with refusals among the run's problems: nothing was stored. */
pf_status pf_import_run_store(pf_import_run *run, pf_store *store, const pf_import_facts *facts,
                              pf_error *error);

/* What was done, on the command's output. */
void pf_import_run_summary(const pf_import_run *run, const char *database);

/* Frees all; returns an exit status, not 0 where the bad rows could not be written. */
int pf_import_run_end(pf_import_run *run);

#endif
