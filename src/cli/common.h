/* SPDX-License-Identifier: GPL-3.0-or-later
 * What the commands share: exit codes, messages, values from options, cards, outputs. */
#ifndef MELTWRIGHT_CLI_COMMON_H
#define MELTWRIGHT_CLI_COMMON_H

#include <stdbool.h>
#include <stdio.h>

#include "base/file.h"
#include "cli/options.h"
#include "meltwright/alloy.h"
#include "meltwright/study.h"
#include "meltwright/table.h"

enum { EXIT_DONE = 0, EXIT_NO = 1, EXIT_MISUSE = 2, EXIT_BAD_INPUT = 3, EXIT_NOT_WRITTEN = 4 };

/* Prints "meltwright COMMAND: text" (with a pointer to --help after misuse) and gives the exit code of the status. */
int complain(const char *command, const mw_error *err);
/* A remark on standard error, unless --quiet. */
void remark(const arguments *args, const char *format, ...)
#if defined(__GNUC__)
    __attribute__((format(printf, 2, 3)))
#endif
    ;

/* ---- values ---- */
bool given(const arguments *args, option_id id);
/* Not given: MW_OK and *si is left alone. Errors: MW_BAD_VALUE with the option's name. */
mw_status read_quantity(const arguments *args, option_id id, mw_quantity quantity, double *si, mw_error *err);
mw_status read_axis(const arguments *args, option_id id, mw_quantity quantity, double **value, size_t *n, mw_error *err);
mw_status read_model(const arguments *args, mw_model *out, mw_error *err);
/* Standard uncertainty of the beam diameter in percent, 0 to 100; unchanged when not given. */
mw_status read_beam_doubt(const arguments *args, double *out_pct, mw_error *err);
mw_status read_overrides(const arguments *args, mw_overrides *out, mw_error *err);
/* D4sigma in m from the one beam option; NaN when none is given and `required` is false. */
mw_status read_beam(const arguments *args, bool required, double *d4sigma_m, mw_error *err);
/* Power, speed, hatch, layer, preheat and beam as one setting; what is not given: NaN, layer 0 (bare plate), preheat 20 C. */
mw_status read_setting(const arguments *args, bool beam_required, mw_setting *out, mw_error *err);
mw_status read_threads(const arguments *args, int *out, mw_error *err);
/* --shard I/N; 1 of 1 when not given. */
typedef struct shard {
    size_t part, parts;
} shard;
mw_status read_shard(const arguments *args, shard *out, mw_error *err);
/* First of the part's items among n, and how many: parts differ by at most one item. */
void shard_range(const shard *s, size_t n, size_t *first, size_t *count);
typedef enum output_format { FORMAT_TEXT, FORMAT_CSV, FORMAT_JSON } output_format;
/* From --format, else from the ending of -o, else `standard`. */
mw_status read_format(const arguments *args, output_format standard, output_format *out, mw_error *err);
mw_status refuse_words(const arguments *args, mw_error *err);
mw_status need(const arguments *args, option_id id, mw_error *err);

/* ---- cards ---- */
enum { MOST_FOLDERS = 16 };
typedef struct folders {
    const char *path[MOST_FOLDERS];
    size_t n;
    char text[8192];
} folders;
/* Where named cards are looked for: $MELTWRIGHT_ALLOYS, the installed place beside the program, the source tree. */
void find_folders(folders *out);
mw_status load_alloy(const char *name, mw_alloy **out, mw_error *err);
/* Alloy (NULL when not given) and plan from the options. */
mw_status make_plan(const arguments *args, mw_alloy **alloy, mw_plan *plan, mw_error *err);

/* ---- outputs ---- */
typedef struct output {
    FILE *to;          /* standard output, or the file's temporary */
    mw_file_out file;
    const arguments *args;
    const char *path;  /* NULL for standard output */
} output;
mw_status open_output(const arguments *args, output *out, mw_error *err);
/* Commits the file, and for a CSV file writes NAME.csv.json beside it (provenance may be NULL). */
mw_status close_output(output *out, const mw_provenance *provenance, mw_error *err);
void drop_output(output *out);
/* Fills command and options; the strings live as long as `args`. */
typedef struct provenance_store {
    const char *option[OPTION_COUNT], *value[OPTION_COUNT];
} provenance_store;
void fill_provenance(const arguments *args, const mw_plan *plan, provenance_store *store, mw_provenance *out);

int run_card(const arguments *args);
int run_track(const arguments *args);
int run_track_table(const arguments *args);
int run_sweep(const arguments *args);
int run_map(const arguments *args);

#endif
