/* SPDX-License-Identifier: GPL-3.0-or-later
 * Counting verdicts in lanes: single precision, compares and sums only, so the counts do not depend on the width of the vectors. */
#include "study/survey_lanes.h"

#include <stdbool.h>

#include "model/wide.h"

/* across[i] = 1/W^2, 0 without a pool. */
MW_WIDE static void widths(const mw_survey_lanes *l, float *restrict across)
{
    const float *restrict width = l->width;
    for (size_t i = 0; i < l->n; i++) {
        const float w = width[i], wide = 1 / (w * w);
        across[i] = w > 0 ? wide : 0;
    }
}

/* down[i] = (t/D)^2 over the even-odds overlap index, D under this layer; without a pool the index is `most`. */
MW_WIDE static void depths(const mw_survey_lanes *l, const mw_survey_layer *layer, float *restrict down)
{
    const float *restrict depth = l->depth;
    const float t = layer->layer_um, half = layer->half_layer_um, scale = layer->scale, most = layer->most;
    for (size_t i = 0; i < l->n; i++) {
        const float d = depth[i], under = t * (d + half) / (d * d); /* t/D with D = d/(1 + half/d) */
        const float deep = under * under * scale;
        down[i] = deep < most ? deep : most; /* NaN and infinity: no pool */
    }
}

/* With both indices over their even-odds values: nominal where neither passes 1, keyhole where the rival (the energy index to the exponent at
 * which its odds compare with the overlap's) passes both 1 and the overlap. */
MW_WIDE static void count_pair(const mw_survey_lanes *l, const mw_survey_pair *p, const float *restrict across, const float *restrict down, uint32_t *nominal,
                               uint32_t *keyhole)
{
    const float *restrict energy_power = l->energy_power;
    const float h2 = p->hatch2, power = p->over_power * l->power_power;
    int32_t n_nominal = 0, n_keyhole = 0;
    for (size_t i = 0; i < l->n; i++) {
        const float overlap = across[i] * h2 + down[i], rival = energy_power[i] * power;
        const float larger = overlap > rival ? overlap : rival, bar = 1.0f > overlap ? 1.0f : overlap;
        n_nominal += larger <= 1.0f;
        n_keyhole += rival > bar;
    }
    *nominal = (uint32_t)n_nominal;
    *keyhole = (uint32_t)n_keyhole;
}

/* The hatches between which a lane is nominal, squared and over the even-odds overlap index as mw_survey_pair has them: keyhole below `from`, lack
 * of fusion above `to`. Returns how many lanes have no such order while keyhole is possible at the least hatch: there both indices pass 1 somewhere,
 * and the rivals must be compared. */
MW_WIDE static uint32_t bounds(const mw_survey_lanes *l, const mw_survey_layer *layer, float least, const float *restrict down, float *restrict from,
                               float *restrict to)
{
    const float *restrict width = l->width, *restrict energy = l->energy;
    const float scale = l->power / layer->layer_um;
    int32_t n = 0;
    for (size_t i = 0; i < l->n; i++) {
        const float keyhole = energy[i] * scale, low = keyhole * keyhole * layer->scale, high = width[i] * width[i] * (1.0f - down[i]);
        from[i] = low;
        to[i] = high;
        n += (low > high) & (low > least);
    }
    return (uint32_t)n;
}

MW_WIDE static void count_between(size_t lanes, float hatch2, const float *restrict from, const float *restrict to, uint32_t *nominal, uint32_t *keyhole)
{
    int32_t n_below = 0, n_above = 0;
    for (size_t i = 0; i < lanes; i++) {
        n_below += hatch2 < from[i];
        n_above += hatch2 > to[i];
    }
    *keyhole = (uint32_t)n_below;
    *nominal = (uint32_t)((int32_t)lanes - n_below - n_above);
}

MW_WIDE static uint32_t count_balling(const mw_survey_lanes *l, float factor)
{
    const float *restrict conduction = l->conduction;
    const float index = l->weber * factor; /* per um */
    int32_t n = 0;
    for (size_t i = 0; i < l->n; i++)
        n += conduction[i] * index > 1.0f;
    return (uint32_t)n;
}

void mw_survey_widths(const mw_survey_lanes *lanes, float *across)
{
    widths(lanes, across);
}

void mw_survey_count(const mw_survey_lanes *lanes, const float *across, const mw_survey_layer *layer, const mw_survey_pair *pair, size_t n_pair, float *scratch,
                     uint32_t *nominal, uint32_t *keyhole, uint32_t *balling)
{
    float *from = scratch, *to = scratch + lanes->n, *down = scratch + 2 * lanes->n;
    depths(lanes, layer, down);
    float least = pair[0].hatch2;
    for (size_t p = 1; p < n_pair; p++)
        least = pair[p].hatch2 < least ? pair[p].hatch2 : least;
    const bool ordered = bounds(lanes, layer, least, down, from, to) == 0;
    for (size_t p = 0; p < n_pair; p++) {
        if (ordered)
            count_between(lanes->n, pair[p].hatch2, from, to, &nominal[p], &keyhole[p]);
        else
            count_pair(lanes, &pair[p], across, down, &nominal[p], &keyhole[p]);
    }
    *balling = count_balling(lanes, layer->balling_factor);
}
