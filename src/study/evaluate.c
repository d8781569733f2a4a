/* SPDX-License-Identifier: GPL-3.0-or-later
 * One setting: pool, then criteria, then the verdict. */
#include <math.h>
#include <stdio.h>

#include "meltwright/gaussian.h"
#include "meltwright/rosenthal.h"
#include "meltwright/study.h"
#include "study/internal.h"

/* The widest ranges for which the numerics are proved by tests; beyond them a value is taken for a slip of units. */
static const struct {
    const char *name, *unit;
    size_t offset;
    double low, high, to_trade;
    bool may_be_zero, may_be_missing;
} allowed[] = {
    {"power", "W", offsetof(mw_setting, power_W), 1, 5000, 1, false, false},
    {"speed", "mm/s", offsetof(mw_setting, speed_m_per_s), 0.001, 30, 1e3, false, false},
    {"beam diameter D4sigma", "um", offsetof(mw_setting, d4sigma_m), 5e-6, 2e-3, 1e6, false, false},
    {"hatch", "um", offsetof(mw_setting, hatch_m), 5e-6, 5e-3, 1e6, false, true},
    {"layer", "um", offsetof(mw_setting, layer_m), 1e-6, 1e-3, 1e6, true, false},
};

mw_status mw_setting_check(const mw_setting *setting, mw_error *err)
{
    for (size_t i = 0; i < sizeof allowed / sizeof *allowed; i++) {
        const double v = *(const double *)((const char *)setting + allowed[i].offset);
        if ((allowed[i].may_be_zero && v == 0) || (allowed[i].may_be_missing && isnan(v)))
            continue;
        if (isnan(v))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s is missing", allowed[i].name);
        if (!(v >= allowed[i].low && v <= allowed[i].high))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s %.6g %s is outside what can be right: %g to %g %s%s", allowed[i].name,
                           v * allowed[i].to_trade, allowed[i].unit, allowed[i].low * allowed[i].to_trade,
                           allowed[i].high * allowed[i].to_trade, allowed[i].unit, allowed[i].may_be_zero ? ", or 0 for bare plate" : "");
    }
    if (!isfinite(setting->preheat_K))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "preheat is not a number");
    return MW_OK;
}

/* What published tracks and cubes cover: tests/data/SOURCES.md lists them. Preheat: none states one. */
static const struct {
    const char *name, *unit;
    size_t offset;
    double low, high, to_trade, shift;
} covered[] = {
    {"power", "W", offsetof(mw_setting, power_W), 50, 600, 1, 0},
    {"speed", "mm/s", offsetof(mw_setting, speed_m_per_s), 0.1, 2.5, 1e3, 0},
    {"beam diameter D4sigma", "um", offsetof(mw_setting, d4sigma_m), 37e-6, 140e-6, 1e6, 0},
    {"hatch", "um", offsetof(mw_setting, hatch_m), 40e-6, 400e-6, 1e6, 0},
    {"layer", "um", offsetof(mw_setting, layer_m), 0, 60e-6, 1e6, 0},
    {"preheat", "C", offsetof(mw_setting, preheat_K), 273.15, 373.15, 1, 273.15},
};

/* -1 below, +1 above what entry i of `covered` spans, 0 inside or not given. */
static int side(size_t i, const mw_setting *setting)
{
    const double v = *(const double *)((const char *)setting + covered[i].offset);
    const double slack = 1e-9 * covered[i].high;
    return v < covered[i].low - slack ? -1 : v > covered[i].high + slack ? 1 : 0;
}

size_t mw_setting_outside(const mw_plan *plan, const mw_setting *setting, char *text, size_t size)
{
    size_t used = 0;
    if (size > 0)
        text[0] = '\0'; /* with size 0 the text may be NULL: only the length is wanted */
    if (plan->check_case)
        return 0; /* a check case is mathematics, not a forecast */
    for (size_t i = 0; i < sizeof covered / sizeof *covered; i++) {
        const int out = side(i, setting);
        if (out == 0)
            continue;
        const double v = *(const double *)((const char *)setting + covered[i].offset);
        const int n = snprintf(used < size ? text + used : NULL, used < size ? size - used : 0, "%s%s %.6g %s is %s %g %s",
                               used > 0 ? ", " : "", covered[i].name, v * covered[i].to_trade - covered[i].shift, covered[i].unit,
                               out < 0 ? "below" : "above",
                               (out < 0 ? covered[i].low : covered[i].high) * covered[i].to_trade - covered[i].shift, covered[i].unit);
        used += n > 0 ? (size_t)n : 0;
    }
    return used;
}

