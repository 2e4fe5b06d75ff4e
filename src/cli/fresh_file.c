/* fresh_file.c: files that appear under their name only once they are whole. */
#include "cli/fresh_file.h"

#include <errno.h>
#include <string.h>

int pf_fail_path(const pf_cli *cli, const char *path)
{
    fprintf(cli->err, "passfet: %s: %s\n", path, errno ? strerror(errno) : "cannot be written");
    return PF_EXIT_SYSTEM;
}

int pf_fresh_open(const pf_cli *cli, pf_fresh_file *file, const char *path)
{
    *file = (pf_fresh_file){0};
    errno = ENAMETOOLONG;
    if (strlen(path) >= PF_PATH_ROOM) return pf_fail_path(cli, path);
    strcpy(file->path, path);
    snprintf(file->fresh, sizeof file->fresh, "%s.new", path);
    file->file = fopen(file->fresh, "w");
    return file->file ? PF_EXIT_DONE : pf_fail_path(cli, path);
}

bool pf_fresh_close(pf_fresh_file *file)
{
    if (!file->file) return true;
    bool good = !ferror(file->file);
    errno = 0;
    if (fclose(file->file) != 0) good = false;
    file->file = NULL;
    return good;
}

int pf_fresh_settle(const pf_cli *cli, const pf_fresh_file *file, bool keep)
{
    if (!file->path[0]) return PF_EXIT_DONE;
    if (keep && rename(file->fresh, file->path) == 0) return PF_EXIT_DONE;
    if (keep) return pf_fail_path(cli, file->path);
    remove(file->fresh);
    return PF_EXIT_DONE;
}
