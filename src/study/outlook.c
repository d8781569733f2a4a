/* SPDX-License-Identifier: GPL-3.0-or-later
 * What would bring a setting into or out of nominal: one factor at a time, both ways. */
#include <math.h>

#include "study/internal.h"

static const mw_turn nothing = {NAN, NAN, MW_NOMINAL};

/* The setting with one factor at another value, judged on a track computed anew where power or speed moved. */
static mw_verdict verdict_at(const mw_plan *plan, mw_setting s)
{
    mw_track track;
    mw_result r;
    (void)mw_track_at(plan, s.power_W, s.speed_m_per_s, s.d4sigma_m, &track);
    mw_result_at(plan, &track, s.hatch_m, s.layer_m, &r);
    return r.judgement.verdict;
}

static void set_turn(const mw_plan *plan, const mw_setting *from, size_t offset, double value, double at, mw_turn *out)
{
    mw_setting beyond = *from;
    /* Far enough past the edge for its own tolerance, near enough for the engineer. */
    *(double *)((char *)&beyond + offset) = at * (at > value ? 1 + 2e-4 : 1 - 2e-4);
    *out = (mw_turn){at, 100 * (at / value - 1), verdict_at(plan, beyond)};
}

static mw_status turn_on_line(const mw_plan *plan, const mw_result *r, mw_factor factor, size_t offset, double value, mw_turn *turn)
{
    for (int up = 0; up < 2; up++) {
        double edge;
        const mw_status status = mw_nearest_edge(plan, r, factor, up == 1, &edge);
        if (status != MW_OK)
            return status;
        if (!isnan(edge))
            set_turn(plan, &r->setting, offset, value, edge, &turn[up]);
    }
    return MW_OK;
}

static double distance_at(const mw_plan *plan, const mw_track *track, double hatch_m, double layer_m)
{
    mw_result r;
    mw_result_at(plan, track, hatch_m, layer_m, &r);
    return mw_window_distance(&r.judgement);
}

/* Hatch and layer leave the track alone: a walk in steps of 2 % and a bisection cost nothing. */
static void turn_on_geometry(const mw_plan *plan, const mw_track *track, const mw_setting *s, bool hatch, mw_turn *turn)
{
    const double value = hatch ? s->hatch_m : s->layer_m;
    const bool inside = distance_at(plan, track, s->hatch_m, s->layer_m) > 0;
    for (int up = 0; up < 2; up++) {
        const double step = up ? 1.02 : 1 / 1.02;
        double near = value, far = value;
        bool found = false;
        while (!found && far * step <= value * MW_MARGIN_REACH && far * step >= value / MW_MARGIN_REACH) {
            near = far;
            far *= step;
            found = (distance_at(plan, track, hatch ? far : s->hatch_m, hatch ? s->layer_m : far) > 0) != inside;
        }
        for (int i = 0; found && i < 40; i++) {
            const double mid = (near + far) / 2;
            const bool same = (distance_at(plan, track, hatch ? mid : s->hatch_m, hatch ? s->layer_m : mid) > 0) == inside;
            *(same ? &near : &far) = mid;
        }
        if (found)
            set_turn(plan, s, hatch ? offsetof(mw_setting, hatch_m) : offsetof(mw_setting, layer_m), value, far, &turn[up]);
    }
}

mw_status mw_outlook_at(const mw_plan *plan, const mw_result *r, mw_outlook *out)
{
    for (int i = 0; i < 2; i++)
        out->power[i] = out->speed[i] = out->hatch[i] = out->layer[i] = nothing;
    if (!r->judged)
        return MW_BAD_USAGE;
    const mw_setting *s = &r->setting;
    mw_status status = turn_on_line(plan, r, MW_ALONG_POWER, offsetof(mw_setting, power_W), s->power_W, out->power);
    if (status == MW_OK)
        status = turn_on_line(plan, r, MW_ALONG_SPEED, offsetof(mw_setting, speed_m_per_s), s->speed_m_per_s, out->speed);
    if (status != MW_OK)
        return status;
    mw_track track;
    (void)mw_track_at(plan, s->power_W, s->speed_m_per_s, s->d4sigma_m, &track);
    turn_on_geometry(plan, &track, s, true, out->hatch);
    turn_on_geometry(plan, &track, s, false, out->layer);
    return MW_OK;
}
