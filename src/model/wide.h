/* SPDX-License-Identifier: GPL-3.0-or-later
 * Wide vectors where the machine has them, one binary: the marked function is compiled for several levels of x86-64 and the best is
 * chosen at start. With glibc the vector form of exp (error below 4 units in the last place) serves the loops marked `omp simd`; nothing
 * else changes, so results differ between levels by rounding of exp alone. Elsewhere, and with MW_PLAIN_VECTORS, the macro is empty and the code
 * is plain. */
#ifndef MELTWRIGHT_MODEL_WIDE_H
#define MELTWRIGHT_MODEL_WIDE_H

#include <math.h>

#if defined(__x86_64__) && defined(__GLIBC__) && defined(__GNUC__) && !defined(__clang__) && !defined(__SANITIZE_ADDRESS__) && \
    !defined(__SANITIZE_THREAD__) && !defined(MW_PLAIN_VECTORS) && defined(_OPENMP)
double exp(double) __attribute__((simd("notinbranch")));
#define MW_WIDE __attribute__((target_clones("arch=x86-64-v4", "arch=x86-64-v3", "default")))
#else
#define MW_WIDE
#endif

#endif