static bool is_outside(const mw_plan *plan, const mw_setting *setting)
{
    bool out = false;
    for (size_t i = 0; i < sizeof covered / sizeof *covered && !plan->check_case; i++)
        out = out || side(i, setting) != 0;
    return out;
}

mw_status mw_track_at(const mw_plan *plan, double power_W, double speed_m_per_s, double d4sigma_m, mw_track *out)
{
    *out = (mw_track){.power_W = power_W,
                      .speed_m_per_s = speed_m_per_s,
                      .d4sigma_m = d4sigma_m,
                      .onset_index = NAN,
                      .cavity_depth_m = 0,
                      .absorptivity = plan->absorptivity};
    const mw_source source = {plan->absorptivity * power_W, speed_m_per_s, d4sigma_m / 4};
    if (plan->model == MW_MODEL_ROSENTHAL) {
        out->status = mw_rosenthal_pool(&source, &plan->melt, &out->pool);
        out->conduction = out->pool;
    } else if (plan->model == MW_MODEL_GAUSSIAN) {
        out->status = mw_gaussian_pool(&source, &plan->melt, &out->pool);
        out->conduction = out->pool;
    } else {
        const mw_keyhole_input input = {power_W, plan->absorptivity, speed_m_per_s, d4sigma_m, 0, plan->melt, plan->boil};
        mw_keyhole_pool k;
        out->status = mw_keyhole_pool_compute(&input, &plan->constants, &k);
        out->pool = k.pool;
        out->conduction = k.conduction;
        out->onset_index = k.onset_index;
        out->cavity_depth_m = k.cavity_depth_m;
        out->absorptivity = k.absorptivity;
    }
    return out->status;
}

static void set_nan(double *const field[], size_t n)
{
    for (size_t i = 0; i < n; i++)
        *field[i] = NAN;
}

/* Fields that hatch and layer decide; NaN where they do not apply. */
static void add_criteria(const mw_plan *plan, const mw_track *track, double hatch_m, double layer_m, mw_result *r)
{
    const mw_medium *melt = &plan->melt;
    const double absorbed = plan->absorptivity * track->power_W;
    r->linear_energy_J_per_m = mw_linear_energy(track->power_W, track->speed_m_per_s);
    r->areal_energy_J_per_m2 = mw_areal_energy(track->power_W, track->speed_m_per_s, hatch_m);
    r->normalised_enthalpy = mw_normalised_enthalpy(MW_ENTHALPY_SHOWN, absorbed, track->speed_m_per_s, track->d4sigma_m, melt);
    r->keyhole_number = mw_keyhole_number(track->absorptivity * track->power_W, track->speed_m_per_s, track->d4sigma_m, &plan->liquid);
    r->balling_index = mw_balling_index(&track->conduction, track->speed_m_per_s, layer_m, plan->density_cold_kg_per_m3,
                                        plan->surface_tension_N_per_m);
    r->p_balling = mw_balling_probability(r->balling_index, layer_m);
    double *const by_layer[] = {&r->volumetric_energy_J_per_m3, &r->build_rate_m3_per_s, &r->melt_energy_ratio, &r->overlap_index,
                                &r->overlap_index_effective, &r->unmelted_aligned, &r->unmelted_scattered,
                                &r->judgement.overlap_odds, &r->judgement.energy_odds, &r->judgement.p_nominal,
                                &r->judgement.p_lack_of_fusion, &r->judgement.p_keyhole, &r->judgement.keyhole_index};
    r->judged = hatch_m > 0 && layer_m > 0;
    if (!r->judged) {
        set_nan(by_layer, sizeof by_layer / sizeof *by_layer);
        r->judgement.verdict = MW_NOMINAL; /* a valid value; `judged` says that it means nothing */
        return;
    }
    const double w = r->pool.width_m, d = r->pool.depth_m;
    r->volumetric_energy_J_per_m3 = mw_volumetric_energy(track->power_W, track->speed_m_per_s, hatch_m, layer_m);
    r->build_rate_m3_per_s = mw_build_rate(track->speed_m_per_s, hatch_m, layer_m);
    r->melt_energy_ratio = mw_melt_energy_ratio(absorbed, track->speed_m_per_s, hatch_m, layer_m,
                                                melt->volumetric_heat_J_per_m3K * (melt->isotherm_K - melt->ambient_K));
    r->overlap_index = mw_overlap_index(w, d, hatch_m, layer_m);
    r->overlap_index_effective = mw_overlap_index(w, d, hatch_m, mw_effective_layer(layer_m, MW_PACKING_DEFAULT));
    r->unmelted_aligned = track->by_table ? NAN : mw_unmelted_aligned(w, d, hatch_m, layer_m);
    r->unmelted_scattered = track->by_table ? NAN : mw_unmelted_scattered(w, d, hatch_m, layer_m);
    mw_judge(r->overlap_index, r->melt_energy_ratio, mw_verdict_limits(plan->kind), &r->judgement);
}

