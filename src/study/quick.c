/* SPDX-License-Identifier: GPL-3.0-or-later
 * Tracks from the tables: what maps and the search for edges run on. */
#include <math.h>

#include "model/keyhole_line.h"
#include "study/internal.h"

enum { MOST_IN_LINE = 128 };

static mw_status table_line(const mw_plan *p, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    double width[MOST_IN_LINE], depth[MOST_IN_LINE], conduction[MOST_IN_LINE], onset[MOST_IN_LINE], melting[MOST_IN_LINE], cavity[MOST_IN_LINE], a[MOST_IN_LINE];
    const mw_pool_lanes lanes = {width, depth, conduction, onset, melting, cavity, a};
    const mw_keyhole_input in = {1, p->absorptivity, speed_m_per_s, d4sigma_m, 0, p->melt, p->boil};
    const mw_status status = mw_keyhole_line(&in, &p->constants, power_W, n, &lanes);
    const mw_pool unknown = {NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN};
    for (size_t i = 0; i < n && status == MW_OK; i++) {
        out[i] = (mw_track){power_W[i], speed_m_per_s, d4sigma_m, width[i] > 0 ? MW_OK : MW_NO_MELT, unknown, unknown, onset[i], cavity[i], a[i], true};
        out[i].pool.width_m = width[i];
        out[i].pool.depth_m = depth[i];
        out[i].conduction.width_m = conduction[i];
        out[i].conduction.peak_temperature_K = p->melt.ambient_K + melting[i] * (p->melt.isotherm_K - p->melt.ambient_K);
    }
    return status;
}

mw_status mw_quick_tracks(const mw_plan *plan, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out)
{
    mw_status status = MW_OK;
    if (plan->model == MW_MODEL_DEFAULT) {
        for (size_t at = 0; at < n && status >= 0; at += MOST_IN_LINE)
            status = table_line(plan, speed_m_per_s, d4sigma_m, power_W + at, n - at < MOST_IN_LINE ? n - at : MOST_IN_LINE, out + at);
        return status;
    }
    for (size_t i = 0; i < n && status >= 0; i++)
        status = mw_track_at(plan, power_W[i], speed_m_per_s, d4sigma_m, &out[i]);
    return status < 0 ? status : MW_OK;
}
