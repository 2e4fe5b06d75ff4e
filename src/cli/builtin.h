/* builtin.h: files of data/ that are compiled into the command. */
#ifndef CLI_BUILTIN_H
#define CLI_BUILTIN_H

/* data/derating.csv, closed by NUL. */
extern const char pf_builtin_derating[];

#endif
