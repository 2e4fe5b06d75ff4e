/* schema.h: the texts of schema/, embedded at build. */
#ifndef STORE_SCHEMA_H
#define STORE_SCHEMA_H

extern const char pf_schema_001_layout[];
extern const char pf_schema_views[];

#endif
