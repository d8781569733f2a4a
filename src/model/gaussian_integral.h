/* SPDX-License-Identifier: GPL-3.0-or-later
 * The Gaussian source's integral with the averages that Newton steps need, all from one pass over the nodes. Lengths in sigma. */
#ifndef MELTWRIGHT_MODEL_GAUSSIAN_INTEGRAL_H
#define MELTWRIGHT_MODEL_GAUSSIAN_INTEGRAL_H

/* ln I and means over the integrand (weights sum to one); S = 1 + w^2, g = (X + P w^2)/S. With them
 *   I_X/I = -g          I_XX/I = gg - s        I_q/I = -t/2        I_Xq/I = gt/2
 * where q = Y^2 and t = 1/S on the surface, q = Z^2 and t = 1/w^2 below it. */
typedef struct mw_moments {
    double log_i;
    double g;  /* <g>         */
    double gg; /* <g^2>       */
    double s;  /* <1/S>       */
    double t;  /* <t>         */
    double gt; /* <g t>       */
} mw_moments;

/* At (x, sqrt(y2), 0): sinh map, trapezoid rule. */
void mw_gaussian_surface(double x, double y2, double peclet, mw_moments *out);
/* At (x, 0, z), z > 0 however small: exponential map, trapezoid rule. */
void mw_gaussian_below(double x, double z, double peclet, mw_moments *out);

/* The slowest beam that the rules still resolve. The pool of a slower one differs from it by a share of 1e-8 times its own size
 * in sigma, which no beam in use comes near (v = 1 um/s). */
#define MW_LEAST_PECLET 1e-8

#endif
