/* SPDX-License-Identifier: GPL-3.0-or-later
 * Criteria: pure functions of a pool and a setting. SI throughout; a missing input (NaN) gives NaN, never a guess.
 * Every threshold stands in mw_limits with its definition and the data it rests on. */
#ifndef MELTWRIGHT_CRITERIA_H
#define MELTWRIGHT_CRITERIA_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/pool.h"
#include "meltwright/status.h"

/* ---- energy densities -------------------------------------------------------------------------------------------- */

/* Incident power, as the trade does; J/m, J/m2, J/m3, m3/s. */
double mw_linear_energy(double power_W, double speed_m_per_s);
double mw_areal_energy(double power_W, double speed_m_per_s, double hatch_m);
double mw_volumetric_energy(double power_W, double speed_m_per_s, double hatch_m, double layer_m);
double mw_build_rate(double speed_m_per_s, double hatch_m, double layer_m);

/* Normalised forms after M. Thomas, G.J. Baxter, I. Todd, Acta Mater. 108 (2016) 26-35; lengths over the beam RADIUS r = D4sigma/2. */
typedef struct mw_normalised_energy {
    double power;    /* q* = A P / (r k (Tm - T0)) */
    double speed;    /* v* = v r / alpha */
    double layer;    /* l* = 2 t / r */
    double hatch;    /* h* = h / r */
    double minimum;  /* E*min = q* / (v* l*) */
    double volume;   /* E0* = E*min / h* = A P / (2 v t h rho c (Tm - T0)) */
} mw_normalised_energy;
void mw_normalise_energy(double absorbed_W, double speed_m_per_s, double hatch_m, double layer_m, double d4sigma_m,
                         const mw_medium *melt, mw_normalised_energy *out);

/* Absorbed energy over the energy that melts the layer's volume: A P / (v h t Hm), Hm = rho (c dT + Lf) in J/m3. */
double mw_melt_energy_ratio(double absorbed_W, double speed_m_per_s, double hatch_m, double layer_m, double melt_enthalpy_J_per_m3);

/* ---- overlap ----------------------------------------------------------------------------------------------------- */

/* (h/W)^2 + (L/D)^2: half-ellipse pools side by side melt the whole layer where this is <= 1.
 * M. Tang, P.C. Pistorius, J.L. Beuth, Addit. Manuf. 14 (2017) 39-48 (formula from memory).
 * layer_m is the nominal layer when the depth is counted from the solid surface, or the effective one (mw_effective_layer)
 * when it is counted through the powder. Infinite where there is no pool. */
double mw_overlap_index(double width_m, double depth_m, double hatch_m, double layer_m);

/* Steady powder thickness of nominal layers t on sintered packing phi: t / phi (density balance). */
double mw_effective_layer(double layer_m, double packing_ratio);

/* Share of a layer's cross-section that no half ellipse reaches, 0..1. Unmelted powder is only (1 - packing) empty.
 * aligned: pools of all layers stand above each other (no rotation): closed form. It is the worst case.
 * scattered: each layer shifted at random across the hatch (stands for a 67 degree rotation): piecewise Gauss-Legendre of
 * the product over the layers that still reach down, relative accuracy 1e-9. Equal to aligned when depth <= layer. */
double mw_unmelted_aligned(double width_m, double depth_m, double hatch_m, double layer_m);
double mw_unmelted_scattered(double width_m, double depth_m, double hatch_m, double layer_m);

/* ---- normalised enthalpy and keyhole number ---------------------------------------------------------------------- */

/* One physical state, five numbers in print: X(NAME, word, definition, value over the anchor; the tests recompute it).
 * Anchor B = A P / (pi^1.5 rho c (Tm - T0) sqrt(alpha v a^3)), a = 1/e radius = D4sigma / (2 sqrt 2). */
#define MW_ENTHALPY_LIST(X)                                                                                                       \
    X(ANCHOR, "B", "A P/(pi^1.5 rho c dT sqrt(alpha v a^3)), a = 1/e radius", 1.0)                                                \
    X(PI_W0, "pi, 1/e2 radius", "A P/(pi rho c dT sqrt(alpha v w0^3)), w0 = 1/e2 radius (the keyhole number's form)", 1.0539074)    \
    X(PI_A, "pi, 1/e radius", "A P/(pi rho c dT sqrt(alpha v a^3)), a = 1/e radius", 1.7724539)                                     \
    X(ROOTPI_W0, "root pi, 1/e2 radius", "A P/(rho c dT sqrt(pi alpha v w0^3)), w0 = 1/e2 radius", 1.8680022)                       \
    X(PI_SIGMA, "pi, sigma", "A P/(pi rho c dT sqrt(alpha v s^3)), s = sigma = D4sigma/4", 2.9809002)                               \
    X(ROOTPI_SIGMA, "root pi, sigma", "A P/(rho c dT sqrt(pi alpha v s^3)), s = sigma = D4sigma/4", 5.2835080)

