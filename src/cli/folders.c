/* SPDX-License-Identifier: GPL-3.0-or-later
 * Where named cards are found. */
#define _POSIX_C_SOURCE 200809L
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "cli/common.h"

static bool is_folder(const char *path)
{
    struct stat info;
    return stat(path, &info) == 0 && S_ISDIR(info.st_mode);
}

/* Appends `first` + `second` when it is a folder and there is room. */
static void add(folders *f, size_t *used, const char *first, size_t n, const char *second)
{
    char *at = f->text + *used;
    const size_t size = n + strlen(second) + 1;
    if (f->n == MOST_FOLDERS || size > sizeof f->text - *used)
        return;
    memcpy(at, first, n);
    strcpy(at + n, second);
    if (!is_folder(at))
        return;
    f->path[f->n++] = at;
    *used += size;
}

void find_folders(folders *out)
{
    size_t used = 0;
    out->n = 0;
    const char *list = getenv("MELTWRIGHT_ALLOYS");
    while (list != NULL && *list != '\0') {
        const size_t n = strcspn(list, ":");
        if (n > 0)
            add(out, &used, list, n, "");
        list += n + (list[n] == ':');
    }
    char self[4096];
    const ssize_t length = readlink("/proc/self/exe", self, sizeof self - 1);
    if (length <= 0)
        return;
    self[length] = '\0';
    char *slash = strrchr(self, '/');
    const size_t n = slash != NULL ? (size_t)(slash - self) : 0;
    add(out, &used, self, n, "/../share/meltwright/alloys"); /* installed */
    add(out, &used, self, n, "/../../alloys");               /* build/FLAVOUR in the source tree */
}

mw_status load_alloy(const char *name, mw_alloy **out, mw_error *err)
{
    folders where;
    find_folders(&where);
    return mw_alloy_find(name, where.path, where.n, out, err);
}
