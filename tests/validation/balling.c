/* SPDX-License-Identifier: GPL-3.0-or-later
 * Balling labels of single tracks (Hofmann et al. 2026, 316L) against the stated probability. The constants were fitted to these labels, so
 * this shows calibration of the fit, not a forecast. */
#include "validate.h"

#include <math.h>
#include <string.h>

#include "base/csv.h"
#include "meltwright/text.h"
#include "stats.h"

enum { MOST = 600 };

static size_t column(const mw_csv_reader *r, const char *name)
{
    for (size_t i = 0; i < mw_csv_columns(r); i++)
        if (strcmp(mw_csv_column_name(r, i), name) == 0)
            return i;
    return 0;
}

static double number(const mw_csv_reader *r, const char *name)
{
    double v;
    const mw_csv_field_view f = mw_csv_get(r, column(r, name));
    return mw_read_number(f.text, f.n, &v) ? v : 0;
}

void validate_balling(void)
{
    double p[2][MOST];
    int balls[2][MOST];
    size_t n[2] = {0, 0};
    mw_csv_reader *r;
    mw_error err;
    mw_plan plan;
    bool end = false;
    mw_alloy *alloy = find_card("316L");
    stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), &err);
    stop_on(mw_csv_open("tests/data/measured/hofmann2026_316L.csv", &r, &err), &err);
    for (;;) {
        stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        const double layer_m = number(r, "layer_um") * 1e-6;
        const mw_setting s = {number(r, "power_W"), number(r, "speed_mm_s") * 1e-3, NAN, layer_m, number(r, "spot_um") * 1e-6, 293.15};
        mw_result result;
        if (mw_evaluate(&plan, &s, false, &result, &err) < 0)
            stop_on(err.status, &err);
        const int powder = layer_m > 0;
        if (n[powder] == MOST)
            continue;
        p[powder][n[powder]] = result.p_balling;
        balls[powder][n[powder]++] = strcmp(mw_csv_get(r, column(r, "mode")).text, "balling") == 0;
    }
    mw_csv_close(r);
    mw_alloy_free(alloy);
    (void)printf("\nBalling of single tracks, labels of Hofmann et al. 2026 (316L); the constants come from these labels\n");
    for (int powder = 0; powder < 2; powder++) {
        (void)printf("  %s: %zu tracks, area under the ROC curve %.3f\n", powder ? "powder" : "bare plate", n[powder], stat_auc(p[powder], balls[powder], n[powder]));
        for (int b = 0; b < 5; b++) {
            double stated = 0, observed = 0, count = 0;
            for (size_t i = 0; i < n[powder]; i++)
                if (p[powder][i] >= 0.2 * b && (p[powder][i] < 0.2 * b + 0.2 || b == 4)) {
                    stated += p[powder][i];
                    observed += balls[powder][i];
                    count++;
                }
            if (count > 0)
                (void)printf("    p %.1f-%.1f  %4.0f tracks  stated %.2f  observed %.2f\n", 0.2 * b, 0.2 * b + 0.2, count, stated / count, observed / count);
        }
    }
}
