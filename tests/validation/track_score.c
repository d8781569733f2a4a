/* SPDX-License-Identifier: GPL-3.0-or-later
 * How predictions of single tracks are scored, and the fit of the one coupling. */
#include <math.h>
#include <string.h>

#include "stats.h"
#include "track_sets.h"

static double soft(double predicted_m, double measured_m)
{
    if (isnan(measured_m))
        return 0;
    const double r = predicted_m > 0 ? log(predicted_m / measured_m) / 0.2 : 5;
    return 2 * (sqrt(1 + r * r) - 1);
}

double track_loss(const coupling_scan *set, size_t coupling)
{
    double sum = 0;
    for (size_t i = 0; i < set->rows->n; i++) {
        const predicted *p = &set->at[coupling * MOST_ROWS + i];
        sum += soft(p->width_m, set->rows->row[i].width_m) + soft(p->depth_m, set->rows->row[i].depth_m);
    }
    return sum / (double)set->rows->n;
}

size_t fit_coupling_without(const coupling_scan set[TRACK_SETS], const char *paper)
{
    size_t best = 0;
    double least = INFINITY;
    for (size_t c = 0; c < COUPLINGS; c++) {
        double sum = 0;
        for (size_t s = 0; s < TRACK_SETS; s++)
            if (track_sets[s].paper[0] != '\0' && strcmp(track_sets[s].paper, paper) != 0)
                sum += track_loss(&set[s], c) * (strcmp(track_sets[s].paper, "Coen") == 0 ? 0.5 : 1);
        if (sum < least) {
            least = sum;
            best = c;
        }
    }
    return best;
}

summary summarise_tracks(const track_rows *set, const predicted *p)
{
    enum { W, C, K, L, QUANTITIES };
    double signed_error[QUANTITIES][MOST_ROWS], error[QUANTITIES][MOST_ROWS], in_width[MOST_ROWS], in_depth[MOST_ROWS], mode[MOST_ROWS];
    summary s = {.n = set->n};
    for (size_t i = 0; i < set->n; i++) {
        const track_row *m = &set->row[i];
        const bool keyhole = m->depth_m >= 0.5 * m->width_m;
        const double e[QUANTITIES] = {p[i].width_m / m->width_m - 1, keyhole ? NAN : p[i].depth_m / m->depth_m - 1,
                                      keyhole ? p[i].depth_m / m->depth_m - 1 : NAN, p[i].length_m / m->length_m - 1};
        for (int q = 0; q < QUANTITIES; q++) {
            signed_error[q][i] = 100 * e[q];
            error[q][i] = fabs(100 * e[q]);
        }
        s.n_conduction += !isnan(e[C]);
        s.n_keyhole += !isnan(e[K]);
        in_width[i] = isnan(m->width_m) ? NAN : m->width_m >= p[i].width_lo && m->width_m <= p[i].width_hi;
        in_depth[i] = isnan(m->depth_m) ? NAN : m->depth_m >= p[i].depth_lo && m->depth_m <= p[i].depth_hi;
        mode[i] = isnan(m->depth_m) || isnan(m->width_m) ? NAN : (p[i].depth_m >= 0.5 * p[i].width_m) == keyhole;
    }
    s.width = stat_median(error[W], s.n);
    s.width_bias = stat_median(signed_error[W], s.n);
    s.depth_c = stat_median(error[C], s.n);
    s.depth_c_bias = stat_median(signed_error[C], s.n);
    s.depth_k = stat_median(error[K], s.n);
    s.depth_k_bias = stat_median(signed_error[K], s.n);
    s.length = stat_median(error[L], s.n);
    s.length_bias = stat_median(signed_error[L], s.n);
    s.in_width = stat_mean(in_width, s.n);
    s.in_depth = stat_mean(in_depth, s.n);
    s.mode = stat_mean(mode, s.n);
    return s;
}
