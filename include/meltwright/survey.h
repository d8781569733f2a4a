/* SPDX-License-Identifier: GPL-3.0-or-later
 * A grid under doubt: how often each verdict comes up when the uncertain inputs are drawn from their distributions. Pools over (power, speed,
 * sample) from the tables, verdicts over (hatch, layer) in vector lanes. */
#ifndef MELTWRIGHT_SURVEY_H
#define MELTWRIGHT_SURVEY_H

#include <stdint.h>

#include "meltwright/study.h"

/* One draw: factors on the plan's values, 1 = as the card says. */
typedef struct mw_sample {
    double coupling, onset, conductivity, heat, solidus, boiling, beam;
} mw_sample;

enum { MW_MOST_SAMPLES = 65535, MW_SAMPLE_INPUTS = 7 };

/* n draws: a Sobol sequence (Bratley and Fox, as in GSL), shifted at random by the seed, through the inverse normal distribution. Widths are the card's
 * standard uncertainties (solid and liquid conductivity weighed alike; heat from the solid's heat capacity and density) and the plan's beam
 * uncertainty; factors of coupling, conductivity, heat and beam are log-normal, temperatures normal. coupling times A0 stays at most 1.
 * Errors: MW_BAD_VALUE (n out of 1..MW_MOST_SAMPLES, or a plan without a card), MW_NO_MEMORY. */
mw_status mw_samples_draw(const mw_plan *plan, size_t n, unsigned long seed, mw_sample *out, mw_error *err);

/* How many of the samples gave each verdict in one cell; the rest are lack of fusion. */
typedef struct mw_survey_cell {
    double power_W, speed_m_per_s, hatch_m, layer_m;
    uint32_t samples, nominal, keyhole, balling; /* balling: index above 1 */
} mw_survey_cell;

/* Called for each cell in order, as mw_result_sink. */
typedef mw_status (*mw_survey_sink)(void *to, const mw_survey_cell *cell);

/* Runs the grid (hatch and layer needed) for all samples. Memory is bounded: powers are worked in blocks. The same counts on any number of threads.
 * Only the default model. Errors: MW_BAD_USAGE, MW_BAD_VALUE, MW_NO_MEMORY, MW_NO_CONVERGENCE, the sink's own. */
mw_status mw_survey(const mw_plan *plan, const mw_grid *grid, const mw_sample *sample, size_t n_sample, int threads, mw_survey_sink sink, void *to,
                    mw_error *err);

#endif
