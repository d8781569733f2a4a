/* SPDX-License-Identifier: GPL-3.0-or-later
 * Times that can be compared on a machine whose clock rate drifts: what is compared runs in turns, and
 * the ratio of each turn counts. */
#ifndef MELTWRIGHT_BENCH_MEASURE_H
#define MELTWRIGHT_BENCH_MEASURE_H

#include <stddef.h>

/* Seconds of a clock that never steps back. */
double bench_now(void);

/* Sorts the values; NaN when there are none. */
double bench_median(double *value, size_t n);

/* Does the work once and returns seconds per unit of it; NaN when it could not be done. */
typedef double (*bench_run)(void *work);

typedef struct bench_pair {
    double ours, other; /* medians, seconds per unit */
    double ratio;       /* median over the turns of other / ours; not the ratio of the medians */
} bench_pair;

enum { BENCH_MOST_ROUNDS = 25 };

/* In each round: ours, other, ours again (their mean, so that a steady drift cancels). */
bench_pair bench_in_turns(bench_run ours, void *our_work, bench_run other, void *other_work, int rounds);

#endif
