/* SPDX-License-Identifier: GPL-3.0-or-later
 * Published single tracks: the sets, and how a prediction is scored against them. */
#ifndef MELTWRIGHT_TRACK_SETS_H
#define MELTWRIGHT_TRACK_SETS_H

#include <stdbool.h>
#include <stddef.h>

typedef struct track_row {
    double power_W, speed_m_per_s, d4sigma_m, layer_m;
    double width_m, depth_m, length_m; /* measured; NaN where not */
} track_row;

/* A data set is a part of a paper that is measured in one way. `paper` is what is left out together; empty: never fitted.
 * `need` and `avoid` are texts that the row's note must or must not hold. */
typedef struct data_set {
    const char *name, *paper, *file, *card, *condition, *need, *avoid;
    double layer_um;  /* rows with this layer only; NaN: any */
    double beam_um;   /* where the row has none */
    const char *beam; /* how well it is known */
} data_set;

enum { TRACK_SETS = 13, MOST_ROWS = 400, COUPLINGS = 31 };
extern const data_set track_sets[TRACK_SETS];

/* The couplings A0 among which a fit chooses. */
static inline double coupling_at(size_t i)
{
    return 0.20 + 0.02 * (double)i;
}

typedef struct track_rows {
    track_row row[MOST_ROWS];
    size_t n;
} track_rows;

void load_track_set(const data_set *set, track_rows *out);

/* What a model says of one row; lo and hi NaN where it gives no interval. */
typedef struct predicted {
    double width_m, depth_m, length_m, width_lo, width_hi, depth_lo, depth_hi, length_lo, length_hi;
} predicted;

/* Predictions of one set at every coupling: [coupling * MOST_ROWS + row]. */
typedef struct coupling_scan {
    const track_rows *rows;
    const predicted *at;
} coupling_scan;

/* Soft-L1 of ln width and ln depth over a set at one coupling, a mean over rows. */
double track_loss(const coupling_scan *set, size_t coupling);
/* The coupling that serves the fitted sets of all papers but one best ("": of all); papers weigh alike. Index of coupling_at. */
size_t fit_coupling_without(const coupling_scan set[TRACK_SETS], const char *paper);

typedef struct summary {
    size_t n;
    int n_conduction, n_keyhole;
    double width, width_bias, depth_c, depth_c_bias, depth_k, depth_k_bias, length, length_bias, in_width, in_depth, mode;
} summary;
summary summarise_tracks(const track_rows *rows, const predicted *p);

#endif
