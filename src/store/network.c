/* network.c: file systems across a network, by the numbers of statfs(2). */
#include "store/network.h"

#include <stddef.h>
#ifdef __linux__
#include <sys/vfs.h>
#endif

/* Numbers as listed in the manual page statfs(2), Linux man-pages 6.03. */
static const unsigned long network_types[] = {
    0x6969,     /* NFS */
    0xFF534D42, /* CIFS */
    0xFE534D42, /* SMB2 */
    0x517B,     /* SMB */
    0x564C,     /* NCP */
    0x73757245, /* Coda */
    0x5346414F, /* AFS */
    0x00C36400, /* Ceph */
    0x01021997, /* 9P */
    0x65735546, /* FUSE, as sshfs */
};

const char *pf_network_warning(long file_system_type)
{
    unsigned long type = (unsigned long)file_system_type & 0xFFFFFFFFUL;
    for (size_t i = 0; i < sizeof network_types / sizeof *network_types; i++)
        if (network_types[i] == type)
            return "the database lies on a network file system, where locks may fail and two "
                   "people's imports may damage it; keep it on a disk of one machine and let the "
                   "others work there, or let one person import and hand out copies made by backup";
    return NULL;
}

const char *pf_network_warning_of(const char *path)
{
#ifdef __linux__
    struct statfs facts;
    return statfs(path, &facts) == 0 ? pf_network_warning((long)facts.f_type) : NULL;
#else
    (void)path;
    return NULL;
#endif
}
