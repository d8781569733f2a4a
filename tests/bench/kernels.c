/* SPDX-License-Identifier: GPL-3.0-or-later
 * The loops. Compiled for several widths like those of the model. */
#include "kernels.h"

#include <math.h>
#include <stdint.h>
#include <string.h>

#include "model/wide.h"

/* Through a pointer that the compiler may not see through, else it could turn the loop into the vector form. */
static double (*volatile const scalar_exp)(double) = exp;

void kernel_exp_scalar(kernel_slice *s)
{
    double (*const f)(double) = scalar_exp;
    for (size_t i = 0; i < s->n; i++)
        s->y[i] = f(s->x[i]);
    s->out = s->y[s->n - 1];
}

MW_WIDE void kernel_exp_vector(kernel_slice *s)
{
    const double *x = s->x;
    double *y = s->y;
    const size_t n = s->n;
#pragma omp simd
    for (size_t i = 0; i < n; i++)
        y[i] = exp(x[i]);
    s->out = y[n - 1];
}

/* exp(x) = 2^k exp(r), |r| <= ln 2 / 2; Taylor to r^13 leaves less than (0.347)^14 / 14! = 4e-18. k comes from
 * adding 1.5 * 2^52, in whose last digits it then stands; ln 2 is split so that k times its first part is exact. */
MW_WIDE void kernel_exp_series(kernel_slice *s)
{
    static const double to_integer = 6755399441055744.0, ln2_high = 0x1.62e42fee00000p-1,
                        ln2_low = 0x1.a39ef35793c76p-33;
    const double *x = s->x;
    double *y = s->y;
    const size_t n = s->n;
#pragma omp simd
    for (size_t i = 0; i < n; i++) {
        const double shifted = x[i] * 1.4426950408889634 + to_integer, k = shifted - to_integer;
        const double r = (x[i] - k * ln2_high) - k * ln2_low;
        double p = 1.0 / 6227020800.0;
        p = p * r + 1.0 / 479001600.0;
        p = p * r + 1.0 / 39916800.0;
        p = p * r + 1.0 / 3628800.0;
        p = p * r + 1.0 / 362880.0;
        p = p * r + 1.0 / 40320.0;
        p = p * r + 1.0 / 5040.0;
        p = p * r + 1.0 / 720.0;
        p = p * r + 1.0 / 120.0;
        p = p * r + 1.0 / 24.0;
        p = p * r + 1.0 / 6.0;
        p = p * r + 0.5;
        p = p * r + 1.0;
        p = p * r + 1.0;
        uint64_t bits, power;
        memcpy(&bits, &shifted, sizeof bits);
        power = (bits + 1023) << 52;
        double scale;
        memcpy(&scale, &power, sizeof scale);
        y[i] = p * scale;
    }
    s->out = y[n - 1];
}

MW_WIDE void kernel_compare(kernel_slice *s)
{
    const float *f = s->f;
    const float limit = (float)s->out;
    const size_t n = s->n;
    int32_t below = 0;
#pragma omp simd reduction(+ : below)
    for (size_t i = 0; i < n; i++)
        below += f[i] < limit;
    /* The next limit depends on this count, so that no call can be left out. */
    s->out = -8 + 8 * (double)below / (double)(n + 1);
}

MW_WIDE void kernel_read(kernel_slice *s)
{
    const double *x = s->x;
    const size_t n = s->n;
    double sum = 0;
#pragma omp simd reduction(+ : sum)
    for (size_t i = 0; i < n; i++)
        sum += x[i];
    s->out = sum;
}

MW_WIDE void kernel_axpy(kernel_slice *s)
{
    const double *x = s->x;
    double *y = s->y;
    const size_t n = s->n;
#pragma omp simd
    for (size_t i = 0; i < n; i++)
        y[i] += 0.5 * x[i];
    s->out = y[n - 1];
}
