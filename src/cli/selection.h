/* selection.h: which parts a command works on: --where, --as-of, --reviewed. */
#ifndef CLI_SELECTION_H
#define CLI_SELECTION_H

#include "cli/cli.h"

#include <passfet/listing.h>
#include <passfet/ranking.h>

#define PF_WHERE_OPTION                                                                            \
    {                                                                                              \
        "where", "CONDITION", "only parts that meet it: vds_max>=80, package=LFP8; repeatable"     \
    }
#define PF_AS_OF_OPTION                                                                            \
    {                                                                                              \
        "as-of", "DATE", "with the ratings known at that date or UTC time"                         \
    }
#define PF_REVIEWED_OPTION                                                                         \
    {                                                                                              \
        "reviewed", NULL, "only ratings that a second person accepted"                             \
    }

typedef struct pf_selection {
    pf_condition condition[PF_OPTIONS_MAX];
    size_t condition_count;
    pf_query query;
} pf_selection;

/* Returns an exit status; what is wrong with an option is said on err. */
int pf_selection_read(const pf_cli *cli, const pf_arguments *arguments, pf_selection *selection);

/* Whether a part meets all conditions. */
bool pf_selection_takes(const pf_selection *selection, const pf_part *part);

/* The next selected part; as pf_cursor_next. */
pf_status pf_selection_next(const pf_selection *selection, pf_cursor *cursor,
                            pf_stored_part *stored, bool *more, pf_error *error) PF_MUST_USE;

/* Hands every selected part to visit, all of one state of the database. A status other than PF_OK
** from visit ends the walk and is returned. */
typedef pf_status pf_selection_visitor(void *context, const pf_stored_part *stored);
pf_status pf_selection_walk(pf_store *store, const pf_selection *selection,
                            pf_selection_visitor *visit, void *context,
                            pf_error *error) PF_MUST_USE;

/* A stored part as the writers of lists take it; all borrowed from stored. */
pf_listed_part pf_listed_from(const pf_stored_part *stored);

#endif
