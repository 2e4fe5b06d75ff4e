/* intake.h: CSV to parts, profiles, captures and derating rules.
**
** Readers go through a whole file and add every problem they meet to a pf_problems; a file with a
** refusal states nothing that may be stored. What the files of one run state is gathered in a
** pf_changes, one pf_part_change per part, whatever the order of the files:
**
**     pf_changes changes = {0};
**     pf_intake_summary summary;
**     pf_ratings_read_file("parts.csv", &options, &changes, &summary, &problems);
**     pf_ratings_read_file("soa.csv", &options, &changes, &summary, &problems);
**     … merge with what is stored, pf_part_judge on the merged part, store or refuse …
**     pf_changes_clear(&changes);
**
** Statuses of all readers: PF_OK; PF_BAD_INPUT with refusals in *problems; PF_FILE when the file
** cannot be read (a refusal says why); PF_NO_MEMORY; PF_BAD_ARGUMENT for options that mean nothing.
** docs/csv.md describes the files.
*/
#ifndef PASSFET_INTAKE_H
#define PASSFET_INTAKE_H

#include <passfet/change.h>
#include <passfet/error.h>
#include <passfet/problem.h>
#include <passfet/profile.h>
#include <stdbool.h>
#include <stddef.h>

/* Limits; a file that goes over one is refused, with the line. */
#define PF_CELL_BYTES_MAX ((size_t)1 << 20)
#define PF_ROW_BYTES_MAX ((size_t)4 << 20)
#define PF_COLUMNS_MAX 2000
#define PF_CURVE_POINTS_MAX 10000 /* points of one part's curves in one file, of one kind */
#define PF_PROBLEMS_MAX 10000     /* refusals of one file, then reading ends */

/* code, name in messages */
#define PF_FILE_KIND_LIST(X)                                                                       \
    X(PF_KIND_UNKNOWN, "unknown")                                                                  \
    X(PF_KIND_PARTS, "parts table")                                                                \
    X(PF_KIND_SOA, "SOA points")                                                                   \
    X(PF_KIND_SOA_WIDE, "SOA sheet, one column per pulse width")                                   \
    X(PF_KIND_ZTH, "Zth points")                                                                   \
    X(PF_KIND_FOSTER, "Foster pairs")

typedef enum pf_file_kind {
#define PF_FILE_KIND_CODE(code, name) code,
    PF_FILE_KIND_LIST(PF_FILE_KIND_CODE)
#undef PF_FILE_KIND_CODE
        PF_FILE_KIND_COUNT
} pf_file_kind;

const char *pf_file_kind_text(pf_file_kind kind);

/* One cell that was read: its text and the value that is stored for it ("4.7 mOhm"). */
typedef struct pf_cell_reading {
    const char *file;
    size_t line;
    const char *part; /* name of the part that it belongs to */
    const char *column;
    const char *text, *stored;
} pf_cell_reading;

/* One row that is kept out, with the cells as they were read. reason names what is wrong with it;
** where another row of the same part is at fault it says so. Before the first bad row of a file its
** header comes by itself, with cell_count 0 and no reason. */
typedef struct pf_bad_row {
    const char *file;
    size_t line;
    const char *const *header;
    size_t header_count;
    const char *const *cell;
    size_t cell_count;
    const char *reason;
} pf_bad_row;

typedef struct pf_intake_options {
    char decimal;          /* 0: as the file shows; '.' or ',' settles what could be two things */
    const char *map_file;  /* column map: two columns, their name and ours; NULL: none */
    const char *encoding;  /* NULL or "utf-8"; "windows-1252" */
    const char *part_name; /* for files without a part column; NULL: such a file is refused */
    bool accept;           /* suspicious curves become warnings */

    /* Row by row: a part with a bad row is marked `refused` in its change and left out, the others
    ** stay; then a reader returns PF_OK although *problems holds refusals (summary.refused_rows).
    ** What concerns the whole file (header, quotes, encoding) still refuses it. */
    bool keep_good;
    void (*bad_row)(void *context, const pf_bad_row *row);

    void (*cell)(void *context, const pf_cell_reading *reading);    /* NULL: nobody asks */
    void (*bytes)(void *context, const char *bytes, size_t length); /* content as it is read */
    void (*progress)(void *context, const char *file, size_t bytes_read); /* every few MiB */
    void *context;                                                        /* of all the above */
} pf_intake_options;

