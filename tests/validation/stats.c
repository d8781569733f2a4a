/* SPDX-License-Identifier: GPL-3.0-or-later
 * Order statistics; ranks and correlation by GSL. */
#include "stats.h"

#include <gsl/gsl_sort.h>
#include <gsl/gsl_statistics.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

static size_t without_nan(const double *x, size_t n, double *out)
{
    size_t m = 0;
    for (size_t i = 0; i < n; i++)
        if (!isnan(x[i]))
            out[m++] = x[i];
    return m;
}

double stat_median(const double *x, size_t n)
{
    double *kept = malloc((n + 1) * sizeof *kept);
    const size_t m = without_nan(x, n, kept);
    gsl_sort(kept, 1, m);
    const double median = m > 0 ? gsl_stats_median_from_sorted_data(kept, 1, m) : NAN;
    free(kept);
    return median;
}

double stat_mean(const double *x, size_t n)
{
    double sum = 0;
    size_t m = 0;
    for (size_t i = 0; i < n; i++)
        if (!isnan(x[i])) {
            sum += x[i];
            m++;
        }
    return m > 0 ? sum / (double)m : NAN;
}

double stat_spearman(const double *x, const double *y, size_t n)
{
    if (n < 2)
        return NAN;
    double *work = malloc(2 * n * sizeof *work);
    const double r = gsl_stats_spearman(x, 1, y, 1, n, work);
    free(work);
    return r;
}

double stat_auc(const double *score, const int *positive, size_t n)
{
    double wins = 0, pairs = 0;
    for (size_t i = 0; i < n; i++)
        for (size_t j = 0; j < n; j++)
            if (positive[i] && !positive[j]) {
                pairs++;
                wins += score[i] > score[j] ? 1 : score[i] == score[j] ? 0.5 : 0;
            }
    return pairs > 0 ? wins / pairs : NAN;
}
