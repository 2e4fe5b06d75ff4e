/* cli.h: commands as table entries: a name, its options, and a function that can be tested.
**
** Results go to out, everything else to err. A command returns the exit status of the process.
*/
#ifndef CLI_CLI_H
#define CLI_CLI_H

#include <passfet/error.h>
#include <passfet/problem.h>
#include <passfet/store.h>
#include <stdbool.h>
#include <stdio.h>

/* Exit statuses, as documented in the manual. */
enum {
    PF_EXIT_DONE = 0,
    PF_EXIT_NO = 1, /* done, and the answer is no */
    PF_EXIT_USAGE = 2,
    PF_EXIT_INPUT = 3,  /* bad input data */
    PF_EXIT_SYSTEM = 4, /* the database or the file system failed or refused */
    PF_EXIT_BUSY = 5    /* the database stayed busy: try again */
};

typedef struct pf_option {
    const char *name;     /* without the dashes; NULL ends a list */
    const char *argument; /* what it takes, "FILE"; NULL: nothing */
    const char *meaning;
} pf_option;

#define PF_OPTIONS_MAX 40

/* Options that several commands take. PF_HELP_OPTION ends every list. */
#define PF_BY_OPTION                                                                               \
    {                                                                                              \
        "by", "NAME", "who does it; else the login name"                                           \
    }
#define PF_WHY_OPTION                                                                              \
    {                                                                                              \
        "why", "TEXT", "why, for the history"                                                      \
    }
#define PF_HELP_OPTION                                                                             \
    {"help", NULL, "this text"},                                                                   \
    {                                                                                              \
        NULL, NULL, NULL                                                                           \
    }

/* A command line, read. */
typedef struct pf_arguments {
    struct {
        const char *name, *value; /* value "" for an option that takes none */
    } given[PF_OPTIONS_MAX];
    size_t given_count;
    char **operand;
    size_t operand_count;
} pf_arguments;

typedef struct pf_cli {
    const char *database; /* path, never NULL */
    FILE *out, *err;
} pf_cli;

typedef struct pf_command {
    const char *name, *operands; /* "FILE..." */
    const char *summary;
    const pf_option *options;
    size_t least, most; /* operands */
    int (*run)(const pf_cli *cli, const pf_arguments *arguments);
} pf_command;

/* Every command, in the order of the manual; ends with a NULL name. */
const pf_command *pf_commands(void);

/* The options of one command read from argv[1..]; messages go to cli->err. False: wrong usage. */
bool pf_arguments_read(const pf_cli *cli, const pf_command *command, int argc, char **argv,
                       pf_arguments *arguments);

/* The value of the last option of that name, NULL where it was not given. */
const char *pf_argument(const pf_arguments *arguments, const char *name);

/* Help of one command, from its table entry. */
void pf_command_help(FILE *out, const pf_command *command);

/* --- what commands share --- */

int pf_exit_of(pf_status status);

/* Writes the error's text (or the status's) to err; returns the exit status. */
int pf_fail(const pf_cli *cli, pf_status status, const pf_error *error);

/* A usage error with its words; returns PF_EXIT_USAGE. */
int pf_usage(const pf_cli *cli, const char *format, ...) PF_PRINTF(2, 3);

/* Writes every problem on a line of its own. */
void pf_problems_show(const pf_cli *cli, const pf_problems *problems);

/* Opens the database; says on err what the user should know of where it lies. */
pf_status pf_cli_open(const pf_cli *cli, pf_store_mode mode, pf_store **store, pf_error *error);

/* A whole number >= least from text; false for anything else. */
bool pf_count_of(const char *text, long least, size_t *value);

/* The same for an option's value, with a message. */
bool pf_count_read(const pf_cli *cli, const char *option, const char *text, long least,
                   size_t *value);

#define PF_TIME_ROOM 24

/* One of a list of words that ends with NULL. Returns an exit status, *index its place. */
int pf_choice_read(const pf_cli *cli, const char *option, const char *text,
                   const char *const *choice, size_t *index);

/* Author, time and --why of an act on the database. now: room for its time. */
pf_import_facts pf_facts_of(const pf_arguments *arguments, char now[PF_TIME_ROOM]);

/* Now, as ISO 8601 in UTC. */
void pf_time_now(char text[PF_TIME_ROOM]);

/* --by, else the login name; "unknown" where there is none. Borrowed. */
const char *pf_author(const pf_arguments *arguments);

#endif
