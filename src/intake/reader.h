/* reader.h: the state of reading one ratings file, shared by the files that read its kinds. */
#ifndef INTAKE_READER_H
#define INTAKE_READER_H

#include "intake/column.h"
#include "intake/column_map.h"
#include "intake/curve_cell.h"
#include "intake/registry.h"
#include "intake/table.h"

#include <passfet/intake.h>

typedef struct pf_curves pf_curves; /* curve_file.c */

typedef struct pf_reader {
    const char *file;
    const pf_intake_options *options;
    pf_changes *changes;
    pf_intake_summary *summary;
    pf_problems *problems;
    size_t refusals_before; /* problems->refusals when the file began */
    bool file_refused;      /* a refusal that --keep-good cannot pass over */

    pf_table *table;
    pf_status broken; /* what ended the table early */
    pf_column_map *map;
    pf_registry registry;
    pf_curves *curves;
    pf_number_style style;

    pf_file_kind kind;
    pf_column *column; /* of the header, in its order */
    size_t column_count;
    int part_column, maker_column; /* -1: none */
    char *header_text;             /* what the columns' names point into */
    bool units_may_follow;         /* the next row may be a row of units */

    size_t header_line;
    bool header_handed;       /* to whoever keeps bad rows */
    bool some_even, some_odd; /* some row has as many cells as the header; some has not */

    /* of the row at hand */
    const pf_row *row;
    pf_row plain_row; /* a copy without the marks against formulas, where it had some */
    pf_cell *plain_cell;
    size_t plain_room;
    bool row_refused;
    char reason[400]; /* first refusal of the row, for the bad rows' file */
} pf_reader;

/* Adds a problem at a line. PF_OK also for a refusal, so that reading goes on; PF_LIMIT when the
** file has had its share. column and text may be NULL. */
pf_status pf_reader_report(pf_reader *reader, pf_severity severity, pf_place place,
                           const pf_fault *fault) PF_MUST_USE;

/* A refusal of one cell of the row at hand. */
pf_status pf_reader_refuse_cell(pf_reader *reader, size_t index, const pf_fault *fault) PF_MUST_USE;

/* Reads a numeric cell by its column's rule; a fault is reported and *value left not stated. */
pf_status pf_reader_number(pf_reader *reader, size_t index, pf_value *value) PF_MUST_USE;

/* Tells a listener what was stored for a cell. */
void pf_reader_tell(pf_reader *reader, const char *part, size_t index, double value,
                    pf_quantity quantity);
void pf_reader_tell_text(pf_reader *reader, const char *part, size_t index, const char *stored);

/* Hands a bad row to whoever keeps them. */
void pf_reader_bad_row(pf_reader *reader, size_t line, const char *const *cell, size_t count,
                       const char *reason);

void pf_reader_bad_row_now(pf_reader *reader); /* the row at hand, with reader->reason */

/* The row at hand cannot be used at all: its part is kept out where good rows are kept; where that
** cannot be told, the file is refused. */
pf_status pf_reader_row_lost(pf_reader *reader) PF_MUST_USE;

/* The column of a role, -1 for none. */
int pf_reader_find(const pf_reader *reader, pf_role role, const char *csv);

/* Part and maker of the row at hand: a cell's trimmed text, or the part named by the options. Empty
** where blank. PF_OK with an empty name where a refusal was reported. */
pf_status pf_reader_names(pf_reader *reader, pf_slice *name, pf_slice *maker) PF_MUST_USE;

/* The end of the thermal path that a cell names; case where index is -1 or the cell blank. */
pf_status pf_reader_path(pf_reader *reader, int index, pf_thermal_path *path) PF_MUST_USE;

/* parts_file.c */
pf_status pf_parts_row(pf_reader *reader) PF_MUST_USE;

/* curve_file.c: gathers rows; finishing repairs the curves and puts them into the changes. */
pf_status pf_curves_new(pf_reader *reader) PF_MUST_USE;
void pf_curves_free(pf_curves *curves);
void pf_curves_columns(pf_reader *reader); /* the header is known */
pf_status pf_curves_row(pf_reader *reader) PF_MUST_USE;
pf_status pf_curves_finish(pf_reader *reader) PF_MUST_USE;

/* Marks the part of the row at hand: its curves of this file are not to be stored. */
pf_status pf_curves_spoil(pf_reader *reader, pf_slice name, pf_slice maker) PF_MUST_USE;

/* Repairs the points of one kind of curve and puts them into a change. from names the file's line
** of the part; column the curve's, for messages. Faults are reported; *good tells whether there were
 ** none. */
typedef struct pf_curve_place {
    const char *column;
    const char *part;
    size_t line;
} pf_curve_place;
pf_status pf_curve_install(pf_reader *reader, pf_raw_points *points, pf_file_kind kind,
                           pf_thermal_path path, const pf_curve_place *place,
                           pf_part_change *change, bool *good) PF_MUST_USE;

#endif
