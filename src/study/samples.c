/* SPDX-License-Identifier: GPL-3.0-or-later
 * Draws of the uncertain inputs. */
#include <gsl/gsl_cdf.h>
#include <gsl/gsl_qrng.h>
#include <gsl/gsl_rng.h>
#include <math.h>

#include "meltwright/survey.h"

static double spread_of(const mw_plan *plan, mw_property_id id)
{
    return plan->alloy->property[id].uncertainty_pct / 100;
}

/* Standard deviation of each input, in the order of mw_sample. */
static void spreads(const mw_plan *plan, double sd[MW_SAMPLE_INPUTS])
{
    sd[0] = spread_of(plan, MW_PROP_COUPLING);
    sd[1] = spread_of(plan, MW_PROP_ONSET);
    sd[2] = (spread_of(plan, MW_PROP_CONDUCTIVITY_SOLID) + spread_of(plan, MW_PROP_CONDUCTIVITY_LIQUID)) / 2;
    sd[3] = hypot(spread_of(plan, MW_PROP_HEAT_SOLID), spread_of(plan, MW_PROP_DENSITY_SOLID));
    sd[4] = spread_of(plan, MW_PROP_SOLIDUS);
    sd[5] = spread_of(plan, MW_PROP_BOILING);
    sd[6] = plan->beam_uncertainty_pct / 100;
}

/* The normal value of a shifted point of the sequence; kept off 0 and 1, where it would be infinite. */
static double normal(double point, double shift)
{
    const double u = point + shift < 1 ? point + shift : point + shift - 1;
    return gsl_cdf_ugaussian_Pinv(fmin(fmax(u, 1e-9), 1 - 1e-9));
}

mw_status mw_samples_draw(const mw_plan *plan, size_t n, unsigned long seed, mw_sample *out, mw_error *err)
{
    if (n < 1 || n > MW_MOST_SAMPLES)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%zu samples are outside 1 to %d", n, MW_MOST_SAMPLES);
    if (plan->alloy == NULL || plan->check_case)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "without an alloy card nothing is known about the doubt in its values");
    double sd[MW_SAMPLE_INPUTS], shift[MW_SAMPLE_INPUTS], point[MW_SAMPLE_INPUTS];
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, MW_SAMPLE_INPUTS);
    gsl_rng *random = gsl_rng_alloc(gsl_rng_mt19937);
    if (sequence == NULL || random == NULL) {
        gsl_qrng_free(sequence);
        gsl_rng_free(random);
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    }
    spreads(plan, sd);
    gsl_rng_set(random, seed);
    for (size_t k = 0; k < MW_SAMPLE_INPUTS; k++)
        shift[k] = gsl_rng_uniform(random);
    for (size_t i = 0; i < n; i++) {
        double z[MW_SAMPLE_INPUTS];
        gsl_qrng_get(sequence, point);
        for (size_t k = 0; k < MW_SAMPLE_INPUTS; k++)
            z[k] = sd[k] * normal(point[k], shift[k]);
        /* Temperatures are normal; three standard deviations at most, so that boiling stays above melting. */
        const double solidus = 1 + fmax(-3 * sd[4], fmin(3 * sd[4], z[4])), boiling = 1 + fmax(-3 * sd[5], fmin(3 * sd[5], z[5]));
        out[i] = (mw_sample){.coupling = fmin(exp(z[0]), 1 / plan->absorptivity), .onset = exp(z[1]), .conductivity = exp(z[2]), .heat = exp(z[3]), .solidus = solidus,
                             .boiling = boiling, .beam = exp(z[6])};
    }
    gsl_qrng_free(sequence);
    gsl_rng_free(random);
    return MW_OK;
}
