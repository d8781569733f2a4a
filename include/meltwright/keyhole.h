/* SPDX-License-Identifier: GPL-3.0-or-later
 * The default pool: a Gaussian source that opens a vapour cavity once the surface boils. One continuous model from conduction
 * to deep keyhole; a conduction pool and a moving hot cylinder, coupled by the light that the cavity traps. */
#ifndef MELTWRIGHT_KEYHOLE_H
#define MELTWRIGHT_KEYHOLE_H

#include "meltwright/pool.h"
#include "meltwright/status.h"

/* Heat per depth that a moving cylinder at constant temperature gives off, in units of k (Tv - T0):
 * F(Pe) = -2 pi Pe Sum_n eps_n (-1)^n I_n(Pe)^2 K_n'(Pe)/K_n(Pe), Pe = v radius / (2 alpha), eps_0 = 1 else 2.
 * (A polynomial for Pe 0.2 to 5: Lankalapalli, Tu, Gartner, J. Phys. D 29 (1996) 1831, from memory.)
 * Relative accuracy 1e-14 for Pe 1e-4..1e3, and right in both limits; NaN for Pe <= 0 or NaN. */
double mw_cylinder_heat(double peclet);

/* The constants of the model; where they come from stands with mw_keyhole_defaults in the source. */
typedef struct mw_keyhole_constants {
    double onset_ratio;      /* computed peak temperature rise over boiling rise at which the cavity starts */
    double cavity_shape;     /* c: absorptivity A(x) = A0 (1 + c x)/(1 + c A0 x), x = cavity depth / beam diameter */
    double gate_exponent;    /* how fast the cavity opens above the onset: 1 - s^-exponent */
    double blend_exponent;   /* melt depth from conduction depth and cavity depth */
    double layer_factor;     /* share of the powder layer that takes depth from the plate */
    double flow_widening;    /* melt flow makes the pool this much wider, and its conduction depth this much smaller */
} mw_keyhole_constants;

extern const mw_keyhole_constants mw_keyhole_defaults;

typedef enum mw_mode { MW_CONDUCTION, MW_TRANSITION, MW_KEYHOLE_MODE } mw_mode;
/* "conduction", "transition", "keyhole". Static storage. */
const char *mw_mode_word(mw_mode mode);

/* What the laser meets. Two averages of the alloy: up to melting (the pool) and up to boiling (onset and cavity wall;
 * boil.isotherm_K is the boiling temperature). Both have the same ambient_K. */
typedef struct mw_keyhole_input {
    double power_W;          /* incident */
    double absorptivity;     /* A0 of the flat surface, 0 < A0 <= 1 */
    double speed_m_per_s;
    double d4sigma_m;        /* beam diameter, D4sigma = 1/e2 diameter of a Gaussian */
    double layer_m;          /* nominal powder layer; 0 = bare plate */
    mw_medium melt, boil;
} mw_keyhole_input;

typedef struct mw_keyhole_pool {
    mw_pool pool;             /* what is expected in the cross-section; peak, gradient, cooling rate from the length pool */
    mw_pool conduction;       /* the pool at A0, as if there were no cavity */
    double onset_index;       /* 1 where the cavity starts */
    double cavity_depth_m;    /* vapour depth, 0 below the onset */
    double absorptivity;      /* effective: A0 below the onset, rising with the cavity */
    mw_mode mode;             /* conduction: no cavity; transition: cavity but depth < width/2; keyhole: deeper */
} mw_keyhole_pool;

/* Depth below the original plate (or the previous solid surface) under a nominal powder layer, from the depth on bare plate. */
double mw_keyhole_layer_depth(double bare_depth_m, double layer_m, const mw_keyhole_constants *constants);
/* Mode of a pool: conduction up to onset_index 1; above it transition while depth < width/2, keyhole from there. */
mw_mode mw_keyhole_mode(double onset_index, double width_m, double depth_m);

/* Continuous in every input. At fixed speed depth never falls with power. Width does not either, but for a shallow dip just above
 * the onset (onset_index 1.02 to 1.15), where the opening cavity takes heat from the surface: at most 2.5 % for absorptivity to 0.45, speed
 * from 0.1 m/s and conductivity to 60 W/(m K); 10 % for better conductors; 21 % below 0.1 m/s. Both are steep just above the onset.
 * Returns MW_OK, MW_NO_MELT, MW_BAD_VALUE (all numbers NaN, as after MW_NO_CONVERGENCE). */
mw_status mw_keyhole_pool_compute(const mw_keyhole_input *input, const mw_keyhole_constants *constants,
                                  mw_keyhole_pool *out);

#endif
