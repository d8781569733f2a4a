/* SPDX-License-Identifier: GPL-3.0-or-later
 * Where along power or speed the verdict enters or leaves nominal, and the margins that follow. */
#include <math.h>

#include "study/internal.h"

size_t mw_line_values(const double *value, size_t n, double *out)
{
    const double step = log(MW_LINE_RATIO);
    const long first = (long)floor(log(value[0] / MW_MARGIN_REACH) / step);
    const long last = (long)ceil(log(value[n - 1] * MW_MARGIN_REACH) / step);
    for (long i = first; i <= last && out != NULL; i++)
        out[i - first] = exp((double)i * step);
    return (size_t)(last - first + 1);
}

static double position(mw_factor factor, const mw_track *track)
{
    return factor == MW_ALONG_POWER ? track->power_W : track->speed_m_per_s;
}

/* The track at another value of the factor. */
static mw_status track_at(const mw_plan *plan, mw_factor factor, const mw_track *base, double value, mw_track *out)
{
    return factor == MW_ALONG_POWER ? mw_quick_tracks(plan, base->speed_m_per_s, base->d4sigma_m, &value, 1, out)
                                    : mw_quick_tracks(plan, value, base->d4sigma_m, &base->power_W, 1, out);
}

/* Window distance of a track at a hatch and layer: positive inside. Only what the verdict needs. */
static double distance(const mw_plan *plan, const mw_track *track, double hatch_m, double layer_m)
{
    const double depth = plan->model == MW_MODEL_DEFAULT && track->pool.depth_m > 0
                             ? mw_keyhole_layer_depth(track->pool.depth_m, layer_m, &plan->constants)
                             : track->pool.depth_m;
    const mw_medium *m = &plan->melt;
    const double ratio = mw_melt_energy_ratio(plan->absorptivity * track->power_W, track->speed_m_per_s, hatch_m, layer_m,
                                              m->volumetric_heat_J_per_m3K * (m->isotherm_K - m->ambient_K));
    mw_judgement j;
    mw_judge(mw_overlap_index(track->pool.width_m, depth, hatch_m, layer_m), ratio, mw_verdict_limits(plan->kind), &j);
    return mw_window_distance(&j);
}

/* Root of the window distance between two tracks of different sign: Illinois false position in ln x, to 1e-7. */
static mw_status refine(const mw_plan *plan, mw_factor factor, const mw_track *from, const mw_track *to, double hatch_m, double layer_m, double fa,
                        double fb, double *root)
{
    double a = log(position(factor, from)), b = log(position(factor, to));
    double x = b;
    for (int i = 0; i < 60 && fabs(b - a) > 1e-7; i++) {
        x = (a * fb - b * fa) / (fb - fa);
        if (!(x > fmin(a, b) && x < fmax(a, b)))
            x = (a + b) / 2;
        mw_track here;
        const mw_status status = track_at(plan, factor, from, exp(x), &here);
        if (status < 0)
            return status;
        const double f = distance(plan, &here, hatch_m, layer_m);
        if ((f > 0) == (fb > 0)) {
            fa /= 2;
        } else {
            a = b;
            fa = fb;
        }
        b = x;
        fb = f;
        if (fabs(f) < 1e-9)
            break;
    }
    *root = exp(x);
    return MW_OK;
}

mw_status mw_edges_on(const mw_line *line, double hatch_m, double layer_m, mw_edges *out)
{
    out->n = 0;
    out->nominal_before = false;
    double before = NAN;
    for (size_t k = 0; k < line->n; k++) {
        const double now = line->track[k].status < 0 ? NAN : distance(line->plan, &line->track[k], hatch_m, layer_m);
        if (k == 0)
            out->nominal_before = now > 0;
        if (k > 0 && !isnan(before) && !isnan(now) && (before > 0) != (now > 0) && out->n < MW_MOST_EDGES) {
            const mw_status status = refine(line->plan, line->factor, &line->track[k - 1], &line->track[k], hatch_m, layer_m, before, now,
                                            &out->at[out->n]);
            if (status != MW_OK)
                return status;
            out->n++;
        }
        before = now;
    }
    return MW_OK;
}

void mw_margin_from(const mw_edges *edges, double value, double *down_pct, double *up_pct)
{
    *down_pct = *up_pct = NAN;
    for (size_t i = 0; i < edges->n; i++) {
        const double at = edges->at[i];
        if (at <= value && at >= value / MW_MARGIN_REACH)
            *down_pct = 100 * (1 - at / value);
        if (at > value && at <= value * MW_MARGIN_REACH && isnan(*up_pct))
            *up_pct = 100 * (at / value - 1);
    }
}

mw_status mw_nearest_edge(const mw_plan *plan, const mw_result *r, mw_factor factor, bool up, double *edge)
{
    const double step = log(MW_LINE_RATIO);
    mw_track before, next;
    *edge = NAN;
    mw_status status = mw_quick_tracks(plan, r->setting.speed_m_per_s, r->setting.d4sigma_m, &r->setting.power_W, 1, &before);
    if (status < 0)
        return status;
    const double value = position(factor, &before);
    double f = distance(plan, &before, r->setting.hatch_m, r->setting.layer_m);
    if ((f > 0) != (r->judgement.verdict == MW_NOMINAL)) { /* so close to the edge that the tables see it on the other side */
        *edge = value;
        return MW_OK;
    }
    /* The same absolute places as a line has, from the setting outward, until the first change. */
    for (long i = (long)(up ? floor(log(value) / step) + 1 : ceil(log(value) / step) - 1);; i += up ? 1 : -1) {
        const double at = exp((double)i * step);
        status = track_at(plan, factor, &before, at, &next);
        if (status < 0)
            return status;
        const double g = distance(plan, &next, r->setting.hatch_m, r->setting.layer_m);
        if ((f > 0) != (g > 0)) {
            status = refine(plan, factor, &before, &next, r->setting.hatch_m, r->setting.layer_m, f, g, edge);
            if (!(*edge <= value * MW_MARGIN_REACH && *edge >= value / MW_MARGIN_REACH))
                *edge = NAN;
            return status;
        }
        if (at >= value * MW_MARGIN_REACH || at <= value / MW_MARGIN_REACH)
            return MW_OK;
        before = next;
        f = g;
    }
}

static mw_status margin_along(const mw_plan *plan, const mw_result *r, mw_factor factor, double value, double *down_pct, double *up_pct)
{
    double down, up;
    mw_status status = mw_nearest_edge(plan, r, factor, false, &down);
    if (status == MW_OK)
        status = mw_nearest_edge(plan, r, factor, true, &up);
    if (status != MW_OK)
        return status;
    *down_pct = 100 * (1 - down / value);
    *up_pct = 100 * (up / value - 1);
    return MW_OK;
}

mw_status mw_margins_at(const mw_plan *plan, const mw_result *r, mw_margins *out)
{
    *out = (mw_margins){0, 0, 0, 0};
    if (r->judgement.verdict != MW_NOMINAL)
        return MW_OK;
    const mw_status status = margin_along(plan, r, MW_ALONG_POWER, r->setting.power_W, &out->power_down_pct, &out->power_up_pct);
    return status != MW_OK ? status : margin_along(plan, r, MW_ALONG_SPEED, r->setting.speed_m_per_s, &out->speed_down_pct, &out->speed_up_pct);
}
