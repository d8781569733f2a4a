/* SPDX-License-Identifier: GPL-3.0-or-later
 * Where along power or speed the verdict enters or leaves nominal, and the margins that follow. */
#include <math.h>
#include <stdlib.h>

#include "study/internal.h"

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

size_t mw_line_values(const double *value, size_t n, double *out)
{
    const double step = log(MW_LINE_RATIO);
    const long first = (long)floor(log(value[0] / MW_MARGIN_REACH) / step);
    const long last = (long)ceil(log(value[n - 1] * MW_MARGIN_REACH) / step);
    const size_t count = (size_t)(last - first + 1) + n;
    if (out == NULL)
        return count;
    size_t k = 0;
    for (long i = first; i <= last; i++)
        out[k++] = exp((double)i * step);
    for (size_t i = 0; i < n; i++)
        out[k++] = value[i];
    qsort(out, k, sizeof *out, by_value);
    return k;
}

static double position(const mw_line *line, const mw_track *track)
{
    return line->factor == MW_ALONG_POWER ? track->power_W : track->speed_m_per_s;
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

/* Root of the window distance between two neighbouring tracks of different sign: Illinois false position in ln x, to 1e-7. */
static mw_status refine(const mw_line *line, size_t k, double hatch_m, double layer_m, double fa, double fb, double *root)
{
    double a = log(position(line, &line->track[k])), b = log(position(line, &line->track[k + 1]));
    double x = b;
    for (int i = 0; i < 60 && fabs(b - a) > 1e-7; i++) {
        x = (a * fb - b * fa) / (fb - fa);
        if (!(x > fmin(a, b) && x < fmax(a, b)))
            x = (a + b) / 2;
        mw_track here;
        const mw_track *base = &line->track[k];
        const double value = exp(x);
        const mw_status status = line->factor == MW_ALONG_POWER
                                     ? mw_track_at(line->plan, value, base->speed_m_per_s, base->d4sigma_m, &here)
                                     : mw_track_at(line->plan, base->power_W, value, base->d4sigma_m, &here);
        if (status < 0)
            return status;
        const double f = distance(line->plan, &here, hatch_m, layer_m);
        if (f == 0)
            break;
        if ((f > 0) == (fb > 0)) {
            b = x;
            fb = f;
            fa /= 2;
        } else {
            a = b;
            fa = fb;
            b = x;
            fb = f;
        }
        if (fabs(f) < 1e-9)
            break;
    }
    *root = exp(x);
    return MW_OK;
}

mw_status mw_edges_on(const mw_line *line, double hatch_m, double layer_m, mw_edges *out)
{
    out->n = 0;
    double before = NAN;
    for (size_t k = 0; k < line->n; k++) {
        const double now = line->track[k].status < 0 ? NAN : distance(line->plan, &line->track[k], hatch_m, layer_m);
        if (k > 0 && !isnan(before) && !isnan(now) && (before > 0) != (now > 0) && out->n < MW_MOST_EDGES) {
            const mw_status status = refine(line, k - 1, hatch_m, layer_m, before, now, &out->at[out->n]);
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

mw_status mw_edges_along(const mw_plan *plan, const mw_result *r, mw_factor factor, mw_edges *out)
{
    const double value = factor == MW_ALONG_POWER ? r->setting.power_W : r->setting.speed_m_per_s;
    const size_t n = mw_line_values(&value, 1, NULL);
    double *at = malloc(n * sizeof *at);
    mw_track *track = malloc(n * sizeof *track);
    mw_status status = at == NULL || track == NULL ? MW_NO_MEMORY : MW_OK;
    if (status == MW_OK) {
        (void)mw_line_values(&value, 1, at);
        for (size_t i = 0; i < n; i++)
            (void)mw_track_at(plan, factor == MW_ALONG_POWER ? at[i] : r->setting.power_W,
                              factor == MW_ALONG_SPEED ? at[i] : r->setting.speed_m_per_s, r->setting.d4sigma_m, &track[i]);
        const mw_line line = {plan, factor, track, n};
        status = mw_edges_on(&line, r->setting.hatch_m, r->setting.layer_m, out);
    }
    free(track);
    free(at);
    return status;
}

mw_status mw_margins_at(const mw_plan *plan, const mw_result *result, mw_margins *out)
{
    *out = (mw_margins){0, 0, 0, 0};
    if (result->judgement.verdict != MW_NOMINAL)
        return MW_OK;
    mw_edges edges;
    mw_status status = mw_edges_along(plan, result, MW_ALONG_POWER, &edges);
    if (status == MW_OK) {
        mw_margin_from(&edges, result->setting.power_W, &out->power_down_pct, &out->power_up_pct);
        status = mw_edges_along(plan, result, MW_ALONG_SPEED, &edges);
    }
    if (status == MW_OK)
        mw_margin_from(&edges, result->setting.speed_m_per_s, &out->speed_down_pct, &out->speed_up_pct);
    return status;
}
