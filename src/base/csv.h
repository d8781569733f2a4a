/* SPDX-License-Identifier: GPL-3.0-or-later
 * RFC 4180 CSV in constant memory: one record at a time, quotes, CRLF or LF; clear refusals of what spreadsheets do instead
 * (byte order mark, semicolons or tabs between fields, unfinished quotes, bytes that are not UTF-8). */
#ifndef MELTWRIGHT_BASE_CSV_H
#define MELTWRIGHT_BASE_CSV_H

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#include "meltwright/status.h"

enum { MW_CSV_MOST_FIELDS = 512, MW_CSV_LONGEST_RECORD = 1 << 20 };

typedef struct mw_csv_field_view {
    const char *text; /* zero-terminated, unquoted; valid until the next record */
    size_t n;
} mw_csv_field_view;

typedef struct mw_csv_reader mw_csv_reader;

/* Opens a file ("-" is standard input) and reads its header. Refuses empty and repeated column names.
 * Errors: MW_CANNOT_READ, MW_BAD_FILE, MW_NO_MEMORY. */
mw_status mw_csv_open(const char *path, mw_csv_reader **out, mw_error *err);
void mw_csv_close(mw_csv_reader *reader);

/* Column names of the header; borrowed until close. */
size_t mw_csv_columns(const mw_csv_reader *reader);
const char *mw_csv_column_name(const mw_csv_reader *reader, size_t i);

/* Reads the next record; *end is set at the end of the file. Blank lines are passed over. A record with another number of
 * fields than the header is MW_BAD_FILE with both numbers; reading may go on after it. */
mw_status mw_csv_next(mw_csv_reader *reader, bool *end, mw_error *err);
size_t mw_csv_count(const mw_csv_reader *reader);
mw_csv_field_view mw_csv_get(const mw_csv_reader *reader, size_t i);
/* Line (from 1) on which the current record starts. */
long mw_csv_line(const mw_csv_reader *reader);

#endif
