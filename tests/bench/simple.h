/* SPDX-License-Identifier: GPL-3.0-or-later
 * The pool of a moving Gaussian source as a careful user would write it in an afternoon with GSL: the integral by
 * adaptive quadrature, sizes by general-purpose search. meltwright is timed against it and shares no code with it. */
#ifndef MELTWRIGHT_BENCH_SIMPLE_H
#define MELTWRIGHT_BENCH_SIMPLE_H

#include <gsl/gsl_integration.h>
#include <stdbool.h>

#include "meltwright/pool.h"

typedef enum simple_way {
    SIMPLE_BISECTION, /* golden section over x for the extreme, bisection for the isotherm */
    SIMPLE_BRENT      /* Brent's root finder for the isotherm, Brent's minimiser over x inside it */
} simple_way;

/* Both take out of the integrand's way what sends the quadrature astray in raw seconds. */
typedef enum simple_clock {
    SIMPLE_TIME,     /* alpha t / sigma^2 */
    SIMPLE_ROOT_TIME /* w, 2 alpha t = sigma^2 w^2: no root at t = 0, so fewer points */
} simple_clock;

/* What is asked of the quadrature and of the searches, all relative. Searches for a place stop earlier: an extreme is
 * flat there. */
#define SIMPLE_QUADRATURE 1e-9
#define SIMPLE_SIZE 1e-8
#define SIMPLE_PLACE 1e-4
enum { SIMPLE_INTERVALS = 1000 }; /* the workspace must hold as many */

typedef struct simple_pool {
    double width_m, depth_m, length_m;
    long integrals; /* spent on it */
} simple_pool;

/* False where nothing melts or a search failed. Turn GSL's error handler off first. */
bool simple_pool_compute(const mw_source *source, const mw_medium *medium, simple_way way, simple_clock clock,
                         gsl_integration_workspace *ws, simple_pool *out);

#endif
