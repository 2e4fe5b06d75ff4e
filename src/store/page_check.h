/* page_check.h: a file layer under SQLite that closes every page with a checksum and checks it.
**
** SQLite notices only some damage: a flipped bit in a number is another number. Here the last
** PF_CHECK_BYTES of every page of the database file, which SQLite leaves free when told to, hold a
** checksum of the rest, set on every write and checked on every read. Any SQLite client reads such
** a file as usual; pages that another program writes are refused afterwards as damaged.
** Cost: about 0.2 ns per byte read or written.
*/
#ifndef STORE_PAGE_CHECK_H
#define STORE_PAGE_CHECK_H

#include <passfet/error.h>
#include <sqlite3.h>

#define PF_CHECK_BYTES 8

/* Registers a file layer of a name of its own (vfs->zName) on top of the default one. Pages that do
** not match are read as SQLITE_IOERR_DATA. */
pf_status pf_page_check_new(int page_bytes, sqlite3_vfs **vfs) PF_MUST_USE;
void pf_page_check_free(sqlite3_vfs *vfs); /* after the last connection closed; NULL is allowed */

#endif
