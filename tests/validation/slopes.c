/* SPDX-License-Identifier: GPL-3.0-or-later
 * How far width and depth follow the beam and the coupling, by onset class, over the published tracks: what the intervals take for an input that is
 * known worse than usual. */
#include <math.h>
#include <stdlib.h>

#include "stats.h"
#include "track_sets.h"
#include "validate.h"

enum { CLASSES = 3, MOST_TRACKS = TRACK_SETS * MOST_ROWS };
enum { BEAM, COUPLING, CONDUCTIVITY, HEAT, INPUTS };

/* With one input multiplied by `factor`. */
static mw_result result_of(mw_plan plan, const track_row *t, int input, double factor)
{
    mw_setting s = {t->power_W, t->speed_m_per_s, NAN, t->layer_m, t->d4sigma_m, plan.preheat_K};
    double *const to[INPUTS][2] = {{&s.d4sigma_m, NULL},
                                   {&plan.absorptivity, NULL},
                                   {&plan.melt.conductivity_W_per_mK, &plan.boil.conductivity_W_per_mK},
                                   {&plan.melt.volumetric_heat_J_per_m3K, &plan.boil.volumetric_heat_J_per_m3K}};
    for (int i = 0; i < 2; i++)
        if (to[input][i] != NULL)
            *to[input][i] *= factor;
    mw_result r;
    mw_error err;
    stop_on(mw_evaluate(&plan, &s, false, &r, &err), &err);
    return r;
}

static double slope(double up, double down, double step)
{
    return up > 0 && down > 0 ? log(up / down) / (2 * log(step)) : NAN;
}

void validate_slopes(void)
{
    static double width[CLASSES][INPUTS][MOST_TRACKS], depth[CLASSES][INPUTS][MOST_TRACKS];
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
            const double onset = result_of(plan, &rows.row[i], BEAM, 1).onset_index;
            const int c = onset < 1 ? 0 : onset < 1.5 ? 1 : 2;
            for (int k = 0; k < INPUTS; k++) {
                const mw_result up = result_of(plan, &rows.row[i], k, step), down = result_of(plan, &rows.row[i], k, 1 / step);
                width[c][k][n[c]] = slope(up.pool.width_m, down.pool.width_m, step);
                depth[c][k][n[c]] = slope(up.pool.depth_m, down.pool.depth_m, step);
            }
            n[c]++;
        }
        mw_alloy_free(alloy);
    }
    (void)printf("\nRelative change of width and depth over relative change of an input, medians over the published tracks\n"
                 "  onset index   tracks   width: beam     A0  conductivity   heat   depth: beam     A0  conductivity   heat\n");
    static const char *const name[CLASSES] = {"below 1", "1 to 1.5", "above 1.5"};
    for (int c = 0; c < CLASSES; c++) {
        (void)printf("  %-11s %8zu", name[c], n[c]);
        for (int of_depth = 0; of_depth < 2; of_depth++)
            for (int k = 0; k < INPUTS; k++)
                (void)printf(k == 0 ? "%+14.2f" : k == 2 ? "%+14.2f" : "%+7.2f", stat_median(of_depth ? depth[c][k] : width[c][k], n[c]));
        (void)putchar('\n');
    }
}
