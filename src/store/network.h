/* network.h: whether a file system is one on which locks cannot be trusted. */
#ifndef STORE_NETWORK_H
#define STORE_NETWORK_H

/* What is to be said of a database on the file system of this statfs type, or NULL. */
const char *pf_network_warning(long file_system_type);

/* The same for the file system on which a path lies; NULL where that cannot be told. */
const char *pf_network_warning_of(const char *path);

#endif
