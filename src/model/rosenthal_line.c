/* SPDX-License-Identifier: GPL-3.0-or-later
 * Half width of Rosenthal's pool without a root to search. For small n it is n, for large n sqrt(2 n/e): what is left between the two limits,
 * G = (rho/n)^2 (1 + e n/2), is smooth in X = 2 n/(n + 1.5) - 1 over all n. */
#include "model/rosenthal_line.h"

#include <math.h>

#include "model/wide.h"

/* G in powers of X: interpolation at the 17 Chebyshev nodes; the unit test holds it against mw_rosenthal_half_width. */
enum { TERMS = 17 };
static const double powers[TERMS] = {
    0.89223453667735297, 0.037939227646555329, 0.069782059075550434, -0.021000413737499134,
    0.023043042924080173, -0.0094381270787673825, 0.008508216194811076, -0.0051613585328183246,
    0.0045067726712956918, 0.0015346850344769548, -0.0015511512964048993, -0.0064092206243603414,
    0.0058499995526231658, 0.0046865408839460131, -0.0043291049161755489, -0.0021513018535211006,
    0.0019555989990963142};

MW_WIDE void mw_rosenthal_half_widths(const double *n, size_t count, double *out)
{
    const double half_e = 1.3591409142295226;
#pragma omp simd
    for (size_t i = 0; i < count; i++) {
        const double x = 2 * n[i] / (n[i] + 1.5) - 1;
        double g = powers[TERMS - 1];
        for (int k = TERMS - 2; k >= 0; k--)
            g = g * x + powers[k];
        out[i] = n[i] * sqrt(g / (1 + half_e * n[i]));
    }
}
