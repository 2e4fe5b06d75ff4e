/* page_check.c: checksums under SQLite's pages; all else is handed on to the default file layer. */
#include "store/page_check.h"
#include "base/memory.h"
#include "store/words.h"

#include <stdio.h>
#include <string.h>

typedef struct layer {
    sqlite3_vfs vfs; /* first: SQLite hands back a pointer to it */
    sqlite3_vfs *below;
    int page_bytes;
    char name[32];
} layer;

/* The file below lies right behind this in the memory that SQLite allocates. */
typedef struct checked_file {
    sqlite3_file base;
    int page_bytes; /* 0: a journal, handed on as it is */
} checked_file;

static layer *layer_of(sqlite3_vfs *vfs)
{
    return (layer *)(void *)vfs;
}

static sqlite3_file *below(sqlite3_file *file)
{
    return (sqlite3_file *)(void *)((checked_file *)(void *)file + 1);
}

static uint64_t mix(uint64_t lane, uint64_t word)
{
    lane = (lane ^ word) * UINT64_C(0x9E3779B97F4A7C15);
    return lane ^ lane >> 29;
}

/* Four lanes, so that the multiplications overlap. Every step maps a lane one-to-one for a given
** word and one-to-one from words for a given lane, so that a change within one word always shows. */
static uint64_t checksum(const void *bytes, size_t length)
{
    pf_words words = {bytes, length / 8};
    uint64_t a = 1, b = 2, c = 3, d = 4;
    while (pf_words_left(&words) >= 4) {
        a = mix(a, pf_words_next(&words));
        b = mix(b, pf_words_next(&words));
        c = mix(c, pf_words_next(&words));
        d = mix(d, pf_words_next(&words));
    }
    while (pf_words_left(&words))
        a = mix(a, pf_words_next(&words));
    return mix(mix(mix(mix(length, a), b), c), d);
}

static void sum_of_page(const void *page, int bytes, unsigned char sum[PF_CHECK_BYTES])
{
    uint64_t word = pf_word_turn(checksum(page, (size_t)bytes - PF_CHECK_BYTES));
    memcpy(sum, &word, PF_CHECK_BYTES);
}

static int is_page(sqlite3_file *file, int amount, sqlite3_int64 offset)
{
    int page_bytes = ((checked_file *)(void *)file)->page_bytes;
    return page_bytes && amount == page_bytes && offset % page_bytes == 0;
}

/* A page that SQLite took up and gave back within one transaction was never written. Where a page
** that is in use reads as zeros, SQLite itself notices. */
static int is_blank(const unsigned char *page, int bytes)
{
    return page[0] == 0 && memcmp(page, page + 1, (size_t)bytes - 1) == 0;
}

static int file_read(sqlite3_file *file, void *to, int amount, sqlite3_int64 offset)
{
    int code = below(file)->pMethods->xRead(below(file), to, amount, offset);
    if (code != SQLITE_OK || !is_page(file, amount, offset)) return code;
    unsigned char sum[PF_CHECK_BYTES];
    sum_of_page(to, amount, sum);
    const unsigned char *stored = (const unsigned char *)to + amount - PF_CHECK_BYTES;
    if (memcmp(sum, stored, PF_CHECK_BYTES) == 0) return SQLITE_OK;
    return is_blank(to, amount) ? SQLITE_OK : SQLITE_IOERR_DATA;
}

/* The sum is set in SQLite's own copy of the page, whose last bytes it leaves to us: the journal
** must hold pages as they stand in the file, since any client may roll them back. */
static int file_write(sqlite3_file *file, const void *from, int amount, sqlite3_int64 offset)
{
    if (is_page(file, amount, offset)) {
        unsigned char *page = (unsigned char *)(uintptr_t)from;
        sum_of_page(page, amount, page + amount - PF_CHECK_BYTES);
    }
    return below(file)->pMethods->xWrite(below(file), from, amount, offset);
}

static int file_close(sqlite3_file *file)
{
    return below(file)->pMethods->xClose(below(file));
}

static int file_truncate(sqlite3_file *file, sqlite3_int64 size)
{
    return below(file)->pMethods->xTruncate(below(file), size);
}

static int file_sync(sqlite3_file *file, int flags)
{
    return below(file)->pMethods->xSync(below(file), flags);
}

static int file_size(sqlite3_file *file, sqlite3_int64 *size)
{
    return below(file)->pMethods->xFileSize(below(file), size);
}

static int file_lock(sqlite3_file *file, int level)
{
    return below(file)->pMethods->xLock(below(file), level);
}

