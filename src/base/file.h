/* SPDX-License-Identifier: GPL-3.0-or-later
 * Whole files in, whole files out: an output appears complete under its name or not at all. */
#ifndef MELTWRIGHT_BASE_FILE_H
#define MELTWRIGHT_BASE_FILE_H

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#include "meltwright/status.h"

/* Reads a file of at most `most` bytes; *bytes gets a closing zero that *n does not count. free() it.
 * Errors: MW_CANNOT_READ, MW_TOO_LARGE, MW_NO_MEMORY. */
mw_status mw_file_read(const char *path, size_t most, char **bytes, size_t *n, mw_error *err);

/* FNV-1a 64 of the bytes as 16 hex digits. */
void mw_hash_text(const char *bytes, size_t n, char hash[17]);

/* A file being written beside its final place. */
typedef struct mw_file_out {
    FILE *stream;
    char *path;      /* final name */
    char *temporary; /* name until mw_file_commit */
    bool overwrite;
} mw_file_out;

/* Opens the temporary in the target's folder. Without `overwrite` an existing target is refused at once and again at commit.
 * Errors: MW_CANNOT_WRITE, MW_NO_MEMORY. */
mw_status mw_file_create(const char *path, bool overwrite, mw_file_out *out, mw_error *err);
/* Flushes, checks, syncs and moves into place. On failure the temporary is gone and the target untouched. */
mw_status mw_file_commit(mw_file_out *out, mw_error *err);
/* Removes the temporaries of all files that are being written. Safe in a signal handler; for programs that end at once after it. */
void mw_file_remove_unfinished(void);
/* Gives up: removes the temporary. Safe to call after commit and on a zeroed struct. */
void mw_file_discard(mw_file_out *out);

#endif
