/* SPDX-License-Identifier: GPL-3.0-or-later
 * The Gaussian source's defining integral by GSL's adaptive quadrature, for the tests. */
#ifndef MELTWRIGHT_TESTS_GAUSSIAN_QUADRATURE_H
#define MELTWRIGHT_TESTS_GAUSSIAN_QUADRATURE_H

#include "check.h"

#include <gsl/gsl_integration.h>
#include <stdbool.h>

/* The defining integral in time, scaled by sigma^2/D as a fair user would, for GSL; `slope`: that of -dI/dX instead. */
typedef struct point {
    double x, y, z, p;
    bool slope;
} point;

static inline double integrand(double w, void *v)
{
    const point *q = v;
    const double w2 = w * w, s = 1 + w2, reach = q->x + q->p * w2;
    return exp(-(reach * reach + q->y * q->y) / (2 * s) - (q->z == 0 ? 0 : q->z * q->z / (2 * w2))) / s *
           (q->slope ? reach / s : 1);
}

/* *doubt is the error that GSL itself admits; its return codes say no more than that. */
static inline double quadrature(point q, gsl_integration_workspace *ws, double *doubt)
{
    gsl_function f = {integrand, &q};
    /* Pieces for each decade above w = z, where depth cuts in, and around w = sqrt(-x/P), where the heat of a passing beam is. */
    const double bump = q.x < 0 ? sqrt(-q.x / q.p) : 1, around[] = {bump / 2, bump * 0.9, bump, bump * 1.1, 2 * bump + 1};
    double total = 0, from = 0, to = 3 * fabs(q.z);
    *doubt = 0;
    for (int i = 0; i < 5;) {
        double piece, error;
        const bool decade = to > 0 && to < around[0] / 2;
        const double end = decade ? to : around[i];
        (void)gsl_integration_qag(&f, from, end, 1e-15, 1e-11, 2000, GSL_INTEG_GAUSS61, ws, &piece, &error);
        total += piece;
        *doubt += error;
        from = end;
        to *= 10;
        i += !decade;
    }
    double tail, error;
    (void)gsl_integration_qagiu(&f, from, 1e-14, 1e-11, 2000, ws, &tail, &error);
    *doubt += error;
    return total + tail;
}

#endif
