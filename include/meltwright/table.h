/* SPDX-License-Identifier: GPL-3.0-or-later
 * Results as rows: the one list of output columns, and writers of CSV and JSON from it. Trade units; the unit is the tail of the key. */
#ifndef MELTWRIGHT_TABLE_H
#define MELTWRIGHT_TABLE_H

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

#include "meltwright/study.h"

typedef struct mw_column {
    const char *key;      /* "width_um" */
    const char *meaning;  /* one line, for help and schema */
    bool is_text;         /* mode, verdict, status; all others are numbers */
    bool is_input;        /* one of the setting's own columns */
} mw_column;

/* The columns in output order. */
size_t mw_column_count(void);
const mw_column *mw_column_at(size_t i);

/* Value of a number column in the unit of its key; NaN = no value (an empty cell, JSON null). */
double mw_column_number(size_t i, const mw_result *result);
/* Value of a text column; "" = no value. Static storage. */
const char *mw_column_text(size_t i, const mw_result *result);

/* One cell as CSV text: a number that reads back exactly, a word, or nothing. Returns the length. */
size_t mw_column_cell(size_t i, const mw_result *result, char *out, size_t size);

/* Comma-separated header and rows of all columns, without line end; the caller adds its own columns before or after.
 * `skip[i]` leaves column i out (NULL: none). */
void mw_csv_header(FILE *to, const bool *skip);
void mw_csv_row(FILE *to, const mw_result *result, const bool *skip);
/* One field quoted as RFC 4180 asks, only where needed. */
void mw_csv_field(FILE *to, const char *text, size_t n);

/* {"power_W": 200, ...} on one line; numbers without a value are null. */
void mw_json_result(FILE *to, const mw_result *result);
/* A JSON string with its quotes; control characters, quotes and backslashes escaped. */
void mw_json_string(FILE *to, const char *text);
/* A JSON number, or null where it is not finite. */
void mw_json_number(FILE *to, double value);

/* What made an output: goes into JSON, and beside a CSV file as NAME.csv.json. */
typedef struct mw_provenance {
    const char *command;          /* "sweep" */
    const mw_plan *plan;          /* alloy (name, file, hash), model; NULL where rows differ */
    size_t n_card;                /* cards used, when plan is NULL */
    const mw_alloy *const *card;
    size_t n_option;              /* option and value as given, in order */
    const char *const *option, *const *option_value;
} mw_provenance;
/* {"program": "meltwright", "version": ..., "command": ..., "model": ..., "cards": [...], "options": {...}, "limits": {...}} */
void mw_json_provenance(FILE *to, const mw_provenance *provenance);

#endif
