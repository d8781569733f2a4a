/* SPDX-License-Identifier: GPL-3.0-or-later
 * Verdicts of many samples at one power and speed, over all hatches and layers. */
#ifndef MELTWRIGHT_STUDY_SURVEY_LANES_H
#define MELTWRIGHT_STUDY_SURVEY_LANES_H

#include <stddef.h>
#include <stdint.h>

/* Per sample, n of them (a multiple of MW_SURVEY_LANES; the surplus is padded so that it counts nowhere as nominal, keyhole or balling):
 *   width, depth, conduction   um: width, depth on bare plate, width without a cavity; 0 without a pool
 *   energy          melt energy ratio per watt times hatch times layer in um2, over the even-odds value
 *   energy_power    the same to the power energy_slope/overlap_slope: with that exponent its odds compare with those of the overlap index over its
 *                   own even-odds value */
typedef struct mw_survey_lanes {
    size_t n;
    const float *width, *depth, *conduction, *energy, *energy_power;
    float power, power_power; /* laser power in W, and to that exponent */
    float weber;              /* balling index per um of conduction width, but for the layer's factor */
} mw_survey_lanes;

enum { MW_SURVEY_LANES = 64 };

/* One hatch and layer as the lanes see it. */
typedef struct mw_survey_pair {
    float hatch2;       /* um2, over the even-odds overlap index */
    float over_power;   /* 1/(h t) in um-2, to the power energy_slope/overlap_slope */
} mw_survey_pair;

typedef struct mw_survey_layer {
    float layer_um, half_layer_um; /* half: layer factor times the layer */
    float scale;                   /* 1 / even-odds overlap index */
    float most;                    /* overlap index that stands for no pool, over the even-odds one */
    float balling_factor;
} mw_survey_layer;

/* What the layers share: 1/W^2 of each lane. */
void mw_survey_widths(const mw_survey_lanes *lanes, float *across);
/* nominal[p] and keyhole[p] for n_pair hatches of one layer are set to counts; *balling too. `scratch` has room for three times n. */
void mw_survey_count(const mw_survey_lanes *lanes, const float *across, const mw_survey_layer *layer, const mw_survey_pair *pair, size_t n_pair, float *scratch,
                     uint32_t *nominal, uint32_t *keyhole, uint32_t *balling);

#endif
