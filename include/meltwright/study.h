/* SPDX-License-Identifier: GPL-3.0-or-later
 * What an engineer asks: one setting, or a grid of them. Plan once (cards, averages, limits), then evaluate many. */
#ifndef MELTWRIGHT_STUDY_H
#define MELTWRIGHT_STUDY_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/alloy.h"
#include "meltwright/criteria.h"
#include "meltwright/keyhole.h"
#include "meltwright/pool.h"
#include "meltwright/status.h"

/* One point, SI. hatch_m NaN = a single track; layer_m 0 = bare plate. */
typedef struct mw_setting {
    double power_W, speed_m_per_s, hatch_m, layer_m, d4sigma_m, preheat_K;
} mw_setting;

typedef enum mw_model { MW_MODEL_DEFAULT, MW_MODEL_ROSENTHAL, MW_MODEL_GAUSSIAN, MW_MODEL_COUNT } mw_model;
/* "default", "rosenthal", "gaussian"; and what each is, in a line. Static storage. */
const char *mw_model_word(mw_model model);
const char *mw_model_description(mw_model model);

/* Values that replace those of the card; NaN = not given. With conductivity, density, heat capacity and melting point all given
 * the constants stand as they are: no property integrals and no latent heat. */
typedef struct mw_overrides {
    double absorptivity, conductivity_W_per_mK, density_kg_per_m3, heat_capacity_J_per_kgK, melting_point_K;
} mw_overrides;
extern const mw_overrides mw_no_overrides;

/* Standard uncertainty of the beam diameter of published tracks, percent: inside the intervals' residuals, and what is taken when none is given. */
#define MW_BEAM_UNCERTAINTY_USUAL_PCT 20.0

/* Everything that depends on alloy, model, overrides and preheat alone. Plain data; copy freely. Borrowed: alloy. */
typedef struct mw_plan {
    const mw_alloy *alloy; /* NULL for a check case */
    mw_model model;
    double preheat_K;
    double absorptivity;           /* A0 */
    mw_medium melt;                /* to the solidus, with the latent heat */
    mw_medium boil;                /* to boiling; isotherm NaN when unknown */
    mw_medium liquid;              /* melt properties at the liquidus; NaN when unknown */
    double density_cold_kg_per_m3; /* NaN when unknown */
    double surface_tension_N_per_m;
    mw_keyhole_constants constants;
    mw_pool_kind kind;
    double beam_uncertainty_pct; /* standard uncertainty of the beam diameter; mw_plan_make leaves 0, as good as that of published tracks. The
                                    intervals widen where it is more than theirs */
    bool check_case; /* all four constants given */
} mw_plan;

/* Errors: MW_BAD_VALUE, MW_BAD_USAGE (neither alloy nor all constants; the default model without an alloy). */
mw_status mw_plan_make(const mw_alloy *alloy, mw_model model, const mw_overrides *overrides, double preheat_K, mw_plan *out,
                       mw_error *err);

/* The pool of a power and speed before hatch and layer come in: the expensive part, done once a (power, speed). */
typedef struct mw_track {
    double power_W, speed_m_per_s, d4sigma_m;
    mw_status status;           /* MW_OK, MW_NO_MELT or an error */
    mw_pool pool;               /* depth on bare plate */
    mw_pool conduction;
    double onset_index, cavity_depth_m, absorptivity;
    bool by_table;              /* from the tables: see mw_sweep_by_table */
} mw_track;
mw_status mw_track_at(const mw_plan *plan, double power_W, double speed_m_per_s, double d4sigma_m, mw_track *out);

/* How far one factor alone can move before the verdict leaves nominal, in percent. 0 where the setting is not nominal, NaN
 * where nothing is met within a factor of five. Right to 0.01 of a percent of the factor. */
typedef struct mw_margins {
    double power_down_pct, power_up_pct, speed_down_pct, speed_up_pct;
} mw_margins;

