/* SPDX-License-Identifier: GPL-3.0-or-later
 * Loops that each press on one limit of the machine. n is a multiple of KERNEL_BLOCK. */
#ifndef MELTWRIGHT_BENCH_KERNELS_H
#define MELTWRIGHT_BENCH_KERNELS_H

#include <stddef.h>

enum { KERNEL_BLOCK = 64 };

/* A slice of the arrays that the kernels share. */
typedef struct kernel_slice {
    double *x, *y; /* x in -8..0 at the start of a run; y is written */
    float *f;
    size_t n;
    double out; /* what was computed, so that it must be */
} kernel_slice;

typedef void kernel(kernel_slice *s);

kernel kernel_exp_scalar; /* y = exp(x), one call of libm an element */
kernel kernel_exp_vector; /* the same with the vector form of libm, where the compiler lets the model have it */
kernel kernel_exp_series; /* the same by a polynomial in a plain loop */
kernel kernel_compare;    /* how many f lie below a limit that changes from call to call */
kernel kernel_read;       /* sum of x */
kernel kernel_axpy;       /* y += a x */

#endif
