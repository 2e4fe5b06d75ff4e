/* review.h: what the commands of a design review share: a card, the database, one part of it. */
#ifndef CLI_REVIEW_H
#define CLI_REVIEW_H

#include "cli/cards.h"

#include <passfet/review.h>

typedef struct pf_review {
    const pf_cli *cli;
    pf_cards cards; /* of one profile */
    pf_store *store;
    pf_stored_part stored;
    pf_scratch *scratch;
    const char *as_of;
    char revision[PF_REVISION_NAME_ROOM];
    pf_report_source source;
    bool json; /* --format json */
} pf_review;

/* Options that all of them take, for their tables. */
#define PF_REVIEW_OPTIONS                                                                          \
    {"capture", "FILE", "a measured waveform to evaluate as well; repeatable"},                    \
        {"derating", "FILE", "derating rules of your own, before the built-in ones"},              \
        {"as-of", "DATE", "with the ratings known at that date or UTC time"},                      \
        {"format", "FORMAT", "text (the default) or json"}, {"help", NULL, "this text"},           \
    {                                                                                              \
        NULL, NULL, NULL                                                                           \
    }

/* Reads the profile and opens the database. Returns an exit status; pf_review_close either way. */
int pf_review_open(pf_review *review, const pf_cli *cli, const pf_arguments *arguments,
                   char *profile);
void pf_review_close(pf_review *review);

/* Finds a part by name or maker/name; review->stored holds it until the next one. Exit status. */
int pf_review_find(pf_review *review, const char *name);

/* What a reader must know of the stored part beside what it states. */
unsigned pf_review_remarks(const pf_review *review);

#endif
