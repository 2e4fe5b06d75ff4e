/* header.h: the header of a ratings file: which kind it is, what its columns mean. */
#ifndef INTAKE_HEADER_H
#define INTAKE_HEADER_H

#include "intake/reader.h"

/* Takes the row at hand as the header. reader->kind stays unknown where rows cannot be read. */
pf_status pf_header_take(pf_reader *reader) PF_MUST_USE;

/* Takes the row at hand as a row of units, where it is one. */
pf_status pf_header_take_units(pf_reader *reader, bool *taken) PF_MUST_USE;

#endif
