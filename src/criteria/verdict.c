/* SPDX-License-Identifier: GPL-3.0-or-later
 * From two indices to three probabilities and the likeliest of them. */
#include <math.h>

#include "meltwright/criteria.h"

const char *mw_verdict_word(mw_verdict verdict)
{
    switch (verdict) {
    case MW_NOMINAL:
        return "nominal";
    case MW_LACK_OF_FUSION:
        return "lack-of-fusion";
    case MW_KEYHOLE:
        return "keyhole";
    }
    return "unknown";
}

/* An odds that overflows means certainty, not NaN = inf/inf. */
static void probabilities(double overlap_odds, double energy_odds, mw_judgement *out)
{
    const double sum = 1 + overlap_odds + energy_odds;
    out->p_nominal = 1 / sum;
    out->p_lack_of_fusion = isinf(energy_odds) ? 0 : overlap_odds / sum;
    out->p_keyhole = isinf(energy_odds) ? 1 : energy_odds / sum;
}

void mw_judge(double overlap_index, double melt_energy_ratio, const mw_limits *limits, mw_judgement *out)
{
    const double overlap = fmin(overlap_index, MW_OVERLAP_NO_POOL);
    out->keyhole_index = melt_energy_ratio / limits->energy_half;
    out->overlap_odds = isnan(overlap_index) ? NAN : pow(overlap / limits->overlap_half, limits->overlap_slope);
    out->energy_odds = pow(out->keyhole_index, limits->energy_slope);
    probabilities(out->overlap_odds, out->energy_odds, out);
    out->verdict = out->overlap_odds <= 1 && out->energy_odds <= 1 ? MW_NOMINAL
                   : out->overlap_odds >= out->energy_odds        ? MW_LACK_OF_FUSION
                                                                  : MW_KEYHOLE;
}

void mw_judge_with_doubt(mw_judgement *judgement, double doubt)
{
    probabilities(pow(judgement->overlap_odds, 1 / doubt), pow(judgement->energy_odds, 1 / doubt), judgement);
}

double mw_window_distance(const mw_judgement *judgement)
{
    return -log(fmax(judgement->overlap_odds, judgement->energy_odds));
}
