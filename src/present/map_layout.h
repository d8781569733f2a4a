/* SPDX-License-Identifier: GPL-3.0-or-later
 * Where everything stands on the page, and what stands around the panels. */
#ifndef MELTWRIGHT_PRESENT_MAP_LAYOUT_H
#define MELTWRIGHT_PRESENT_MAP_LAYOUT_H

#include "meltwright/mapplot.h"
#include "present/map_canvas.h"
#include "present/map_scene.h"

enum { MW_PAGE_LINES = 16, MW_PAGE_LINE_BYTES = 512, MW_PAGE_KEYS = 16 };

typedef struct mw_page_line {
    char text[MW_PAGE_LINE_BYTES];
    double x, y, size;
    bool bold;
} mw_page_line;

typedef struct mw_page_key {
    enum mw_key_kind { MW_KEY_REGION, MW_KEY_BALLING, MW_KEY_ENERGY, MW_KEY_CONTOUR } kind;
    size_t which; /* region or contour set */
    char text[160];
    double x, y; /* left end, middle height */
} mw_page_key;

typedef struct mw_map_page {
    double width, height;
    size_t columns, rows;
    mw_map_frame frame[MW_MAP_MOST_PANELS];
    bool bottom[MW_MAP_MOST_PANELS], left[MW_MAP_MOST_PANELS]; /* has tick labels below, at the left */
    size_t n_line, n_key;
    mw_page_line line[MW_PAGE_LINES];
    mw_page_key key[MW_PAGE_KEYS];
    double head_y;                             /* of panel titles, above a frame */
    double axes_x0, axes_x1, axes_y0, axes_y1;
    double speed_title_x; /* middle line of the title of the speed axis */ /* around all frames */
} mw_map_page;

/* Which regions and lines come up in any panel decides what the legend holds. */
void mw_map_page_make(const mw_map_picture *picture, const mw_map_scene scene[], mw_map_page *page);
/* Titles, axes, legend, footer; the panels are drawn by mw_draw_panel. */
void mw_map_page_draw(const mw_canvas *c, const mw_map_picture *picture, const mw_map_page *page);

#endif
