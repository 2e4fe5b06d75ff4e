/* fresh_file.h: files that appear under their name only once they are whole. */
#ifndef CLI_FRESH_FILE_H
#define CLI_FRESH_FILE_H

#include "cli/cli.h"

#define PF_PATH_ROOM 4096

typedef struct pf_fresh_file {
    FILE *file; /* NULL: not open */
    char path[PF_PATH_ROOM];
    char fresh[PF_PATH_ROOM + 8]; /* what it is called while it is written */
} pf_fresh_file;

/* Opens it for writing. Returns an exit status; what is wrong is said on err. */
int pf_fresh_open(const pf_cli *cli, pf_fresh_file *file, const char *path);

/* Closes it, if open; false where some write failed. It still has no name. */
bool pf_fresh_close(pf_fresh_file *file);

/* A closed file gets its name (keep), or goes away. Returns an exit status. */
int pf_fresh_settle(const pf_cli *cli, const pf_fresh_file *file, bool keep);

/* Says why the last call of the system failed for a path; returns PF_EXIT_SYSTEM. */
int pf_fail_path(const pf_cli *cli, const char *path);

#endif
