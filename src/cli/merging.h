/* merging.h: import of another passfet database. */
#ifndef CLI_MERGING_H
#define CLI_MERGING_H

#include "cli/cli.h"

/* Whether a file begins as an SQLite database does. */
bool pf_is_database(const char *path);

/* Takes the parts of the database that is the only operand; shows every part that both sides changed.
** Returns an exit status. */
int pf_merge_database(const pf_cli *cli, const pf_arguments *arguments);

#endif