static int file_unlock(sqlite3_file *file, int level)
{
    return below(file)->pMethods->xUnlock(below(file), level);
}

static int file_reserved(sqlite3_file *file, int *reserved)
{
    return below(file)->pMethods->xCheckReservedLock(below(file), reserved);
}

static int file_control(sqlite3_file *file, int operation, void *argument)
{
    return below(file)->pMethods->xFileControl(below(file), operation, argument);
}

static int file_sector(sqlite3_file *file)
{
    return below(file)->pMethods->xSectorSize(below(file));
}

static int file_traits(sqlite3_file *file)
{
    return below(file)->pMethods->xDeviceCharacteristics(below(file));
}

/* Version 1: neither shared memory (WAL) nor mapped pages, which would go round the check. */
static const sqlite3_io_methods methods = {
    1,         file_close,  file_read,     file_write,   file_truncate, file_sync,   file_size,
    file_lock, file_unlock, file_reserved, file_control, file_sector,   file_traits, NULL,
    NULL,      NULL,        NULL,          NULL,         NULL,
};

static int layer_open(sqlite3_vfs *vfs, const char *path, sqlite3_file *file, int flags,
                      int *flags_out)
{
    layer *own = layer_of(vfs);
    checked_file *checked = (checked_file *)(void *)file;
    checked->base.pMethods = NULL;
    checked->page_bytes = flags & SQLITE_OPEN_MAIN_DB ? own->page_bytes : 0;
    int code = own->below->xOpen(own->below, path, below(file), flags, flags_out);
    if (code == SQLITE_OK) checked->base.pMethods = &methods;
    return code;
}

static int layer_delete(sqlite3_vfs *vfs, const char *path, int sync)
{
    return layer_of(vfs)->below->xDelete(layer_of(vfs)->below, path, sync);
}

static int layer_access(sqlite3_vfs *vfs, const char *path, int flags, int *result)
{
    return layer_of(vfs)->below->xAccess(layer_of(vfs)->below, path, flags, result);
}

static int layer_full_path(sqlite3_vfs *vfs, const char *path, int room, char *full)
{
    return layer_of(vfs)->below->xFullPathname(layer_of(vfs)->below, path, room, full);
}

static int layer_random(sqlite3_vfs *vfs, int bytes, char *to)
{
    return layer_of(vfs)->below->xRandomness(layer_of(vfs)->below, bytes, to);
}

static int layer_sleep(sqlite3_vfs *vfs, int microseconds)
{
    return layer_of(vfs)->below->xSleep(layer_of(vfs)->below, microseconds);
}

static int layer_time(sqlite3_vfs *vfs, double *days)
{
    return layer_of(vfs)->below->xCurrentTime(layer_of(vfs)->below, days);
}

static int layer_last_error(sqlite3_vfs *vfs, int room, char *text)
{
    return layer_of(vfs)->below->xGetLastError(layer_of(vfs)->below, room, text);
}

/* Version 1, and no loading of code: xDlOpen and its kin stay NULL. */
static void fill(layer *own)
{
    own->vfs = (sqlite3_vfs){
        .iVersion = 1,
        .szOsFile = (int)sizeof(checked_file) + own->below->szOsFile,
        .mxPathname = own->below->mxPathname,
        .zName = own->name,
        .xOpen = layer_open,
        .xDelete = layer_delete,
        .xAccess = layer_access,
        .xFullPathname = layer_full_path,
        .xRandomness = layer_random,
        .xSleep = layer_sleep,
        .xCurrentTime = layer_time,
        .xGetLastError = layer_last_error,
    };
}

pf_status pf_page_check_new(int page_bytes, sqlite3_vfs **vfs)
{
    *vfs = NULL;
    layer *own = pf_allocate(1, sizeof *own);
    if (!own) return PF_NO_MEMORY;
    own->below = sqlite3_vfs_find(NULL);
    own->page_bytes = page_bytes;
    snprintf(own->name, sizeof own->name, "passfet-%p", (void *)own);
    if (own->below) fill(own);
    if (!own->below || sqlite3_vfs_register(&own->vfs, 0) != SQLITE_OK) {
        pf_free(own);
        return PF_NO_MEMORY;
    }
    *vfs = &own->vfs;
    return PF_OK;
}

void pf_page_check_free(sqlite3_vfs *vfs)
{
    if (!vfs) return;
    sqlite3_vfs_unregister(vfs);
    pf_free(layer_of(vfs));
}
