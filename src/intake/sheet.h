/* sheet.h: a small CSV file with known columns: profile, capture, derating rules, column map. */
#ifndef INTAKE_SHEET_H
#define INTAKE_SHEET_H

#include "intake/source.h"
#include "intake/table.h"
#include "intake/value.h"

#define PF_SHEET_COLUMNS_MAX 8

typedef struct pf_sheet_column {
    const char *names; /* `|` between, the first is shown; fold before comparing */
    bool required;
    bool numeric;
    pf_value_rule rule; /* of a numeric column; factor is set by a unit in the header */
} pf_sheet_column;

typedef struct pf_sheet {
    const char *file;
    pf_problems *problems;
    pf_number_style style;
    size_t column_count;
    pf_sheet_column column[PF_SHEET_COLUMNS_MAX];
    int place[PF_SHEET_COLUMNS_MAX]; /* of the column in the file, -1: not there */
    const pf_row *row;               /* at hand */
    size_t last_line;
    size_t refusals_before; /* problems->refusals when the file began */
    pf_status (*take)(struct pf_sheet *sheet, void *context); /* per data row */
    void *context;
    pf_table *table;
} pf_sheet;

/* Reads the source; rows of another number of cells than the header's are refused and not handed
** over. PF_BAD_INPUT: at least one refusal was added. */
pf_status pf_sheet_read(pf_sheet *sheet, const pf_source *source) PF_MUST_USE;

/* The trimmed text of a column in the row at hand; empty where the column is not there. */
pf_slice pf_sheet_text(const pf_sheet *sheet, size_t column);

/* A number by its column's rule; a fault is refused. NaN where blank. */
pf_status pf_sheet_number(pf_sheet *sheet, size_t column, double *value) PF_MUST_USE;

/* A refusal at the row at hand; column is what the message names. PF_OK once it is stored. */
pf_status pf_sheet_refuse(pf_sheet *sheet, const char *column, pf_slice text,
                          const pf_fault *fault) PF_MUST_USE;
pf_status pf_sheet_refuse_at(pf_sheet *sheet, size_t line, const char *column, pf_slice text,
                             const pf_fault *fault) PF_MUST_USE;

/* The name of a file without its folder and a final .csv; cut to room - 1 bytes. */
void pf_base_name(const char *path, char *name, size_t room);

#endif
