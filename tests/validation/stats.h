/* SPDX-License-Identifier: GPL-3.0-or-later
 * Order statistics of the accuracy tables. */
#ifndef MELTWRIGHT_VALIDATION_STATS_H
#define MELTWRIGHT_VALIDATION_STATS_H

#include <stddef.h>

/* NaN entries are left out; NaN when nothing is left. Arrays are not changed. */
double stat_median(const double *x, size_t n);
double stat_mean(const double *x, size_t n);
/* Rank correlation with mean ranks for ties (Spearman); NaN when one side is constant. */
double stat_spearman(const double *x, const double *y, size_t n);
/* Area under the ROC curve of a score for positive[i] != 0, ties counted half; NaN without both classes. */
double stat_auc(const double *score, const int *positive, size_t n);

#endif
