/* column_map.h: a team's own column names for ours. */
#ifndef INTAKE_COLUMN_MAP_H
#define INTAKE_COLUMN_MAP_H

#include "intake/text.h"

#include <passfet/error.h>
#include <passfet/problem.h>

typedef struct pf_column_map pf_column_map;

/* Two columns, `their name, our name`, with a header line. Ours may carry a condition and a unit;
** blank or `ignore` leaves a column out. */
pf_status pf_column_map_read_file(const char *path, pf_column_map **map,
                                  pf_problems *problems) PF_MUST_USE;
void pf_column_map_free(pf_column_map *map);

/* Our name for theirs, "" for one to be left out, NULL where the map does not name it. map may be
** NULL. Borrowed. */
const char *pf_column_map_find(const pf_column_map *map, pf_slice theirs);

#endif
