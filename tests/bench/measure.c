/* SPDX-License-Identifier: GPL-3.0-or-later
 * Clock, median, and measuring in turns. */
#define _POSIX_C_SOURCE 200809L
#include "measure.h"

#include <gsl/gsl_sort.h>
#include <gsl/gsl_statistics.h>
#include <math.h>
#include <time.h>

double bench_now(void)
{
    struct timespec t;
    (void)clock_gettime(CLOCK_MONOTONIC, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

double bench_median(double *value, size_t n)
{
    if (n == 0)
        return NAN;
    gsl_sort(value, 1, n);
    return gsl_stats_median_from_sorted_data(value, 1, n);
}

bench_pair bench_in_turns(bench_run ours, void *our_work, bench_run other, void *other_work, int rounds)
{
    double our[BENCH_MOST_ROUNDS], their[BENCH_MOST_ROUNDS], ratio[BENCH_MOST_ROUNDS];
    size_t n = 0;
    for (int i = 0; i < rounds && n < BENCH_MOST_ROUNDS; i++) {
        const double before = ours(our_work), between = other(other_work), after = ours(our_work);
        if (!(before > 0 && between > 0 && after > 0))
            continue;
        our[n] = (before + after) / 2;
        their[n] = between;
        ratio[n] = their[n] / our[n];
        n++;
    }
    return (bench_pair){bench_median(our, n), bench_median(their, n), bench_median(ratio, n)};
}
