/* SPDX-License-Identifier: GPL-3.0-or-later
 * JSON as cJSON reads it, but strict and with lines: duplicate keys, loose numbers, broken UTF-8, deep nesting and
 * trailing text are refused with file and line before cJSON sees the text. */
#ifndef MELTWRIGHT_BASE_JSON_H
#define MELTWRIGHT_BASE_JSON_H

#include <cjson/cJSON.h>

#include "meltwright/status.h"

typedef struct mw_json {
    cJSON *root;    /* INVARIANT: every node's valueint is the line (from 1) on which its value starts */
    char hash[17];  /* FNV-1a 64 of the bytes, hex */
} mw_json;

enum { MW_JSON_MOST_BYTES = 4 << 20, MW_JSON_DEEPEST = 32, MW_JSON_MOST_KEYS = 1000 };

/* Reads a whole file. Errors: MW_CANNOT_READ, MW_BAD_FILE, MW_NO_MEMORY. */
mw_status mw_json_read(const char *path, mw_json *out, mw_error *err);

/* The same for bytes in memory; `name` stands for the file in messages. */
mw_status mw_json_parse(const char *name, const char *bytes, size_t n, mw_json *out, mw_error *err);

void mw_json_free(mw_json *json);

/* The line of a node. */
long mw_json_line(const cJSON *node);

#endif
