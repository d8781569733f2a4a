/* SPDX-License-Identifier: GPL-3.0-or-later
 * Counting verdicts in lanes: single precision, compares and sums only, so the counts do not depend on the width of the vectors. */
#include "study/survey_lanes.h"

#include "model/wide.h"

/* across[i] = 1/W^2, down[i] = (t/D)^2 over the even-odds overlap index, D under this layer. */
MW_WIDE static void shapes(const mw_survey_lanes *l, const mw_survey_layer *layer, float *restrict across, float *restrict down)
{
    const float *restrict width = l->width, *restrict depth = l->depth;
    const float t = layer->layer_um, half = layer->half_layer_um, scale = layer->scale;
    for (size_t i = 0; i < l->n; i++) {
        const float w = width[i] > 1e-3f ? width[i] : 1e-3f, d = depth[i] > 1e-3f ? depth[i] : 1e-3f;
        const float under = t * (d + half) / (d * d); /* t/D with D = d/(1 + half/d) */
        across[i] = 1 / (w * w);
        down[i] = under * under * scale;
    }
}

MW_WIDE static void count_pair(const mw_survey_lanes *l, const mw_survey_pair *p, float most, const float *restrict across, const float *restrict down,
                               uint32_t *nominal, uint32_t *keyhole)
{
    const float *restrict energy = l->energy, *restrict energy_power = l->energy_power;
    const float h2 = p->hatch2, area = p->over_area, power = p->over_power;
    int32_t n_nominal = 0, n_keyhole = 0;
    for (size_t i = 0; i < l->n; i++) {
        const float sum = across[i] * h2 + down[i], overlap = sum < most ? sum : most;
        const float ratio = energy[i] * area, rival = energy_power[i] * power;
        n_nominal += (overlap <= 1.0f) & (ratio <= 1.0f);
        n_keyhole += (ratio > 1.0f) & (rival > overlap);
    }
    *nominal = (uint32_t)n_nominal;
    *keyhole = (uint32_t)n_keyhole;
}

MW_WIDE static uint32_t count_balling(const mw_survey_lanes *l, float factor)
{
    const float *restrict weber = l->weber;
    int32_t n = 0;
    for (size_t i = 0; i < l->n; i++)
        n += weber[i] * factor > 1.0f;
    return (uint32_t)n;
}

void mw_survey_count(const mw_survey_lanes *lanes, const mw_survey_layer *layer, const mw_survey_pair *pair, size_t n_pair, float *scratch, uint32_t *nominal,
                     uint32_t *keyhole, uint32_t *balling)
{
    float *across = scratch, *down = scratch + lanes->n;
    shapes(lanes, layer, across, down);
    for (size_t p = 0; p < n_pair; p++)
        count_pair(lanes, &pair[p], layer->most, across, down, &nominal[p], &keyhole[p]);
    *balling = count_balling(lanes, layer->balling_factor);
}
