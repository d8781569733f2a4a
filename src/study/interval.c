/* SPDX-License-Identifier: GPL-3.0-or-later
 * Central 90 % prediction intervals: prediction times exp(+-1.645 sd of the logarithm).
 * The sds are residuals of the default model on published tracks of papers left out of the fit (Lane, Weaver, Hofmann, Coen, Totis,
 * Dilip, Trapp; tests/data/SOURCES.md), rounded. They contain the usual doubt about beam diameter and absorptivity. */
#include <math.h>

#include "study/internal.h"

static const struct {
    double below_onset_index; /* class: onset index below this */
    double width, depth;
    /* d ln width and d ln depth over d ln beam diameter and d ln coupling: medians over those tracks, which
     * `make validate` prints */
    double width_beam, depth_beam, width_coupling, depth_coupling;
} residual[] = {{1.0, 0.25, 0.35, 0.37, 0.55, 0.36, 0.93}, {1.5, 0.15, 0.45, 0.30, 1.7, 0.18, 1.1}, {INFINITY, 0.15, 0.40, 0.16, 1.1, 0.14, 0.31}};
static const double residual_length = 0.20; /* ten settings of one institution only */

/* Cards fitted on tracks state 10 % for the coupling, and that is inside the residuals; what a card states beyond it is added. */
static const double coupling_inside_pct = 10;

/* What `pct` has beyond what the residuals hold, as a sd of the logarithm. */
static double beyond(double pct, double inside_pct)
{
    return pct > inside_pct ? sqrt(pct * pct - inside_pct * inside_pct) / 100 : 0;
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
    /* The usual doubt about a published beam is inside the residuals: it is what brings the depths of whole papers onto one curve. */
    const double coupling = beyond(plan->alloy->property[MW_PROP_COUPLING].uncertainty_pct, coupling_inside_pct);
    const double beam = beyond(plan->beam_uncertainty_pct, MW_BEAM_UNCERTAINTY_USUAL_PCT);
    const double widen = outside ? MW_OUTSIDE_DOUBT : 1;
    const double width = hypot(residual[class].width_coupling * coupling, residual[class].width_beam * beam);
    const double depth = hypot(residual[class].depth_coupling * coupling, residual[class].depth_beam * beam);
    interval(r->pool.width_m, widen * hypot(residual[class].width, width), &r->width_lo_m, &r->width_hi_m);
    interval(r->pool.depth_m, widen * hypot(residual[class].depth, depth), &r->depth_lo_m, &r->depth_hi_m);
    interval(r->pool.length_m, widen * hypot(residual_length, coupling), &r->length_lo_m, &r->length_hi_m); /* length goes as absorbed power */
}
