/* cards.h: the profiles and captures that a command line names, as plans. */
#ifndef CLI_CARDS_H
#define CLI_CARDS_H

#include "cli/cli.h"

#include <passfet/intake.h>
#include <passfet/stress.h>

/* All captures of the command line. */
typedef struct pf_captures {
    pf_capture_data data[PF_OPTIONS_MAX];
    pf_capture view[PF_OPTIONS_MAX];
    size_t count;
} pf_captures;

/* Plans of profiles with the captures of the command line. */
typedef struct pf_cards {
    pf_plan **plan;
    size_t count;
    pf_captures recorded;
    unsigned remarks; /* for every part: the rule of some profile is quoted from memory */
} pf_cards;

/* Reads profiles (paths) with the options --capture and --derating and makes their plans. Every
** problem of every file is shown. Returns an exit status; on others than PF_EXIT_DONE *cards is
** empty. */
int pf_cards_read(const pf_cli *cli, const pf_arguments *arguments, char *const *path, size_t count,
                  pf_cards *cards);
void pf_cards_clear(pf_cards *cards);

/* The built-in rules, with those of --derating in their place. */
pf_status pf_rules_load(const pf_arguments *arguments, pf_derating_rules *rules,
                        pf_problems *problems);

#endif