typedef enum mw_enthalpy_form {
#define X(name, word, definition, factor) MW_ENTHALPY_##name,
    MW_ENTHALPY_LIST(X)
#undef X
    MW_ENTHALPY_COUNT
} mw_enthalpy_form;

const char *mw_enthalpy_definition(mw_enthalpy_form form);

/* The form that the column normalised_enthalpy prints. */
#define MW_ENTHALPY_SHOWN MW_ENTHALPY_ROOTPI_SIGMA

/* rho c, alpha and the temperature rise are the medium's own (heat to the isotherm; a difference, not the absolute temperature). */
double mw_normalised_enthalpy(mw_enthalpy_form form, double absorbed_W, double speed_m_per_s, double d4sigma_m,
                              const mw_medium *melt);

/* Keyhole number Ke = eta P / ((Tl - T0) pi rho c sqrt(alpha v r0^3)), r0 = 1/e2 radius, LIQUID properties, eta = effective
 * absorptivity. Z. Gan et al., Nat. Commun. 12 (2021) 2379. `liquid` carries k and rho c of the melt, isotherm = liquidus. */
double mw_keyhole_number(double absorbed_W, double speed_m_per_s, double d4sigma_m, const mw_medium *liquid);

/* ---- balling ----------------------------------------------------------------------------------------------------- */

/* Warning beside the verdict. Index 1 = a track is as likely to ball as not; p = 1/(1 + index^-slope).
 * Bare plate (layer 0): conduction length over width. Powder: Weber number rho v^2 W / gamma and the layer.
 * Lengths are those of the conduction pool. Zero where there is no pool. */
double mw_balling_index(const mw_pool *conduction, double speed_m_per_s, double layer_m, double density_kg_per_m3,
                        double surface_tension_N_per_m);
double mw_balling_probability(double index, double layer_m);

/* Longest stable length over width of a melt track that meets the plate at a contact angle (rad):
 * I. Yadroitsev et al., J. Mater. Process. Technol. 210 (2010) 1624 (formula from memory, limits checked). Infinite up to 90 degrees. */
double mw_stable_length_ratio(double contact_angle_rad);

/* ---- verdict ----------------------------------------------------------------------------------------------------- */

/* Which pool stands behind an index: the limits differ, because a flat-absorptivity pool is shallower. */
typedef enum mw_pool_kind { MW_POOL_CAVITY, MW_POOL_FLAT, MW_POOL_KIND_COUNT } mw_pool_kind;

/* Odds against nominal: lack of fusion (overlap index / overlap_half)^overlap_slope, too much energy likewise. */
typedef struct mw_limits {
    double overlap_half, overlap_slope; /* overlap index at which lack of fusion is as likely as nominal */
    double energy_half, energy_slope;   /* melt energy ratio at which too much energy is as likely as nominal */
    const char *definition, *data;      /* what the numbers mean and what they rest on */
} mw_limits;
const mw_limits *mw_verdict_limits(mw_pool_kind kind);

/* The remaining constants of the criteria, each with its source beside the definition in limits.c. */
typedef struct mw_balling_limits {
    double bare_ratio, bare_slope;              /* conduction length/width at even odds */
    double weber, weber_slope, layer_reference_m, layer_slope;
    const char *definition, *data;
} mw_balling_limits;
const mw_balling_limits *mw_balling_constants(void);

#define MW_PACKING_DEFAULT 0.60     /* powder packing when no lot card says otherwise: A.B. Spierings, quoted in Mahmoodkhani et al. 2019; 0.38-0.60 in print */
#define MW_OVERLAP_NO_POOL 80.0     /* overlap index that stands for "no pool" in the odds */

typedef enum mw_verdict { MW_NOMINAL, MW_LACK_OF_FUSION, MW_KEYHOLE } mw_verdict;
/* "nominal", "lack-of-fusion", "keyhole". Static storage. */
const char *mw_verdict_word(mw_verdict verdict);

typedef struct mw_judgement {
    double overlap_odds, energy_odds;                 /* against nominal */
    double p_nominal, p_lack_of_fusion, p_keyhole;    /* sum to one */
    double keyhole_index;                             /* melt energy ratio / its half point: 1 at the limit */
    mw_verdict verdict;                               /* the likeliest */
} mw_judgement;
void mw_judge(double overlap_index, double melt_energy_ratio, const mw_limits *limits, mw_judgement *out);

/* The same verdict with less certainty: the logarithms of both odds are divided by `doubt` (at least 1) for the three probabilities. For settings
 * outside the record, where nothing shows that the odds still hold. The odds themselves and the verdict stay. */
void mw_judge_with_doubt(mw_judgement *judgement, double doubt);

/* How far inside the window: -ln(max odds). Positive exactly where the verdict is nominal; continuous. */
double mw_window_distance(const mw_judgement *judgement);

#endif
