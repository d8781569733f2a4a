/* SPDX-License-Identifier: GPL-3.0-or-later
 * Room for labels: where a box of given size stays clear of lines and of boxes placed before. */
#ifndef MELTWRIGHT_PRESENT_MAP_PLACE_H
#define MELTWRIGHT_PRESENT_MAP_PLACE_H

#include "present/outline.h"

typedef struct mw_box {
    double x0, y0, x1, y1;
} mw_box;

enum { MW_PLACER_BOXES = 256, MW_PLACER_OUTLINES = 8, MW_PLACER_LINES = 64 };

typedef struct mw_placer {
    mw_box bounds;
    size_t n_box, n_outline, n_line;
    mw_box box[MW_PLACER_BOXES];
    const mw_outline *outline[MW_PLACER_OUTLINES]; /* their stretches are to be kept clear */
    mw_box line[MW_PLACER_LINES];                  /* single stretches from (x0, y0) to (x1, y1) */
} mw_placer;

void mw_placer_add_box(mw_placer *p, mw_box box);
void mw_placer_add_line(mw_placer *p, double x0, double y0, double x1, double y1);
bool mw_placer_free(const mw_placer *p, mw_box box); /* inside the bounds, off every box; lines do not matter */

/* How often the box of half size (hw, hh) about (x, y) could be grown before it meets something; below 1 it does not fit. */
double mw_placer_clearance(const mw_placer *p, double x, double y, double hw, double hh, bool with_lines);

/* The roomiest place for a box of size (w, h) inside `in` and outside `out` (may be NULL): the point that is farthest
 * from every border, measured in boxes. Returns its clearance. */
double mw_placer_pole(const mw_placer *p, const mw_outline *in, const mw_outline *out, double w, double h, bool with_lines,
                      double *x, double *y);

#endif
