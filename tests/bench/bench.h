/* SPDX-License-Identifier: GPL-3.0-or-later
 * The speed table: its sections, and how a line of it is written. */
#ifndef MELTWRIGHT_BENCH_H
#define MELTWRIGHT_BENCH_H

#include "measure.h"
#include "meltwright/study.h"

typedef struct bench {
    const char *program; /* the built meltwright */
    int wrong;           /* disagreements and failures: the bench then ends with 1 */
} bench;

void bench_pools(bench *b);
void bench_tables(bench *b);
void bench_machine(bench *b);
void bench_growth(bench *b);
void bench_program(bench *b);

/* The headings of a section; `ours` and `other` head the two columns of medians. */
void bench_heading(const char *title, const char *ours, const char *other, const char *ratio);
/* One line. Seconds are per unit; NaN leaves the place empty. `note` says what agrees with what, or NULL. */
void bench_line(const char *what, double ours_s, double other_s, double ratio, const char *note);
/* A time with three digits and its unit, "1.23 us". */
void bench_time(char out[24], double seconds);

/* Prints the error and ends the program unless the status is a success. */
void bench_stop_on(mw_status status, const mw_error *err);

#endif
