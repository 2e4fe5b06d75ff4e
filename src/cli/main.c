/* main.c: passfet [--db FILE] COMMAND … */
#include "cli/cli.h"
#include "cli/commands.h"

#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

static const pf_command commands[] = {
    {"import", "FILE...",
     "Loads CSV files of ratings, all of them or nothing, or another database.", pf_import_options,
     1, 10000, pf_command_import},
    {"rank", "PROFILE...", "Evaluates every part for the card of a profile and ranks them.",
     pf_rank_options, 1, 64, pf_command_rank},
    {"explain", "PART PROFILE", "The whole calculation for one part, to be checked by hand.",
     pf_explain_options, 2, 2, pf_command_explain},
    {"headroom", "[PART] PROFILE",
     "How far each value of the profile can move before the part's verdict flips.",
     pf_headroom_options, 1, 2, pf_command_headroom},
    {"compare", "REFERENCE [CANDIDATE...]", "Whether a candidate may take the reference's place.",
     pf_compare_options, 1, 1000, pf_command_compare},
    {"parts", "", "Lists the parts of the database.", pf_parts_options, 0, 0, pf_command_parts},
    {"show", "PART", "Shows all that is known of one part, and what is not stated.",
     pf_show_options, 1, 1, pf_command_show},
    {"history", "PART", "Shows who changed which rating, when, and from which source.",
     pf_history_options, 1, 1, pf_command_history},
    {"review", "PART", "Accepts or questions the ratings of a part, as a second person.",
     pf_review_options, 1, 1, pf_command_review},
    {"audit", "", "Checks the database, and ratings against each other, worst first.",
     pf_audit_options, 0, 0, pf_command_audit},
    {"undo", "IMPORT", "Takes one import back, as a new revision.", pf_undo_options, 1, 1,
     pf_command_undo},
    {"export", "[FOLDER]",
     "Writes the ratings as CSV that imports again unchanged: a table, or files.",
     pf_export_options, 0, 1, pf_command_export},
    {"backup", "FILE", "Copies the database, consistent and verified, while others work.",
     pf_backup_options, 1, 1, pf_command_backup},
    {NULL, NULL, NULL, NULL, 0, 0, NULL},
};

const pf_command *pf_commands(void)
{
    return commands;
}

static void print_help(FILE *out)
{
    fputs("passfet [--db FILE] COMMAND [OPTION]... [ARGUMENT]...\n\n"
          "Ranks MOSFETs for the series switch of a card that is plugged into a live supply,\n"
          "by worst-case SOA margin, conduction loss and junction temperature.\n\n",
          out);
    for (const pf_command *command = commands; command->name; command++)
        fprintf(out, "  %-10s %s\n", command->name, command->summary);
    fputs("\n--db FILE names the database; else $PASSFET_DB, else passfet.db in this folder.\n"
          "`passfet COMMAND --help` lists the options of a command.\n"
          "Exit status: 0 done; 1 done, and the answer is no; 2 wrong usage; 3 bad input data;\n"
          "4 the database or the file system failed or refused; 5 the database stayed busy.\n",
          out);
}

static const pf_command *find_command(const char *name)
{
    for (const pf_command *command = commands; command->name; command++)
        if (strcmp(command->name, name) == 0) return command;
    return NULL;
}

static int run_command(const pf_cli *cli, int argc, char **argv)
{
    pf_arguments arguments;
    const pf_command *command = find_command(argv[0]);
    if (!command)
        return pf_usage(cli, "there is no command `%s`; `passfet --help` lists them", argv[0]);
    if (!pf_arguments_read(cli, command, argc, argv, &arguments)) return PF_EXIT_USAGE;
    if (!pf_argument(&arguments, "help")) return command->run(cli, &arguments);
    pf_command_help(cli->out, command);
    return PF_EXIT_DONE;
}

/* The options before the command. Returns an exit status, or -1 with *at at the command. */
static int read_globals(pf_cli *cli, int argc, char **argv, int *at)
{
    for (*at = 1; *at < argc && argv[*at][0] == '-'; ++*at) {
        const char *word = argv[*at];
        if (strcmp(word, "--db") == 0 && *at + 1 < argc) {
            cli->database = argv[++*at];
        } else if (strncmp(word, "--db=", 5) == 0) {
            cli->database = word + 5;
        } else if (strcmp(word, "--help") == 0) {
            print_help(cli->out);
            return PF_EXIT_DONE;
        } else if (strcmp(word, "--version") == 0) {
            fprintf(cli->out, "passfet %s\n", PF_VERSION);
            return PF_EXIT_DONE;
        } else {
            return pf_usage(cli, "no option `%s` before the command; `passfet --help`", word);
        }
    }
    if (*at < argc) return -1;
    print_help(cli->err);
    return PF_EXIT_USAGE;
}

/* What was written counts only once it has arrived: a full disk or a closed pipe is no success. */
static int close_output(const pf_cli *cli, int exit_status)
{
    bool failed = ferror(cli->out) != 0;
    errno = 0;
    if (fclose(cli->out) != 0) failed = true;
    if (!failed) return exit_status;
    fprintf(cli->err, "passfet: the output could not be written%s%s\n", errno ? ": " : "",
            errno ? strerror(errno) : "");
    return PF_EXIT_SYSTEM;
}

/* A standard stream that came closed would be given to the first file that is opened, and results would
** go there. It becomes a file that cannot be written, which close_output then finds. */
static void fill_closed_streams(void)
{
    for (int stream = 0; stream < 3; stream++)
        if (fcntl(stream, F_GETFD) == -1 && open("/dev/null", O_RDONLY) != stream)
            _exit(PF_EXIT_SYSTEM);
}

int main(int argc, char **argv)
{
    const char *database = getenv("PASSFET_DB");
    pf_cli cli = {database && *database ? database : "passfet.db", stdout, stderr};
    int at;
    fill_closed_streams();
    signal(SIGPIPE, SIG_IGN); /* a closed pipe then is a failed write, with a message */
    int exit_status = read_globals(&cli, argc, argv, &at);
    if (exit_status < 0) exit_status = run_command(&cli, argc - at, argv + at);
    return close_output(&cli, exit_status);
}