/* The one result that tables, text, JSON and pictures are views of. NaN = does not apply. */
typedef struct mw_result {
    mw_setting setting;
    mw_status status;
    mw_pool pool;
    mw_pool conduction;
    double width_lo_m, width_hi_m, depth_lo_m, depth_hi_m, length_lo_m, length_hi_m; /* central 90 % prediction intervals */
    double absorptivity, onset_index, cavity_depth_m;
    double linear_energy_J_per_m, areal_energy_J_per_m2, volumetric_energy_J_per_m3, build_rate_m3_per_s, melt_energy_ratio;
    double normalised_enthalpy, keyhole_number;
    double overlap_index, overlap_index_effective;  /* nominal layer; layer over packing */
    double balling_index, p_balling;
    double unmelted_aligned, unmelted_scattered;
    mw_judgement judgement;
    bool judged; /* verdict and probabilities apply: hatch and layer are given */
    mw_mode mode;
    mw_margins margins;
} mw_result;

/* Criteria of a track at a hatch and layer; margins are left NaN. Cheap. */
void mw_result_at(const mw_plan *plan, const mw_track *track, double hatch_m, double layer_m, mw_result *out);

/* One setting with everything. Returns out->status. Errors in the setting: MW_BAD_VALUE with the name and the allowed range in err. */
mw_status mw_evaluate(const mw_plan *plan, const mw_setting *setting, bool with_margins, mw_result *out, mw_error *err);

/* Checks the values of a setting: positive, finite, within the widest range the numerics were proved on. */
mw_status mw_setting_check(const mw_setting *setting, mw_error *err);
/* What of the setting lies outside the range that published tracks cover, as a text ("speed 5 m/s is above 3 m/s, ..."); "" when nothing. */
size_t mw_setting_outside(const mw_plan *plan, const mw_setting *setting, char *text, size_t size);

/* Where one factor alone, moved down or up, brings the setting into or out of nominal. at NaN: nothing within a factor of five. */
typedef struct mw_turn {
    double at;           /* value of the factor, SI */
    double change_pct;   /* from the setting, positive = up */
    mw_verdict beyond;   /* verdict just past it */
} mw_turn;
typedef struct mw_outlook {
    mw_turn power[2], speed[2], hatch[2], layer[2]; /* [0] down, [1] up */
} mw_outlook;
/* For a judged result, nominal or not. Errors: MW_BAD_USAGE (not judged), MW_NO_MEMORY. */
mw_status mw_outlook_at(const mw_plan *plan, const mw_result *result, mw_outlook *out);

/* A grid over four factors. Arrays rise; hatch and layer may have n = 0 (single tracks on bare plate / no verdict). */
typedef struct mw_grid {
    const double *power_W, *speed_m_per_s, *hatch_m, *layer_m;
    size_t n_power, n_speed, n_hatch, n_layer;
    double d4sigma_m, preheat_K;
    size_t first_cell, n_cell; /* a part of the cells, counted in order; n_cell 0: all. Only the pools of that part are computed, and its
                                  results are those of the whole to the last bit */
} mw_grid;

enum { MW_MOST_TRACKS = 1 << 20, MW_MOST_CELLS = 50000000 };

/* Called for each cell in order: power slowest, then speed, hatch, layer fastest. A status other than MW_OK stops the sweep. */
typedef mw_status (*mw_result_sink)(void *to, const mw_result *result);

/* Runs the grid; rows of tracks are shared among `threads` threads (0: all cores) without influence on any byte of the result.
 * Errors: MW_BAD_VALUE, MW_TOO_LARGE (with the number of cells and what is allowed), MW_NO_MEMORY, the sink's own. */
mw_status mw_sweep(const mw_plan *plan, const mw_grid *grid, bool with_margins, int threads, mw_result_sink sink, void *to, mw_error *err);

/* The same with the pools from tables, within 3e-5 of the exact ones in width, depth and absorptivity: about a thousand times
 * faster, for maps. Lengths, places, gradients, cooling rates and unmelted shares are NaN; no margins. Bare plate is computed exactly. */
mw_status mw_sweep_by_table(const mw_plan *plan, const mw_grid *grid, int threads, mw_result_sink sink, void *to, mw_error *err);

#endif
