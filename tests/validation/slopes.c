/* SPDX-License-Identifier: GPL-3.0-or-later
 * How far width and depth follow the beam and the coupling, by onset class, over the published tracks: what the intervals take for an input that is
 * known worse than usual. */
#include <math.h>
#include <stdlib.h>

#include "stats.h"
#include "track_sets.h"
#include "validate.h"

enum { CLASSES = 3, MOST_TRACKS = TRACK_SETS * MOST_ROWS };
enum { WIDTH_BEAM, DEPTH_BEAM, WIDTH_COUPLING, DEPTH_COUPLING, SLOPES };

static mw_result result_of(mw_plan plan, const track_row *t, double beam, double coupling)
{
    const mw_setting s = {t->power_W, t->speed_m_per_s, NAN, t->layer_m, t->d4sigma_m * beam, plan.preheat_K};
    mw_result r;
    mw_error err;
    plan.absorptivity *= coupling;
    stop_on(mw_evaluate(&plan, &s, false, &r, &err), &err);
    return r;
}

static double slope(double up, double down, double step)
{
    return up > 0 && down > 0 ? log(up / down) / (2 * log(step)) : NAN;
}

void validate_slopes(void)
{
    static double value[CLASSES][SLOPES][MOST_TRACKS];
    static track_rows rows;
    const double step = 1.05;
    size_t n[CLASSES] = {0};
    for (size_t s = 0; s < TRACK_SETS; s++) {
        mw_alloy *alloy = find_card(track_sets[s].card);
        mw_plan plan;
        mw_error err;
        stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 298.15, &plan, &err), &err);
        load_track_set(&track_sets[s], &rows);
        for (size_t i = 0; i < rows.n; i++) {
            const track_row *t = &rows.row[i];
            const mw_result here = result_of(plan, t, 1, 1), wide = result_of(plan, t, step, 1), narrow = result_of(plan, t, 1 / step, 1);
            const mw_result more = result_of(plan, t, 1, step), less = result_of(plan, t, 1, 1 / step);
            const int c = here.onset_index < 1 ? 0 : here.onset_index < 1.5 ? 1 : 2;
            value[c][WIDTH_BEAM][n[c]] = slope(wide.pool.width_m, narrow.pool.width_m, step);
            value[c][DEPTH_BEAM][n[c]] = slope(wide.pool.depth_m, narrow.pool.depth_m, step);
            value[c][WIDTH_COUPLING][n[c]] = slope(more.pool.width_m, less.pool.width_m, step);
            value[c][DEPTH_COUPLING][n[c]] = slope(more.pool.depth_m, less.pool.depth_m, step);
            n[c]++;
        }
        mw_alloy_free(alloy);
    }
    (void)printf("\nRelative change of width and depth over relative change of beam diameter and coupling, medians over the published tracks\n"
                 "  onset index   tracks   W / beam   D / beam   W / A0   D / A0\n");
    static const char *const name[CLASSES] = {"below 1", "1 to 1.5", "above 1.5"};
    for (int c = 0; c < CLASSES; c++)
        (void)printf("  %-11s %8zu %+10.2f %+10.2f %+8.2f %+8.2f\n", name[c], n[c], stat_median(value[c][WIDTH_BEAM], n[c]), stat_median(value[c][DEPTH_BEAM], n[c]),
                     stat_median(value[c][WIDTH_COUPLING], n[c]), stat_median(value[c][DEPTH_COUPLING], n[c]));
}
