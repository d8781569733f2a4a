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

void mw_judge(double overlap_index, double melt_energy_ratio, const mw_limits *limits, mw_judgement *out)
{
    const double overlap = fmin(overlap_index, MW_OVERLAP_NO_POOL);
    out->keyhole_index = melt_energy_ratio / limits->energy_half;
    out->overlap_odds = isnan(overlap_index) ? NAN : pow(overlap / limits->overlap_half, limits->overlap_slope);
    out->energy_odds = pow(out->keyhole_index, limits->energy_slope);
    const double sum = 1 + out->overlap_odds + out->energy_odds;
    /* An odds that overflows means certainty, not NaN = inf/inf. */
    out->p_nominal = 1 / sum;
    out->p_lack_of_fusion = isinf(out->energy_odds) ? 0 : out->overlap_odds / sum;
    out->p_keyhole = isinf(out->energy_odds) ? 1 : out->energy_odds / sum;
    out->verdict = out->overlap_odds <= 1 && out->energy_odds <= 1 ? MW_NOMINAL
                   : out->overlap_odds >= out->energy_odds        ? MW_LACK_OF_FUSION
                                                                  : MW_KEYHOLE;
}

double mw_window_distance(const mw_judgement *judgement)
{
    return -log(fmax(judgement->overlap_odds, judgement->energy_odds));
}
