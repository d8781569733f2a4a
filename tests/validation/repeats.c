/* SPDX-License-Identifier: GPL-3.0-or-later
 * The noise of the measurements themselves: tracks at equal settings within one set. No model can be nearer than this. */
#include <math.h>

#include "track_sets.h"
#include "validate.h"

static bool same_setting(const track_row *a, const track_row *b)
{
    return a->power_W == b->power_W && a->speed_m_per_s == b->speed_m_per_s && a->d4sigma_m == b->d4sigma_m && a->layer_m == b->layer_m;
}

/* Pooled variance of the logarithms over the groups of equal settings; degrees of freedom in *df. */
static double pooled(const track_rows *t, bool of_depth, int *df)
{
    bool seen[MOST_ROWS] = {false};
    double squares = 0;
    *df = 0;
    for (size_t i = 0; i < t->n; i++) {
        double sum = 0, sum2 = 0;
        int n = 0;
        for (size_t j = i; j < t->n && !seen[i]; j++) {
            const double v = of_depth ? t->row[j].depth_m : t->row[j].width_m;
            if (!same_setting(&t->row[i], &t->row[j]) || !(v > 0))
                continue;
            if (j > i)
                seen[j] = true;
            sum += log(v);
            sum2 += log(v) * log(v);
            n++;
        }
        if (n >= 2) {
            squares += sum2 - sum * sum / n;
            *df += n - 1;
        }
    }
    return *df > 0 ? sqrt(squares / *df) : NAN;
}

void validate_repeats(void)
{
    static track_rows rows;
    (void)printf("\nRepeats: scatter of tracks at equal settings within a set, percent (standard deviation of the logarithm; degrees of freedom)\n");
    for (size_t s = 0; s < TRACK_SETS; s++) {
        int df_width, df_depth;
        load_track_set(&track_sets[s], &rows);
        const double width = pooled(&rows, false, &df_width), depth = pooled(&rows, true, &df_depth);
        if (df_width >= 3)
            (void)printf("  %-26s width %4.1f (%d)   depth %4.1f (%d)\n", track_sets[s].name, 100 * width, df_width, 100 * depth, df_depth);
    }
}
