/* SPDX-License-Identifier: GPL-3.0-or-later
 * What stands around the panels: titles, axes, the one legend, the footer. */
#include <math.h>
#include <stdio.h>

#include "present/map_layout.h"
#include "present/map_panel.h"

enum { MOST_TICKS = 32 };

static void draw_x_axis(const mw_canvas *c, const mw_map_frame *f, bool labels)
{
    double at[MOST_TICKS];
    const size_t n = mw_round_levels(f->p0, f->p1, f->x1 - f->x0 > 900 ? 10 : 6, MOST_TICKS, at);
    const mw_text_style style = {.size = MW_SIZE_TEXT, .anchor = 0.5, .colour = mw_ink};
    for (size_t i = 0; i < n; i++) {
        const double x = mw_frame_x(f, at[i]);
        mw_canvas_line(c, 2, (const double[]){x, x}, (const double[]){f->y0, f->y0 - 9}, 2, mw_ink);
        char text[32];
        (void)snprintf(text, sizeof text, "%.6g", at[i]);
        if (labels)
            mw_canvas_text(c, x, f->y0 - 28, &style, text);
    }
}

static void draw_y_axis(const mw_canvas *c, const mw_map_frame *f, bool labels)
{
    double at[MOST_TICKS];
    const size_t n = mw_round_levels(f->v0, f->v1, f->y1 - f->y0 > 600 ? 9 : 6, MOST_TICKS, at);
    const mw_text_style style = {.size = MW_SIZE_TEXT, .anchor = 1, .colour = mw_ink};
    for (size_t i = 0; i < n; i++) {
        const double y = mw_frame_y(f, at[i]);
        mw_canvas_line(c, 2, (const double[]){f->x0 - 9, f->x0}, (const double[]){y, y}, 2, mw_ink);
        char text[32];
        (void)snprintf(text, sizeof text, "%.6g", at[i]);
        if (labels)
            mw_canvas_text(c, f->x0 - 15, y, &style, text);
    }
}

static void draw_panel_head(const mw_canvas *c, const mw_map_panel *p, const mw_map_frame *f, double up)
{
    char text[128];
    (void)snprintf(text, sizeof text, "hatch %.4g \xc2\xb5m, layer %.4g \xc2\xb5m", p->hatch_um, p->layer_um);
    mw_canvas_text(c, f->x0, f->y1 + up, &(mw_text_style){.size = MW_SIZE_HEAD, .bold = true, .colour = mw_ink}, text);
}

/* A swatch of the region, with its hatching. */
static void draw_region_key(const mw_canvas *c, const mw_page_key *k)
{
    const double x0 = k->x, x1 = k->x + 56, y0 = k->y - 14, y1 = k->y + 14;
    double x[] = {x0, x1, x1, x0}, y[] = {y0, y0, y1, y1};
    bool rim[4] = {false};
    size_t start[] = {0, 4};
    const mw_outline *const outline = &(const mw_outline){.n_ring = 1, .n_point = 4, .start = start, .x = x, .y = y, .rim = rim};
    const mw_region_style *const s = &mw_region_styles[k->which];
    mw_draw_regions(c, 1, &outline, &s, x0, y0);
    if (k->which == MW_REGION_NOMINAL)
        mw_draw_nominal_outline(c, outline);
    else
        mw_canvas_frame(c, x0, y0, x1, y1, 1.8, mw_ink);
}

static void draw_key(const mw_canvas *c, const mw_page_key *k)
{
    const double x[] = {k->x, k->x + 56}, y[] = {k->y, k->y}, low[] = {k->y - 5, k->y - 5};
    const mw_contour_style *s = &mw_contour_styles[k->which % MW_CONTOUR_STYLES];
    switch (k->kind) {
    case MW_KEY_REGION:
        draw_region_key(c, k);
        break;
    case MW_KEY_BALLING:
        mw_draw_limit(c, 2, x, low);
        break;
    case MW_KEY_ENERGY:
        mw_canvas_line(c, 2, x, y, 2, mw_energy_ink);
        mw_draw_crossing(c, k->x + 28, k->y);
        break;
    case MW_KEY_CONTOUR:
        if (s->off > 0)
            mw_canvas_dashes(c, 2, x, y, 2, s->on, s->off, s->colour);
        else
            mw_canvas_line(c, 2, x, y, 2, s->colour);
        break;
    }
    mw_canvas_text(c, k->x + 70, k->y, &(mw_text_style){.size = MW_SIZE_TEXT, .colour = mw_ink}, k->text);
}

void mw_map_page_draw(const mw_canvas *c, const mw_map_picture *picture, const mw_map_page *page)
{
    for (size_t i = 0; i < page->n_line; i++) {
        const mw_page_line *l = &page->line[i];
        const mw_text_style style = {.size = l->size, .bold = l->bold, .colour = l->bold ? mw_ink : mw_soft_ink};
        mw_canvas_text(c, l->x, l->y, &style, l->text);
    }
    for (size_t k = 0; k < picture->n_panel; k++) {
        draw_x_axis(c, &page->frame[k], page->bottom[k]);
        draw_y_axis(c, &page->frame[k], page->left[k]);
        draw_panel_head(c, &picture->panels[k], &page->frame[k], page->head_y);
    }
    mw_text_style axis = {.size = MW_SIZE_AXIS, .anchor = 0.5, .colour = mw_ink};
    mw_canvas_text(c, 0.5 * (page->axes_x0 + page->axes_x1), page->axes_y0 - 74, &axis, "laser power (W)");
    axis.upward = true;
    mw_canvas_text(c, page->speed_title_x, 0.5 * (page->axes_y0 + page->axes_y1), &axis, "scan speed (mm/s)");
    for (size_t k = 0; k < page->n_key; k++)
        draw_key(c, &page->key[k]);
}
