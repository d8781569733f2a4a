/* SPDX-License-Identifier: GPL-3.0-or-later
 * Whole files in and out. */
#define _POSIX_C_SOURCE 200809L
#include "base/file.h"

#include <errno.h>
#include <inttypes.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* Names of temporaries, for a signal handler: each slot is set after its name is whole and cleared before it is freed. */
enum { MOST_UNFINISHED = 8 };
static char *volatile unfinished[MOST_UNFINISHED];

static void note_unfinished(char *name, char *was)
{
    for (int i = 0; i < MOST_UNFINISHED; i++)
        if (unfinished[i] == was) {
            unfinished[i] = name;
            return;
        }
}

void mw_file_remove_unfinished(void)
{
    for (int i = 0; i < MOST_UNFINISHED; i++)
        if (unfinished[i] != NULL)
            (void)unlink(unfinished[i]);
}

mw_status mw_file_read(const char *path, size_t most, char **bytes, size_t *n, mw_error *err)
{
    *bytes = NULL;
    *n = 0;
    FILE *f = fopen(path, "rb");
    if (f == NULL)
        return mw_fail(err, MW_CANNOT_READ, path, 0, "cannot be opened: %s", strerror(errno));
    mw_status status = MW_OK;
    char *buffer = NULL;
    size_t used = 0, room = 0;
    struct stat info;
    if (fstat(fileno(f), &info) == 0 && S_ISDIR(info.st_mode)) {
        status = mw_fail(err, MW_CANNOT_READ, path, 0, "is a folder, not a file");
        goto done;
    }
    for (;;) {
        if (used + 1 >= room) {
            room = room == 0 ? 16384 : room * 2;
            char *larger = realloc(buffer, room);
            if (larger == NULL) {
                status = mw_fail(err, MW_NO_MEMORY, path, 0, "out of memory");
                goto done;
            }
            buffer = larger;
        }
        const size_t got = fread(buffer + used, 1, room - used - 1, f);
        used += got;
        if (used > most) {
            status = mw_fail(err, MW_TOO_LARGE, path, 0, "larger than the %zu bytes allowed here", most);
            goto done;
        }
        if (got == 0)
            break;
    }
    if (ferror(f)) {
        status = mw_fail(err, MW_CANNOT_READ, path, 0, "reading failed: %s", strerror(errno));
        goto done;
    }
    buffer[used] = '\0';
    *bytes = buffer;
    *n = used;
    buffer = NULL;
done:
    free(buffer);
    (void)fclose(f);
    return status;
}

void mw_hash_text(const char *bytes, size_t n, char hash[17])
{
    uint64_t h = UINT64_C(14695981039346656037);
    for (size_t i = 0; i < n; i++)
        h = (h ^ (unsigned char)bytes[i]) * UINT64_C(1099511628211);
    (void)snprintf(hash, 17, "%016" PRIx64, h);
}

static mw_status refuse_existing(const char *path, mw_error *err)
{
    return mw_fail(err, MW_CANNOT_WRITE, path, 0, "exists already; --force replaces it");
}

mw_status mw_file_create(const char *path, bool overwrite, mw_file_out *out, mw_error *err)
{
    memset(out, 0, sizeof *out);
    struct stat info;
    const bool exists = stat(path, &info) == 0;
    if (exists && S_ISDIR(info.st_mode))
        return mw_fail(err, MW_CANNOT_WRITE, path, 0, "is a folder, not a file");
    if (exists && !overwrite)
        return refuse_existing(path, err);
    const size_t length = strlen(path);
    out->overwrite = overwrite;
    out->path = malloc(length + 1);
    out->temporary = malloc(length + sizeof ".part-XXXXXX");
    if (out->path == NULL || out->temporary == NULL) {
        mw_file_discard(out);
        return mw_fail(err, MW_NO_MEMORY, path, 0, "out of memory");
    }
    memcpy(out->path, path, length + 1);
    (void)sprintf(out->temporary, "%s.part-XXXXXX", path);
    const int fd = mkstemp(out->temporary);
    if (fd < 0) {
        const int why = errno;
        free(out->temporary);
        out->temporary = NULL;
        mw_file_discard(out);
        return mw_fail(err, MW_CANNOT_WRITE, path, 0, "cannot be written: %s", strerror(why));
    }
    note_unfinished(out->temporary, NULL);
    /* mkstemp gives 0600; a result is meant to be read like any other file of the user. */
    const mode_t mask = umask(0);
    (void)umask(mask);
    (void)fchmod(fd, 0666 & ~mask);
    out->stream = fdopen(fd, "wb");
    if (out->stream == NULL) {
        (void)close(fd);
        mw_file_discard(out);
        return mw_fail(err, MW_CANNOT_WRITE, path, 0, "cannot be written: %s", strerror(errno));
    }
    return MW_OK;
}

mw_status mw_file_commit(mw_file_out *out, mw_error *err)
{
    errno = 0;
    const bool lost = ferror(out->stream) != 0;
    bool good = fflush(out->stream) == 0 && !lost && fsync(fileno(out->stream)) == 0;
    int why = errno;
    if (fclose(out->stream) != 0) {
        why = why != 0 ? why : errno;
        good = false;
    }
    out->stream = NULL;
    mw_status status = MW_OK;
    if (!good) {
        status = mw_fail(err, MW_CANNOT_WRITE, out->path, 0, "writing failed: %s",
                         why != 0 ? strerror(why) : "the disk took only a part");
    } else if (out->overwrite) {
        if (rename(out->temporary, out->path) != 0)
            status = mw_fail(err, MW_CANNOT_WRITE, out->path, 0, "cannot be written: %s", strerror(errno));
    } else if (link(out->temporary, out->path) != 0) { /* unlike rename, link never replaces */
        status = errno == EEXIST ? refuse_existing(out->path, err)
                 : rename(out->temporary, out->path) == 0
                     ? MW_OK
                     : mw_fail(err, MW_CANNOT_WRITE, out->path, 0, "cannot be written: %s", strerror(errno));
    }
    mw_file_discard(out);
    return status;
}

void mw_file_discard(mw_file_out *out)
{
    if (out->stream != NULL)
        (void)fclose(out->stream);
    if (out->temporary != NULL) {
        (void)unlink(out->temporary);
        note_unfinished(NULL, out->temporary);
    }
    free(out->temporary);
    free(out->path);
    memset(out, 0, sizeof *out);
}
