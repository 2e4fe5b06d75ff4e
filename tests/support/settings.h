/* settings.h: "name=value name=value …" texts, in which tests and reference records state cases.
**
** Numbers are SI. Lists: `;` between curves, `,` between points, `:` within a point.
**
**   rdson=10:0.004,4.5:0.006                  V_GS:ohm
**   soa=1e-3/1:400,60:8;dc/1:120,60:0.3       pulse/V:A,…  (pulse@case_degC/… for a hot family)
**   zth=1e-5:0.01,0.1:0.6   zth_ambient=…     s:K/W
**   foster=0.4:1e-3,0.6:0.1                   R:tau        foster_rc=… R:C
**
** A value that is wrong ends the program with the text: a case that was mistyped must not pass.
*/
#ifndef SUPPORT_SETTINGS_H
#define SUPPORT_SETTINGS_H

#include <passfet/part.h>
#include <passfet/profile.h>

#define SETTINGS_MAX 48

typedef struct setting {
    const char *name, *value;
    bool used;
} setting;

typedef struct settings {
    char text[4096];
    setting item[SETTINGS_MAX];
    size_t count;
} settings;

void settings_read(settings *list, const char *text);

/* The value of a name, NULL where it is not there; marks it as used. */
const char *settings_find(settings *list, const char *name);

/* A number; ends the program where it is missing. */
double settings_number(settings *list, const char *name);
double settings_number_or(settings *list, const char *name, double otherwise);

/* Ends the program when a setting was used by nobody. */
void settings_finish(const settings *list);

/* Points x:y,x:y,… ; returns how many. z: a third coordinate where not NULL. */
size_t points_read(const char *text, double *x, double *y, double *z, size_t room);

/* One setting of a part or a profile; false when there is none of that name. A blank value makes it
** not stated again. */
bool part_set(pf_part *part, const char *name, const char *value);
bool profile_set(pf_profile *profile, const char *name, const char *value);

/* All settings of a text; ends the program at one that is unknown. */
void part_state(pf_part *part, const char *text);
void profile_state(pf_profile *profile, const char *text);

/* Gives the part or profile every setting that it knows. */
void settings_apply(settings *list, pf_part *part, pf_profile *profile);

#define DIE(...) settings_die(__FILE__, __LINE__, __VA_ARGS__)
_Noreturn void settings_die(const char *file, int line, const char *format, ...) PF_PRINTF(3, 4);

#endif
