/* SPDX-License-Identifier: GPL-3.0-or-later
 * The inside of one panel, and the signs the legend shares with it. */
#ifndef MELTWRIGHT_PRESENT_MAP_PANEL_H
#define MELTWRIGHT_PRESENT_MAP_PANEL_H

#include "meltwright/mapplot.h"
#include "present/map_canvas.h"
#include "present/map_scene.h"

/* Lightness falls from nominal to no track in steps that survive grey printing; hues (green-white, blue, orange) stay
 * apart in the common forms of colour blindness; hatching is the second sign of the two defects. */
typedef struct mw_region_style {
    const char *name, *long_name;
    mw_colour fill, line, text;
    double hatch_degrees, hatch_spacing; /* 0: none */
    double hatch_stroke;
} mw_region_style;
extern const mw_region_style mw_region_styles[MW_REGION_COUNT];

extern const mw_colour mw_ink, mw_soft_ink, mw_paper, mw_energy_ink, mw_balling_ink;

enum { MW_CONTOUR_STYLES = 3 };
typedef struct mw_contour_style {
    mw_colour colour;
    double on, off; /* dashes; off 0 is a full line */
} mw_contour_style;
extern const mw_contour_style mw_contour_styles[MW_CONTOUR_STYLES];

/* Text sizes, page units. Few, since a vector file holds each letter once for each size. */
enum { MW_SIZE_TITLE = 42, MW_SIZE_AXIS = 29, MW_SIZE_TEXT = 26, MW_SIZE_HEAD = 29, MW_SIZE_MARK = 24 };

/* Fills and hatches up to MW_REGION_COUNT regions that do not overlap; outlines in page units. Hatches pass through (x0, y0). */
void mw_draw_regions(const mw_canvas *c, size_t n, const mw_outline *const outline[], const mw_region_style *const style[],
                     double x0, double y0);
void mw_draw_nominal_outline(const mw_canvas *c, const mw_outline *o);
/* A limit line with ticks to its left. */
void mw_draw_limit(const mw_canvas *c, size_t n, const double x[], const double y[]);
/* The small open circle where an energy line meets a verdict boundary. */
void mw_draw_crossing(const mw_canvas *c, double x, double y);
void mw_draw_mark(const mw_canvas *c, double x, double y);

void mw_draw_panel(const mw_canvas *c, const mw_map_picture *picture, size_t index, const mw_map_scene *scene,
                   const mw_map_frame *frame);

#endif
