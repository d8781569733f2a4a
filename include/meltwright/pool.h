/* SPDX-License-Identifier: GPL-3.0-or-later
 * The words that all heat-flow models share: what heats, what is heated, and the pool that results. SI throughout.
 * Frame: the source stands at the origin and travels in +x; y is across the track, z points down into the plate. */
#ifndef MELTWRIGHT_POOL_H
#define MELTWRIGHT_POOL_H

/* A moving heat source on the surface. */
typedef struct mw_source {
    double absorbed_W;     /* absorbed power: absorptivity times incident power */
    double speed_m_per_s;
    double sigma_m;        /* standard deviation of the Gaussian beam = D4sigma/4; a point source ignores it */
} mw_source;

/* A body with constant properties, and the isotherm that bounds the pool. */
typedef struct mw_medium {
    double conductivity_W_per_mK;
    double volumetric_heat_J_per_m3K; /* density times heat capacity (with latent heat folded in where the caller wants it) */
    double ambient_K;                 /* temperature far from the source: the preheat */
    double isotherm_K;                /* temperature at the edge of the pool */
} mw_medium;

/* A pool. Lengths are zero where nothing melts. Fields that a model cannot give are NaN. */
typedef struct mw_pool {
    double width_m;              /* full width at the surface, the largest over x */
    double depth_m;              /* the largest over x */
    double length_m;             /* front_m - back_m */
    double front_m;              /* x of the leading tip, > 0 for a point source */
    double back_m;               /* x of the trailing tip, < 0 */
    double width_at_m;           /* x where the pool is widest */
    double depth_at_m;           /* x where it is deepest */
    double peak_temperature_K;   /* NaN for a point source: it has none */
    double peak_at_m;            /* x of the peak */
    double gradient_K_per_m;     /* |dT/dx| at the trailing tip on the surface */
    double cooling_rate_K_per_s; /* speed times that gradient */
} mw_pool;

#endif
