/* curve_json.h: curves and Rds(on) as JSON, for analysts with any SQLite client.
**
**   {"soa":[[case_degC,pulse_s or "dc",[[vds_V,id_A],…]],…],
**    "zth_case":[[time_s,zth_KpW],…], "foster_case":[[r_KpW,tau_s],…],
**    "zth_ambient":…, "foster_ambient":…}
** Members that are not stated are left out. Numbers have as many digits as read back unchanged.
*/
#ifndef STORE_CURVE_JSON_H
#define STORE_CURVE_JSON_H

#include "base/buffer.h"

#include <passfet/part.h>
#include <stdbool.h>

void pf_curves_json(const pf_part *part, pf_buffer *json);

/* "[[4.5,0.0047],[10,0.0035]]"; "" for none. */
void pf_rdson_json(const pf_part *part, pf_buffer *json);

/* Reads what pf_rdson_json writes; false for anything else. */
bool pf_rdson_read(const char *json, pf_part *part);

#endif
