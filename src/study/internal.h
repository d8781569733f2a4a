/* SPDX-License-Identifier: GPL-3.0-or-later
 * Private to the study storey: intervals, and the search for the edges of the window. */
#ifndef MELTWRIGHT_STUDY_INTERNAL_H
#define MELTWRIGHT_STUDY_INTERNAL_H

#include "meltwright/study.h"

/* How many threads to use: as asked, all cores for 0 or less, one without OpenMP. */
int mw_threads(int asked);

/* Rising axes with values in reason, and not too many cells. Every axis has at least one value. */
mw_status mw_grid_check(const mw_grid *grid, mw_error *err);
/* Leaves only the powers that the wanted cells need; cells are then counted from the first of them. */
mw_status mw_grid_cut(mw_grid *grid, mw_error *err);

/* Outside the record the sds of the intervals are multiplied, and the logarithms of the odds divided, by this: a judgement, not a measurement. */
#define MW_OUTSIDE_DOUBT 1.5

/* Fills the interval fields of a result that has its pool. */
void mw_intervals_at(const mw_plan *plan, bool outside, mw_result *result);

/* Margins of one judged result, by a search of its own. */
mw_status mw_margins_at(const mw_plan *plan, const mw_result *result, mw_margins *out);

/* Tracks of one speed at several powers from the tables (see mw_sweep_by_table); each value is the same whatever stands beside it. */
mw_status mw_quick_tracks(const mw_plan *plan, double speed_m_per_s, double d4sigma_m, const double *power_W, size_t n, mw_track *out);

/* ---- edges along one factor ----
 * A line holds tracks over rising values of power (or speed) with the other factor fixed. The edges of a (hatch, layer) on
 * it are the values where the verdict enters or leaves nominal. The search runs on quick tracks: an edge is right to 1e-4 of its value. */
typedef enum mw_factor { MW_ALONG_POWER, MW_ALONG_SPEED } mw_factor;

/* Values at which a line over rising values is laid out: powers of MW_LINE_RATIO from a fifth of the first to five times the last. They
 * are absolute, so that a single setting, a grid and a part of a grid look at the same places and find the same edges to the last bit.
 * Returns how many; call with out = NULL to count. */
#define MW_LINE_RATIO 1.05
#define MW_MARGIN_REACH 5.0
size_t mw_line_values(const double *value, size_t n, double *out);

typedef struct mw_line {
    const mw_plan *plan;
    mw_factor factor;
    const mw_track *track; /* n tracks, rising along the factor */
    size_t n;
} mw_line;

enum { MW_MOST_EDGES = 8 };
typedef struct mw_edges {
    size_t n;
    bool nominal_before; /* the verdict below the first edge is nominal */
    double at[MW_MOST_EDGES]; /* rising */
} mw_edges;
mw_status mw_edges_on(const mw_line *line, double hatch_m, double layer_m, mw_edges *out);

/* The nearest edge above or below a judged result, searched outward from it; NaN beyond a factor of MW_MARGIN_REACH. */
mw_status mw_nearest_edge(const mw_plan *plan, const mw_result *result, mw_factor factor, bool up, double *edge);

/* Percent from `value` down and up to the nearest edge; NaN beyond a factor of MW_MARGIN_REACH. */
void mw_margin_from(const mw_edges *edges, double value, double *down_pct, double *up_pct);

#endif
