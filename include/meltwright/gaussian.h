/* SPDX-License-Identifier: GPL-3.0-or-later
 * Moving Gaussian source on a semi-infinite body: T.W. Eagar, N.-S. Tsai, Weld. J. 62 (1983) 346-s to 355-s.
 * Written in two numbers, with lengths in sigma (= D4sigma/4):
 *   peclet P = v sigma / (2 alpha),   strength B = Q / (sqrt(2) pi^1.5 k sigma (Tm - T0)),   (T - T0)/(Tm - T0) = B I(X,Y,Z;P)
 *   I = int_0^inf dw/(1+w^2) exp(-[(X + P w^2)^2 + Y^2]/(2 (1+w^2)) - Z^2/(2 w^2))
 * Holds for surface absorption on a flat plate with constant properties and no flow. The peak temperature far above boiling is an
 * index, not a temperature; depth is too small once there is a vapour cavity. */
#ifndef MELTWRIGHT_GAUSSIAN_H
#define MELTWRIGHT_GAUSSIAN_H

#include "meltwright/pool.h"
#include "meltwright/status.h"

/* The two numbers of a source in a medium. Errors: MW_BAD_VALUE; both are then NaN. */
mw_status mw_gaussian_numbers(const mw_source *source, const mw_medium *medium, double *peclet, double *strength);

/* ln I at a point (lengths in sigma). A logarithm, since I itself underflows far ahead of the source. */
double mw_gaussian_log_integral(double x, double y, double z, double peclet);

/* Largest value of I over the surface, and where on the centre line it lies (x in sigma; at_x may be NULL). */
double mw_gaussian_peak(double peclet, double *at_x);

/* Pool for B and P in units of sigma: width, depth, length, front, back, width_at, depth_at are filled (all in sigma);
 * peak_at too; temperatures are NaN. Returns MW_OK, MW_NO_MELT (all lengths zero; also where B exceeds the least melting
 * strength by less than one part in 1e12) or MW_NO_CONVERGENCE. */
mw_status mw_gaussian_pool_scaled(double strength, double peclet, mw_pool *out);

/* The whole pool in SI; relative accuracy 1e-7 or better in width, depth and length over 20-1500 W, 0.02-10 m/s,
 * 30-500 um, copper to titanium. Returns MW_OK, MW_NO_MELT (peak temperature is still set), MW_NO_CONVERGENCE, MW_BAD_VALUE. */
mw_status mw_gaussian_pool(const mw_source *source, const mw_medium *medium, mw_pool *out);

/* The same without the depth (depth_m and depth_at_m stay NaN), for callers who need the surface alone: about a third less work. */
mw_status mw_gaussian_surface_pool(const mw_source *source, const mw_medium *medium, mw_pool *out);

/* Temperature (K) at a point in the frame of the source. */
double mw_gaussian_temperature(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m);

#endif
