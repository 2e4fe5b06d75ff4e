/* commands.h: the commands, each with its options; the table is in main.c. */
#ifndef CLI_COMMANDS_H
#define CLI_COMMANDS_H

#include "cli/cli.h"

extern const pf_option pf_import_options[];
extern const pf_option pf_rank_options[];
extern const pf_option pf_explain_options[];

int pf_command_import(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_rank(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_explain(const pf_cli *cli, const pf_arguments *arguments);

#endif
