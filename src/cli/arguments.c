/* arguments.c: a command's options from its table, by getopt_long. */
#include "cli/cli.h"

#include <getopt.h>
#include <string.h>

static size_t count_options(const pf_option *option)
{
    size_t count = 0;
    while (option[count].name)
        count++;
    return count;
}

/* What getopt_long wants to know: the value returned is the option's place. */
static void fill_long_options(const pf_command *command, struct option *list)
{
    size_t count = count_options(command->options);
    for (size_t i = 0; i < count; i++) {
        const pf_option *from = &command->options[i];
        list[i] = (struct option){from->name, from->argument ? required_argument : no_argument,
                                  NULL, (int)i + 1000};
    }
    list[count] = (struct option){0};
}

static bool check_operands(const pf_cli *cli, const pf_command *command, size_t count)
{
    if (count >= command->least && count <= command->most) return true;
    fprintf(cli->err, "passfet %s: %s; usage: passfet %s [OPTION]... %s\n", command->name,
            count < command->least ? "something is missing" : "too many arguments", command->name,
            command->operands);
    return false;
}

/* Says what is wrong with an option. getopt's own words are switched off: they name argv[0]. */
static bool refuse(const pf_cli *cli, const pf_command *command, int found, const char *text)
{
    fprintf(cli->err, "passfet %s: %s %s; ", command->name,
            found == ':' ? "a value is missing behind" : "no such option, or one too many values:",
            text);
    if (strncmp(text, "--db", 4) == 0)
        fputs("--db FILE stands before the command\n", cli->err);
    else
        fprintf(cli->err, "`passfet %s --help` lists the options\n", command->name);
    return false;
}

bool pf_arguments_read(const pf_cli *cli, const pf_command *command, int argc, char **argv,
                       pf_arguments *arguments)
{
    struct option list[PF_OPTIONS_MAX + 1];
    *arguments = (pf_arguments){0};
    fill_long_options(command, list);
    optind = 0;
    opterr = 0;
    for (int found; (found = getopt_long(argc, argv, ":", list, NULL)) != -1;) {
        if (found == '?' || found == ':') return refuse(cli, command, found, argv[optind - 1]);
        if (arguments->given_count == PF_OPTIONS_MAX)
            return refuse(cli, command, '?', argv[optind - 1]);
        arguments->given[arguments->given_count].name = command->options[found - 1000].name;
        arguments->given[arguments->given_count++].value = optarg ? optarg : "";
    }
    arguments->operand = argv + optind;
    arguments->operand_count = (size_t)(argc - optind);
    return pf_argument(arguments, "help") || check_operands(cli, command, arguments->operand_count);
}

const char *pf_argument(const pf_arguments *arguments, const char *name)
{
    for (size_t i = arguments->given_count; i-- > 0;)
        if (strcmp(arguments->given[i].name, name) == 0) return arguments->given[i].value;
    return NULL;
}

void pf_command_help(FILE *out, const pf_command *command)
{
    fprintf(out, "passfet [--db FILE] %s [OPTION]... %s\n\n%s\n\n", command->name,
            command->operands, command->summary);
    for (const pf_option *option = command->options; option->name; option++) {
        char left[64];
        snprintf(left, sizeof left, "--%s%s%s", option->name, option->argument ? " " : "",
                 option->argument ? option->argument : "");
        fprintf(out, "  %-24s %s\n", left, option->meaning);
    }
}
