/* listing.h: parts as the database holds them: one on a page, many in a list, all as CSV that import
** reads again. Writes, computes nothing.
**
** Streams as in report.h: a full disk or a closed pipe shows in ferror.
*/
#ifndef PASSFET_LISTING_H
#define PASSFET_LISTING_H

#include <passfet/error.h>
#include <passfet/part.h>
#include <stdbool.h>
#include <stdio.h>

/* A part with where its values come from. Borrowed pointers. */
typedef struct pf_listed_part {
    const pf_part *part;
    long long revision, entry; /* of the part; number of the act that made it */
    const char *author, *time; /* of that act */
    const char *review;        /* "unreviewed", "accepted", "questioned" */
} pf_listed_part;

/* One part on a page: every rating with its unit and meaning, the curves, and what is not stated with
** what depends on it. */
void pf_listing_page(FILE *out, const pf_listed_part *listed);

/* A list of parts, head first; at most PF_TABLE_COLUMNS (report.h) wide. */
void pf_listing_table_head(FILE *out);
void pf_listing_table_row(FILE *out, const pf_listed_part *listed);

/* A JSON list of objects: members by the names of fields.def, null for not stated. */
typedef struct pf_listing_json pf_listing_json;
pf_status pf_listing_json_new(FILE *out, pf_listing_json **list) PF_MUST_USE;
void pf_listing_json_part(pf_listing_json *list, const pf_listed_part *listed);
void pf_listing_json_end(pf_listing_json *list); /* closes and frees; NULL is allowed */

/* One part alone as a JSON object. */
void pf_listing_json_page(FILE *out, const pf_listed_part *listed);

/* --- CSV that import reads again ----------------------------------------------------------- */

/* Gate drives at which the parts of a table state Rds(on): a column each. Start with an empty one. */
typedef struct pf_drives {
    double *vgs_V; /* rising */
    size_t count, capacity;
} pf_drives;

pf_status pf_drives_add(pf_drives *drives, const pf_part *part) PF_MUST_USE;
void pf_drives_clear(pf_drives *drives);

/* Values are in SI with as few digits as read back unchanged. */
typedef enum pf_ratings_csv {
    /* four files that together hold all */
    PF_CSV_PARTS, /* texts and ratings, no curves */
    PF_CSV_SOA,
    PF_CSV_ZTH,
    PF_CSV_FOSTER,
    /* one table that holds all, curves in cells */
    PF_CSV_WHOLE
} pf_ratings_csv;

#define PF_CSV_FILES PF_CSV_WHOLE /* how many files */

/* "parts.csv", "soa_points.csv", "zth_points.csv", "foster.csv": the names of the four. */
const char *pf_ratings_csv_name(pf_ratings_csv kind);

/* The header; drives are for PF_CSV_PARTS and PF_CSV_WHOLE. */
void pf_ratings_csv_head(FILE *out, pf_ratings_csv kind, const pf_drives *drives);

/* The rows of one part: one in a table of parts, one per point or pair in the others. drives must hold
** every gate drive of the part. */
void pf_ratings_csv_part(FILE *out, pf_ratings_csv kind, const pf_drives *drives,
                         const pf_part *part);

#endif
