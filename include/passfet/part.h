/* part.h: one MOSFET as its data sheet states it.
**
** A pf_part is plain data: members are read freely and written through the readers or a user's own
** code. Not stated is NaN for a number and NULL for a text, never 0. Voltages and currents are
** magnitudes for both polarities.
*/
#ifndef PASSFET_PART_H
#define PASSFET_PART_H

#include <passfet/error.h>
#include <passfet/units.h>
#include <stdbool.h>
#include <stddef.h>

typedef enum pf_polarity { PF_POLARITY_NONE, PF_N_CHANNEL, PF_P_CHANNEL } pf_polarity;

/* Where a thermal curve ends. */
typedef enum pf_thermal_path {
    PF_JUNCTION_CASE,
    PF_JUNCTION_AMBIENT,
    PF_PATH_COUNT
} pf_thermal_path;

/* Pulse width of a DC line of the safe operating area. */
#define PF_DC __builtin_inf()

typedef struct pf_rdson_point {
    double vgs_V;     /* gate drive, (0, 100] */
    double rdson_ohm; /* maximum at 25 degC, (0, 1000] */
} pf_rdson_point;

typedef struct pf_soa_point {
    double case_degC; /* case temperature of the curve family, 25 unless the sheet says otherwise */
    double pulse_s;   /* pulse width, PF_DC for the DC line */
    double vds_V;
    double id_A;
} pf_soa_point;

typedef struct pf_zth_point {
    double time_s;
    double zth_KpW;
} pf_zth_point;

typedef struct pf_foster_pair {
    double r_KpW;
    double tau_s;
} pf_foster_pair;

/* A thermal impedance in one of its two forms; both counts 0: not stated. Never both forms. */
typedef struct pf_thermal_curve {
    pf_zth_point *point;
    size_t point_count;
    pf_foster_pair *pair;
    size_t pair_count;
} pf_thermal_curve;

#define PF_RDSON_MAX 8 /* rated gate drives of one part */

typedef struct pf_part {
#define PF_TEXT(member, csv, aliases, meaning) char *member;
#include <passfet/fields.def>
    pf_polarity polarity;
#define PF_RATING(member, quantity, lowest, highest, signless, csv, aliases, meaning) double member;
#include <passfet/fields.def>
    pf_rdson_point rdson[PF_RDSON_MAX]; /* by rising vgs_V */
    size_t rdson_count;
    pf_soa_point *soa; /* by case_degC, pulse_s, vds_V; in the order given at one voltage */
    size_t soa_count;
    pf_thermal_curve thermal[PF_PATH_COUNT];
} pf_part;

/* A rating of fields.def as data, for readers and writers that treat all alike. */
typedef struct pf_rating_field {
    const char *name; /* member and SQL column: "vds_max_V" */
    const char *csv;
    const char *aliases; /* `|` between */
    const char *meaning;
    pf_quantity quantity;
    double lowest, highest;
    bool signless;
    size_t offset; /* of the double in pf_part */
} pf_rating_field;

typedef struct pf_text_field {
    const char *name; /* member and SQL column: "datasheet" */
    const char *csv;
    const char *aliases;
    const char *meaning;
    size_t offset; /* of the char * in pf_part */
} pf_text_field;

/* The fields in the order of fields.def. Static storage. */
const pf_rating_field *pf_rating_fields(size_t *count);
const pf_text_field *pf_text_fields(size_t *count);

double *pf_part_rating(pf_part *part, const pf_rating_field *field);
double pf_part_rating_value(const pf_part *part, const pf_rating_field *field);
char **pf_part_text(pf_part *part, const pf_text_field *field);
const char *pf_part_text_value(const pf_part *part, const pf_text_field *field);

void pf_part_init(pf_part *part);  /* nothing stated */
void pf_part_clear(pf_part *part); /* frees what it owns; the part says nothing again */

/* *to becomes a copy that owns its memory; *to must be initialised and is cleared first. */
pf_status pf_part_copy(pf_part *to, const pf_part *from) PF_MUST_USE;

/* Sets one text to a copy of text (NULL: not stated). */
pf_status pf_part_set_text(pf_part *part, const pf_text_field *field, const char *text) PF_MUST_USE;

/* Keeps rdson sorted by gate drive; the same gate drive again replaces its value. PF_LIMIT when
** there is no room, PF_BAD_ARGUMENT for values that are not finite and positive. */
pf_status pf_part_set_rdson(pf_part *part, double vgs_V, double rdson_ohm) PF_MUST_USE;

/* Replace whole curves; the arrays are copied and sorted (SOA by case, pulse, then voltage, keeping
** the given order at one voltage; Zth by time; Foster by time constant). Count 0: not stated.
** set_zth takes the place of Foster pairs on that path and the other way round. */
pf_status pf_part_set_soa(pf_part *part, const pf_soa_point *point, size_t count) PF_MUST_USE;
pf_status pf_part_set_zth(pf_part *part, pf_thermal_path path, const pf_zth_point *point,
                          size_t count) PF_MUST_USE;
pf_status pf_part_set_foster(pf_part *part, pf_thermal_path path, const pf_foster_pair *pair,
                             size_t count) PF_MUST_USE;

/* Whether two parts state exactly the same (bit for bit, NaN equal to NaN). */
bool pf_part_equal(const pf_part *left, const pf_part *right);

/* "N", "P" or "". */
const char *pf_polarity_text(pf_polarity polarity);

#endif
