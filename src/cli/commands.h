/* commands.h: the commands, each with its options; the table is in main.c. */
#ifndef CLI_COMMANDS_H
#define CLI_COMMANDS_H

#include "cli/cli.h"

extern const pf_option pf_audit_options[];
extern const pf_option pf_backup_options[];
extern const pf_option pf_export_options[];
extern const pf_option pf_history_options[];
extern const pf_option pf_import_options[];
extern const pf_option pf_parts_options[];
extern const pf_option pf_rank_options[];
extern const pf_option pf_explain_options[];
extern const pf_option pf_headroom_options[];
extern const pf_option pf_compare_options[];
extern const pf_option pf_review_options[];
extern const pf_option pf_show_options[];
extern const pf_option pf_undo_options[];

int pf_command_audit(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_backup(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_export(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_history(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_import(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_parts(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_rank(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_explain(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_headroom(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_compare(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_review(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_show(const pf_cli *cli, const pf_arguments *arguments);
int pf_command_undo(const pf_cli *cli, const pf_arguments *arguments);

#endif