/* Conduction models have no cavity: their mode is read from the computed peak against boiling, or stays conduction without a card. */
static mw_mode mode_of(const mw_plan *plan, const mw_track *track, const mw_pool *pool)
{
    if (plan->model == MW_MODEL_DEFAULT)
        return mw_keyhole_mode(track->onset_index, pool->width_m, pool->depth_m);
    return MW_CONDUCTION;
}

void mw_result_at(const mw_plan *plan, const mw_track *track, double hatch_m, double layer_m, mw_result *out)
{
    out->setting = (mw_setting){track->power_W, track->speed_m_per_s, hatch_m, layer_m, track->d4sigma_m, plan->preheat_K};
    out->pool = track->pool;
    out->conduction = track->conduction;
    out->onset_index = track->onset_index;
    out->cavity_depth_m = track->cavity_depth_m;
    out->absorptivity = track->absorptivity;
    if (plan->model == MW_MODEL_DEFAULT && track->pool.depth_m > 0)
        out->pool.depth_m = mw_keyhole_layer_depth(track->pool.depth_m, layer_m, &plan->constants);
    out->mode = mode_of(plan, track, &out->pool);
    const bool outside = is_outside(plan, &out->setting);
    out->status = track->status != MW_OK ? track->status : outside ? MW_OUTSIDE_CHECKED : MW_OK;
    add_criteria(plan, track, hatch_m, layer_m, out);
    if (outside && out->judged)
        mw_judge_with_doubt(&out->judgement, MW_OUTSIDE_DOUBT);
    mw_intervals_at(plan, outside, out);
    out->margins = (mw_margins){NAN, NAN, NAN, NAN};
}

mw_status mw_evaluate(const mw_plan *plan, const mw_setting *setting, bool with_margins, mw_result *out, mw_error *err)
{
    mw_status status = mw_setting_check(setting, err);
    if (status == MW_OK && setting->preheat_K != plan->preheat_K)
        status = mw_fail(err, MW_BAD_USAGE, NULL, 0, "the setting's preheat is not the plan's");
    mw_track track = {.status = status};
    if (status == MW_OK)
        status = mw_track_at(plan, setting->power_W, setting->speed_m_per_s, setting->d4sigma_m, &track);
    if (status < 0) {
        if (status == MW_NO_CONVERGENCE)
            (void)mw_fail(err, status, NULL, 0, "%s", mw_status_sentence(status));
        out->setting = *setting;
        out->status = status;
        return status;
    }
    mw_result_at(plan, &track, setting->hatch_m, setting->layer_m, out);
    if (with_margins && out->judged)
        status = mw_margins_at(plan, out, &out->margins);
    return status < 0 ? status : out->status;
}
