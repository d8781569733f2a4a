/* SPDX-License-Identifier: GPL-3.0-or-later
 * Tracks from the tables, of each model: what maps and the search for edges run on. */
#include <math.h>

#include "meltwright/gaussian.h"
#include "meltwright/rosenthal.h"
#include "model/gaussian_table.h"
#include "model/keyhole_line.h"
#include "model/rosenthal_line.h"
#include "study/internal.h"

enum { MOST_IN_LINE = 128 };

static const mw_pool unknown = {NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN};

static mw_status default_line(const mw_plan *p, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    double width[MOST_IN_LINE], depth[MOST_IN_LINE], conduction[MOST_IN_LINE], onset[MOST_IN_LINE], melting[MOST_IN_LINE], cavity[MOST_IN_LINE], a[MOST_IN_LINE];
    const mw_pool_lanes lanes = {width, depth, conduction, onset, melting, cavity, a};
    const mw_keyhole_input in = {1, p->absorptivity, speed_m_per_s, d4sigma_m, 0, p->melt, p->boil};
    const mw_status status = mw_keyhole_line(&in, &p->constants, power_W, n, &lanes);
    for (size_t i = 0; i < n && status == MW_OK; i++) {
        out[i] = (mw_track){power_W[i], speed_m_per_s, d4sigma_m, width[i] > 0 ? MW_OK : MW_NO_MELT, unknown, unknown, onset[i], cavity[i], a[i], true};
        out[i].pool.width_m = width[i];
        out[i].pool.depth_m = depth[i];
        out[i].conduction.width_m = conduction[i];
        out[i].conduction.peak_temperature_K = p->melt.ambient_K + melting[i] * (p->melt.isotherm_K - p->melt.ambient_K);
    }
    return status;
}

/* A track of a conduction model alone. */
static mw_track plain_track(const mw_plan *p, double power_W, double speed_m_per_s, double d4sigma_m, double width_m, double depth_m, double peak_K)
{
    mw_track t = {power_W, speed_m_per_s, d4sigma_m, width_m > 0 ? MW_OK : MW_NO_MELT, unknown, unknown, NAN, 0, p->absorptivity, true};
    t.pool.width_m = width_m;
    t.pool.depth_m = depth_m;
    t.pool.peak_temperature_K = peak_K;
    t.conduction = t.pool;
    return t;
}

/* The Gaussian source alone; a pool that the tables do not hold is computed. */
static mw_status gaussian_line(const mw_plan *p, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    const mw_source one = {p->absorptivity, speed_m_per_s, d4sigma_m / 4}; /* of one watt */
    const double rise = p->melt.isotherm_K - p->melt.ambient_K;
    double peclet, strength, s[MOST_IN_LINE], width[MOST_IN_LINE], depth[MOST_IN_LINE];
    mw_table_line across, down;
    mw_status status = mw_gaussian_numbers(&one, &p->melt, &peclet, &strength);
    if (status != MW_OK)
        return status;
    const bool covered = mw_table_line_make(MW_TABLE_WIDTH, peclet, &across) && mw_table_line_make(MW_TABLE_DEPTH, peclet, &down);
    const double per_W = covered ? strength * mw_table_peak(peclet) : NAN;
    for (size_t i = 0; i < n; i++)
        s[i] = per_W * power_W[i];
    if (covered)
        mw_table_lines_eval((const mw_table_line *const[]){&across, &down}, (const mw_table_quantity[]){MW_TABLE_WIDTH, MW_TABLE_DEPTH}, 2, s, n,
                            (double *const[]){width, depth});
    for (size_t i = 0; i < n && status >= 0; i++) {
        if (s[i] <= MW_TABLE_MOST_S)
            out[i] = plain_track(p, power_W[i], speed_m_per_s, d4sigma_m, width[i] * one.sigma_m, depth[i] * one.sigma_m, p->melt.ambient_K + s[i] * rise);
        else
            status = mw_track_at(p, power_W[i], speed_m_per_s, d4sigma_m, &out[i]);
    }
    return status < 0 ? status : MW_OK;
}

static mw_status rosenthal_line(const mw_plan *p, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    const mw_source one = {p->absorptivity, speed_m_per_s, d4sigma_m / 4};
    const double per_W = mw_rosenthal_number(&one, &p->melt), unit = 2 * p->melt.conductivity_W_per_mK / p->melt.volumetric_heat_J_per_m3K / speed_m_per_s;
    double number[MOST_IN_LINE], half[MOST_IN_LINE];
    if (!(per_W > 0))
        return MW_BAD_VALUE;
    for (size_t i = 0; i < n; i++)
        number[i] = per_W * power_W[i];
    mw_rosenthal_half_widths(number, n, half);
    for (size_t i = 0; i < n; i++)
        out[i] = plain_track(p, power_W[i], speed_m_per_s, d4sigma_m, 2 * half[i] * unit, half[i] * unit, NAN);
    return MW_OK;
}

mw_status mw_quick_tracks(const mw_plan *plan, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    mw_status status = MW_OK;
    for (size_t at = 0; at < n && status >= 0; at += MOST_IN_LINE) {
        const size_t m = n - at < MOST_IN_LINE ? n - at : MOST_IN_LINE;
        status = plan->model == MW_MODEL_DEFAULT    ? default_line(plan, speed_m_per_s, d4sigma_m, power_W + at, m, out + at)
                 : plan->model == MW_MODEL_GAUSSIAN ? gaussian_line(plan, speed_m_per_s, d4sigma_m, power_W + at, m, out + at)
                                                    : rosenthal_line(plan, speed_m_per_s, d4sigma_m, power_W + at, m, out + at);
    }
    return status;
}
