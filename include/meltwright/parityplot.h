/* SPDX-License-Identifier: GPL-3.0-or-later
 * Predicted against measured, as a picture: panels with equal logarithmic axes, the line of equality and bands around it. */
#ifndef MELTWRIGHT_PARITYPLOT_H
#define MELTWRIGHT_PARITYPLOT_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"

/* Points of one origin. Pairs that are not both finite and positive are left out. */
typedef struct mw_parity_points {
    size_t n;
    const double *measured, *predicted;
    const bool *open; /* drawn as an outline instead of filled; NULL: none */
} mw_parity_points;

typedef struct mw_parity_panel {
    const char *title;              /* "width (um)" */
    const mw_parity_points *points; /* one for each group */
} mw_parity_panel;

typedef struct mw_parity_picture {
    const char *title;
    const char *subtitle;     /* may be NULL */
    const char *footer;       /* may be NULL */
    size_t n_group;           /* 1 to MW_PARITY_MOST_GROUPS: told apart by colour and by shape */
    const char *const *group; /* names */
    const char *const *note;  /* beside the names; may be NULL */
    size_t n_panel;           /* 1 to MW_PARITY_MOST_PANELS */
    const mw_parity_panel *panel;
} mw_parity_picture;

enum { MW_PARITY_MOST_GROUPS = 21, MW_PARITY_MOST_PANELS = 3 };

/* Draws to `path` (.png, .svg, .pdf), whole or not at all, the same bytes for the same picture. Not thread-safe.
 * Errors: MW_BAD_USAGE (ending), MW_BAD_VALUE (counts, or a panel without one point), MW_CANNOT_WRITE, MW_NO_MEMORY. */
mw_status mw_parity_draw(const mw_parity_picture *picture, const char *path, bool overwrite, mw_error *err);

#endif
