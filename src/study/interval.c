/* SPDX-License-Identifier: GPL-3.0-or-later
 * Central 90 % prediction intervals: prediction times exp(+-1.645 sd of the logarithm).
 * The sds are residuals of the default model on published tracks of papers left out of the fit (Lane, Weaver, Hofmann, Coen, Totis,
 * Dilip, Trapp; tests/data/SOURCES.md), rounded. They contain the usual doubt about beam diameter and absorptivity. */
#include <math.h>

#include "study/internal.h"

enum { BEAM, COUPLING, CONDUCTIVITY, HEAT, INPUTS };
static const struct {
    double below_onset_index; /* class: onset index below this */
    double width, depth;
    /* d ln width and d ln depth over d ln of each input: medians over those tracks, which `make validate` prints */
    double width_by[INPUTS], depth_by[INPUTS];
} residual[] = {{1.0, 0.25, 0.35, {0.37, 0.36, 0.11, 0.25}, {0.55, 0.93, 0.16, 0.73}},
                {1.5, 0.15, 0.45, {0.30, 0.18, 0.03, 0.34}, {1.7, 1.1, 0.57, 1.15}},
                {INFINITY, 0.15, 0.40, {0.16, 0.14, 0.01, 0.43}, {1.1, 0.31, 0.28, 0.92}}};
static const double residual_length = 0.20; /* ten settings of one institution only */

/* What the cards of the fit state for these inputs, percent, and published tracks for the beam: that much is inside the residuals (of the beam it is
 * what brings the depths of whole papers onto one curve). What a card or the user states beyond it is added. */
static const double inside_pct[INPUTS] = {MW_BEAM_UNCERTAINTY_USUAL_PCT, 10, 8, 6};

/* What `pct` has beyond what the residuals hold, as a sd of the logarithm. */
static double beyond(double pct, double inside)
{
    return pct > inside ? sqrt(pct * pct - inside * inside) / 100 : 0;
}

static void interval(double value, double sd, double *lo, double *hi)
{
    const double z = 1.6448536269514722; /* 95 % quantile of the normal distribution */
    *lo = value * exp(-z * sd);
    *hi = value * exp(z * sd);
}

void mw_intervals_at(const mw_plan *plan, bool outside, mw_result *r)
{
    r->width_lo_m = r->width_hi_m = r->depth_lo_m = r->depth_hi_m = r->length_lo_m = r->length_hi_m = NAN;
    /* Conduction models on their own have no error record here, and a check case is not a forecast. */
    if (plan->model != MW_MODEL_DEFAULT || plan->check_case)
        return;
    size_t class = 0;
    while (!(r->onset_index < residual[class].below_onset_index) && !isinf(residual[class].below_onset_index))
        class++;
    const mw_property *const card = plan->alloy->property;
    const double stated_pct[INPUTS] = {plan->beam_uncertainty_pct, card[MW_PROP_COUPLING].uncertainty_pct, card[MW_PROP_CONDUCTIVITY_SOLID].uncertainty_pct,
                                       hypot(card[MW_PROP_HEAT_SOLID].uncertainty_pct, card[MW_PROP_DENSITY_SOLID].uncertainty_pct)};
    const double widen = outside ? MW_OUTSIDE_DOUBT : 1;
    double width = 0, depth = 0;
    for (int i = 0; i < INPUTS; i++) {
        const double more = beyond(stated_pct[i], inside_pct[i]);
        width = hypot(width, residual[class].width_by[i] * more);
        depth = hypot(depth, residual[class].depth_by[i] * more);
    }
    interval(r->pool.width_m, widen * hypot(residual[class].width, width), &r->width_lo_m, &r->width_hi_m);
    interval(r->pool.depth_m, widen * hypot(residual[class].depth, depth), &r->depth_lo_m, &r->depth_hi_m);
    interval(r->pool.length_m, widen * hypot(residual_length, beyond(stated_pct[COUPLING], inside_pct[COUPLING])),
             &r->length_lo_m, &r->length_hi_m); /* length goes as absorbed power */
}
