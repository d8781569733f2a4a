/* SPDX-License-Identifier: GPL-3.0-or-later
 * The pools that are timed, and how far two answers are apart. */
#ifndef MELTWRIGHT_BENCH_POOL_SET_H
#define MELTWRIGHT_BENCH_POOL_SET_H

#include <stddef.h>

#include "meltwright/pool.h"

enum { POOL_SET_MOST = 100 };

typedef struct pool_set {
    mw_source source[POOL_SET_MOST];
    mw_medium medium[POOL_SET_MOST];
    double width_m[POOL_SET_MOST], depth_m[POOL_SET_MOST], length_m[POOL_SET_MOST]; /* high-precision reference */
    size_t n;
} pool_set;

/* All melting rows of tests/data/gaussian_pools.csv; ends the program when the file cannot be read. */
void pool_set_load(pool_set *out);
void pool_set_drop(pool_set *set, size_t i);

/* Largest relative difference from the reference in width, depth and length; infinite where one is no number. */
double pool_set_error(const pool_set *set, size_t i, double width_m, double depth_m, double length_m);

#endif
