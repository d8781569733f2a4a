/* SPDX-License-Identifier: GPL-3.0-or-later
 * The same pools by a Python with SciPy, where there is one. */
#ifndef MELTWRIGHT_BENCH_SCIPY_H
#define MELTWRIGHT_BENCH_SCIPY_H

#include <stdbool.h>

#include "pool_set.h"

typedef struct scipy {
    const char *python; /* a Python that can import scipy */
} scipy;

bool scipy_find(scipy *out);

/* Seconds a pool by the script's own clock, start-up left out; NaN when it failed. *worst: error over the set. */
double scipy_pools(const scipy *s, const char *clock, const pool_set *set, double *worst);

#endif
