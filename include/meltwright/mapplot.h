/* SPDX-License-Identifier: GPL-3.0-or-later
 * A process map as a picture: verdict regions over laser power and scan speed, one panel for each hatch and layer.
 * The picture holds numbers and labels only; nothing here calls a model. */
#ifndef MELTWRIGHT_MAPPLOT_H
#define MELTWRIGHT_MAPPLOT_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"

/* Lines of equal value of one quantity, labelled on the line. */
typedef struct mw_map_contours {
    const char *name;    /* "track depth" */
    const char *unit;    /* "um"; NULL or "" for a pure number */
    const double *field; /* n_speed rows of n_power; NaN is blank */
    size_t n_level;      /* 0: a few round numbers are chosen */
    const double *levels;
} mw_map_contours;

/* One hatch and layer. Each field has n_speed rows of n_power values, [i_speed * n_power + i_power]; NaN is blank.
 * A field is positive where the trouble is there:
 *   lof > 0 and lof >= over    lack of fusion
 *   over > 0 and over > lof    keyhole
 *   both <= 0                  nominal
 *   melt < 0                   no track, whatever the others say (melt is positive where there is no trouble)
 *   balling > 0                a warning beside the verdict: drawn as a limit line, not as a region
 * NULL is allowed for over, melt and balling and stands for "nowhere". */
typedef struct mw_map_panel {
    double hatch_um;
    double layer_um;
    const double *lof;
    const double *over;
    const double *melt;
    const double *balling;
    size_t n_contour;
    const mw_map_contours *contours;
} mw_map_panel;

/* A point; without a label it is shown by its number, counted from 1. */
typedef struct mw_map_mark {
    double power_W;
    double speed_mm_per_s;
    const char *label;
    int panel; /* the one it belongs on, counted from 0; negative: every panel */
} mw_map_mark;

typedef struct mw_map_picture {
    const char *title;
    size_t n_subtitle;
    const char *const *subtitle;
    const char *footer;
    size_t n_power; /* at least 2, rising */
    const double *power_W;
    size_t n_speed; /* at least 2, rising */
    const double *speed_mm_per_s;
    size_t n_panel; /* 1 to MW_MAP_MOST_PANELS */
    const mw_map_panel *panels;
    size_t n_energy; /* lines of one volume energy density, P = E v h t with the panel's hatch and layer */
    const double *energy_J_per_mm3;
    size_t n_mark;
    const mw_map_mark *marks;
} mw_map_picture;

enum { MW_MAP_MOST_PANELS = 24 };

/* Fractions of the panel's area, from the outlines that the picture shows. They sum to 1 unless a part is blank. */
typedef struct mw_map_share {
    double nominal;
    double lack_of_fusion;
    double keyhole;
    double no_track;
} mw_map_share;

/* Draws to `path`; its ending (.png, .svg, .pdf) chooses the format. The file appears whole or not at all, without a
 * date, and the same picture always gives the same bytes on one machine. Not thread-safe (PLplot is not).
 * Errors: MW_BAD_USAGE (unknown ending), MW_BAD_VALUE, MW_TOO_LARGE, MW_CANNOT_WRITE, MW_NO_MEMORY. */
mw_status mw_map_draw(const mw_map_picture *picture, const char *path, bool overwrite, mw_error *err);

/* Errors: MW_BAD_VALUE, MW_NO_MEMORY. */
mw_status mw_map_shares(const mw_map_panel *panel, size_t n_power, const double power_W[], size_t n_speed,
                        const double speed_mm_per_s[], mw_map_share *share, mw_error *err);

#endif
