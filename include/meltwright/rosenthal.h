/* SPDX-License-Identifier: GPL-3.0-or-later
 * Moving point source on a semi-infinite body: D. Rosenthal, Trans. ASME 68 (1946) 849-866 (from memory);
 * dimensionless form after N. Christensen, V. de L. Davies, K. Gjermundsen, Brit. Weld. J. 12 (1965) 54-75 (from memory).
 *
 *   T - T0 = Q / (2 pi k r) * exp(-v (r + x) / (2 alpha)),  r^2 = x^2 + y^2 + z^2,  alpha = k / (rho c)
 *
 * Lengths in 2 alpha / v make the pool depend on one number, n = Q v / (4 pi alpha k (Tm - T0)).
 * Holds for conduction with constant properties, a body thick against the pool, steady state, and distances large against the beam.
 * There is no peak temperature (T is infinite at the source), so none is given. */
#ifndef MELTWRIGHT_ROSENTHAL_H
#define MELTWRIGHT_ROSENTHAL_H

#include "meltwright/pool.h"
#include "meltwright/status.h"

/* The operating parameter n of a source in a medium. NaN where an input is not usable. */
double mw_rosenthal_number(const mw_source *source, const mw_medium *medium);

/* Largest half width (= depth) in units of 2 alpha / v for n > 0: solve n = r exp(r/(1+r)), then r sqrt(1+2r)/(1+r). */
double mw_rosenthal_half_width(double n);

/* Leading length in the same unit: W0(2n)/2 with the Lambert W function. (The trailing length is n itself.) */
double mw_rosenthal_front(double n);

/* The whole pool in closed form but for the one root; relative accuracy 1e-12 for n in 1e-6..1e6.
 * Errors: MW_BAD_VALUE (an input is not finite or not positive, or isotherm <= ambient); *out is then all NaN. */
mw_status mw_rosenthal_pool(const mw_source *source, const mw_medium *medium, mw_pool *out);

/* Temperature (K) at a point in the frame of the source; +infinity at the source itself. */
double mw_rosenthal_temperature(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m);

/* Gradient (K/m) at a point, grad[0..2] = d/dx, d/dy, d/dz. */
void mw_rosenthal_gradient(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m,
                           double grad_K_per_m[3]);

/* Highest temperature (K) that a point at distance `distance_m` from the track's centre line ever sees. */
double mw_rosenthal_peak_at(const mw_source *source, const mw_medium *medium, double distance_m);

#endif
