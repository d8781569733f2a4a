/* SPDX-License-Identifier: GPL-3.0-or-later
 * Sum of a Chebyshev series (C.W. Clenshaw, Math. Tables Aids Comput. 9 (1955) 118-120, from memory). */
#ifndef MELTWRIGHT_MODEL_SERIES_H
#define MELTWRIGHT_MODEL_SERIES_H

/* c[0] + c[1] T1(x) + ... of n >= 1 terms, x in -1..1. */
static inline double mw_series_at(const double *c, int n, double x)
{
    double b1 = 0, b2 = 0;
    for (int k = n - 1; k > 0; k--) {
        const double b = 2 * x * b1 - b2 + c[k];
        b2 = b1;
        b1 = b;
    }
    return c[0] + x * b1 - b2;
}

#endif