/* Adds up over the files of a run; start with an empty one. */
typedef struct pf_intake_summary {
    pf_file_kind kind;   /* of the last file read */
    size_t files, bytes; /* read so far */
    size_t rows;         /* data rows, good and bad */
    size_t refused_rows;
    size_t points; /* curve points kept */
} pf_intake_summary;

/* Reads one file of ratings, its content in memory; name is for messages. changes is added to. */
pf_status pf_ratings_read(const char *name, const char *bytes, size_t length,
                          const pf_intake_options *options, pf_changes *changes,
                          pf_intake_summary *summary, pf_problems *problems) PF_MUST_USE;

/* The same from a file, or from standard input where path is "-". Memory does not grow with the
** file, only with what it states. */
pf_status pf_ratings_read_file(const char *path, const pf_intake_options *options,
                               pf_changes *changes, pf_intake_summary *summary,
                               pf_problems *problems) PF_MUST_USE;

/* Adds what pf_part_check finds in a part (as it will be stored) to problems, in words. A finding
** that refuses is a warning where accept is true. PF_BAD_INPUT: at least one refusal. */
pf_status pf_part_judge(const pf_part *part, const char *file, size_t line, bool accept,
                        pf_problems *problems) PF_MUST_USE;

/* --- Derating rules ------------------------------------------------------------------------ */

typedef struct pf_derating_rules {
    pf_derating *item;
    size_t count, capacity;
} pf_derating_rules;

void pf_derating_rules_clear(pf_derating_rules *rules);

/* Columns rule,parameter,factor,clause,mark. A rule that is already there is replaced, so that a
** team's own file can follow the one that comes with passfet. */
pf_status pf_derating_rules_read(const char *name, const char *bytes, size_t length,
                                 pf_derating_rules *rules, pf_problems *problems) PF_MUST_USE;
pf_status pf_derating_rules_read_file(const char *path, pf_derating_rules *rules,
                                      pf_problems *problems) PF_MUST_USE;

/* The rule of that name (letters in either case), NULL for none. Borrowed. */
const pf_derating *pf_derating_rule_find(const pf_derating_rules *rules, const char *name);

/* --- Profile ------------------------------------------------------------------------------- */

/* Reads a whole profile and finishes it (pf_profile_finish). The profile's name is the file's, less
** folder and .csv. rules may be NULL: then a profile that names a rule is refused. */
pf_status pf_profile_read(const char *name, const char *bytes, size_t length,
                          const pf_derating_rules *rules, pf_profile *profile,
                          pf_problems *problems) PF_MUST_USE;
pf_status pf_profile_read_file(const char *path, const pf_derating_rules *rules,
                               pf_profile *profile, pf_problems *problems) PF_MUST_USE;

/* --- Capture ------------------------------------------------------------------------------- */

/* A measured waveform that owns its samples: at least two, by strictly rising time. */
typedef struct pf_capture_data {
    char *name; /* the file's, less folder and .csv */
    size_t count;
    double *time_s, *vds_V, *id_A;
} pf_capture_data;

void pf_capture_data_clear(pf_capture_data *capture);

/* *capture must be empty ({0}) or cleared. A failure leaves it empty. */
pf_status pf_capture_read(const char *name, const char *bytes, size_t length,
                          pf_capture_data *capture, pf_problems *problems) PF_MUST_USE;
pf_status pf_capture_read_file(const char *path, pf_capture_data *capture,
                               pf_problems *problems) PF_MUST_USE;

#endif
