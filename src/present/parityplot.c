/* SPDX-License-Identifier: GPL-3.0-or-later
 * Parity plots: layout, axes, points. */
#include "meltwright/parityplot.h"

#include <math.h>
#include <stdio.h>

#include "present/picture.h"

/* Page units. */
enum { SIDE = 430, LEFT = 90, GAP = 90, HEAD = 110, FOOT = 92, KEY_LINE = 24, KEY_WIDTH = 370, RIGHT = 30, LETTER = 15 };

static const mw_colour ink = {30, 32, 36}, quiet = {150, 154, 160}, pale = {214, 218, 224};
/* Colours that stay apart for colour-blind readers and in grey; groups that share one differ in shape. */
static const mw_colour palette[] = {{0, 83, 135}, {196, 78, 0}, {0, 112, 82}, {140, 40, 110}, {105, 160, 215}, {120, 92, 20}, {70, 74, 82}};
enum { COLOURS = sizeof palette / sizeof *palette, SHAPES = 3 };

typedef struct parity_axis {
    double lo, hi; /* the same for both directions */
    double x0, y0; /* lower left corner on the page */
} parity_axis;

static bool usable(double measured, double predicted)
{
    return measured > 0 && predicted > 0 && isfinite(measured) && isfinite(predicted);
}

/* Range of all points of a panel with some air; false when it has none. */
static bool range_of(const mw_parity_picture *p, const mw_parity_panel *panel, double *lo, double *hi)
{
    *lo = INFINITY;
    *hi = 0;
    for (size_t g = 0; g < p->n_group; g++)
        for (size_t i = 0; i < panel->points[g].n; i++) {
            const double m = panel->points[g].measured[i], q = panel->points[g].predicted[i];
            if (!usable(m, q))
                continue;
            *lo = fmin(*lo, fmin(m, q));
            *hi = fmax(*hi, fmax(m, q));
        }
    if (!(*hi > 0))
        return false;
    *lo /= 1.15;
    *hi *= 1.15;
    return true;
}

static double along(const parity_axis *a, double value)
{
    return SIDE * log(value / a->lo) / log(a->hi / a->lo);
}

static double page_x(const parity_axis *a, double value)
{
    return a->x0 + along(a, value);
}

static double page_y(const parity_axis *a, double value)
{
    return a->y0 + along(a, value);
}

/* Predicted = factor times measured, clipped to the frame. */
static void line_of(const mw_canvas *c, const parity_axis *a, double factor, double stroke, mw_colour colour)
{
    const double from = fmax(a->lo, a->lo / factor), to = fmin(a->hi, a->hi / factor);
    if (to > from)
        mw_canvas_line(c, 2, (const double[]){page_x(a, from), page_x(a, to)}, (const double[]){page_y(a, factor * from), page_y(a, factor * to)}, stroke, colour);
}

static void band(const mw_canvas *c, const parity_axis *a, double factor, mw_colour colour)
{
    const double lo = a->lo, hi = a->hi;
    const double m[] = {lo, hi / factor, hi, hi, lo * factor, lo}, q[] = {lo * factor, hi, hi, hi / factor, lo, lo};
    double x[6], y[6];
    for (int i = 0; i < 6; i++) {
        x[i] = page_x(a, m[i]);
        y[i] = page_y(a, q[i]);
    }
    mw_canvas_fill(c, 6, x, y, colour);
}

/* Corners of a shape around a point: disc, square, triangle; closed. Returns how many. */
static size_t outline_of(int shape, double x, double y, double size, double px[], double py[])
{
    static const size_t corners[SHAPES] = {10, 4, 3};
    static const double reach[SHAPES] = {1, 1.2, 1.3}, turn[SHAPES] = {0, 0.125, 0.25}; /* of the size, of a full turn */
    const size_t n = corners[shape];
    for (size_t i = 0; i <= n; i++) {
        const double angle = 2 * 3.14159265358979323846 * ((double)(i % n) / (double)n + turn[shape]);
        px[i] = x + reach[shape] * size * cos(angle);
        py[i] = y + reach[shape] * size * sin(angle);
    }
    return n;
}

/* Filled with a white rim, or an outline on white. */
static void marker(const mw_canvas *c, size_t group, double x, double y, double size, bool open)
{
    const mw_colour colour = palette[group % COLOURS], white = {255, 255, 255};
    double px[12], py[12];
    const size_t n = outline_of((int)(group / COLOURS) % SHAPES, x, y, size, px, py);
    mw_canvas_fill(c, n, px, py, open ? white : colour);
    mw_canvas_line(c, n + 1, px, py, open ? 1.4 : 0.7, open ? colour : white);
}

static void ticks(const mw_canvas *c, const parity_axis *a)
{
    static const double step[] = {1, 2, 5};
    const mw_text_style below = {LETTER, 0.5, false, false, ink}, beside = {LETTER, 1, false, false, ink};
    for (int decade = -9; decade < 9; decade++)
        for (int i = 0; i < 3; i++) {
            const double v = step[i] * pow(10, decade);
            if (v < a->lo || v > a->hi)
                continue;
            char text[32];
            (void)snprintf(text, sizeof text, "%g", v);
            const double x = page_x(a, v), y = page_y(a, v);
            mw_canvas_line(c, 2, (const double[]){x, x}, (const double[]){a->y0, a->y0 - 5}, 1, ink);
            mw_canvas_line(c, 2, (const double[]){a->x0, a->x0 - 5}, (const double[]){y, y}, 1, ink);
            mw_canvas_text(c, x, a->y0 - 16, &below, text);
            mw_canvas_text(c, a->x0 - 9, y, &beside, text);
        }
}

static void draw_panel(const mw_canvas *c, const mw_parity_picture *p, size_t k)
{
    const mw_parity_panel *panel = &p->panel[k];
    parity_axis a = {.x0 = LEFT + (double)k * (SIDE + GAP), .y0 = FOOT};
    (void)range_of(p, panel, &a.lo, &a.hi);
    band(c, &a, 1.5, (mw_colour){240, 242, 245});
    band(c, &a, 1.1, (mw_colour){222, 228, 234});
    line_of(c, &a, 1.5, 0.8, pale);
    line_of(c, &a, 1 / 1.5, 0.8, pale);
    line_of(c, &a, 1, 1.4, quiet);
    for (size_t g = 0; g < p->n_group; g++) {
        const mw_parity_points *set = &panel->points[g];
        for (size_t i = 0; i < set->n; i++)
            if (usable(set->measured[i], set->predicted[i]))
                marker(c, g, page_x(&a, set->measured[i]), page_y(&a, set->predicted[i]), 3.6, set->open != NULL && set->open[i]);
    }
    mw_canvas_frame(c, a.x0, a.y0, a.x0 + SIDE, a.y0 + SIDE, 1.2, ink);
    ticks(c, &a);
    const mw_text_style head = {17, 0, true, false, ink}, below = {16, 0.5, false, false, ink}, beside = {16, 0.5, false, true, ink};
    mw_canvas_text(c, a.x0, a.y0 + SIDE + 18, &head, panel->title);
    mw_canvas_text(c, a.x0 + SIDE / 2.0, a.y0 - 44, &below, "measured");
    mw_canvas_text(c, a.x0 - 62, a.y0 + SIDE / 2.0, &beside, "predicted");
}

static double page_width(const mw_parity_picture *p)
{
    return LEFT + (double)p->n_panel * SIDE + (double)(p->n_panel - 1) * GAP + 30 + KEY_WIDTH + RIGHT;
}

static void draw_all(const mw_canvas *c, void *what)
{
    const mw_parity_picture *p = what;
    const mw_text_style title = {25, 0, true, false, ink}, sub = {LETTER, 0, false, false, {90, 94, 102}}, name = {LETTER, 0, false, false, ink};
    mw_canvas_text(c, LEFT, c->height - 32, &title, p->title);
    if (p->subtitle != NULL)
        mw_canvas_text(c, LEFT, c->height - 60, &sub, p->subtitle);
    if (p->footer != NULL)
        mw_canvas_text(c, LEFT, 16, &sub, p->footer);
    for (size_t k = 0; k < p->n_panel; k++)
        draw_panel(c, p, k);
    const double x = page_width(p) - RIGHT - KEY_WIDTH;
    double y = FOOT + SIDE - 8;
    for (size_t g = 0; g < p->n_group; g++, y -= KEY_LINE) {
        marker(c, g, x + 6, y, 5, false);
        mw_canvas_text(c, x + 20, y, &name, p->group[g]);
        const mw_text_style right = {LETTER, 1, false, false, {90, 94, 102}};
        if (p->note != NULL)
            mw_canvas_text(c, x + KEY_WIDTH, y, &right, p->note[g]);
    }
    y -= 8;
    mw_canvas_box(c, x, y - 7, x + 14, y + 7, (mw_colour){222, 228, 234});
    mw_canvas_text(c, x + 20, y, &name, "within 10 %");
    y -= KEY_LINE;
    mw_canvas_box(c, x, y - 7, x + 14, y + 7, (mw_colour){240, 242, 245});
    mw_canvas_text(c, x + 20, y, &name, "within a factor of 1.5");
}

mw_status mw_parity_draw(const mw_parity_picture *picture, const char *path, bool overwrite, mw_error *err)
{
    double lo, hi;
    if (picture->n_group < 1 || picture->n_group > MW_PARITY_MOST_GROUPS || picture->n_panel < 1 || picture->n_panel > MW_PARITY_MOST_PANELS)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "a parity plot holds 1 to %d groups and 1 to %d panels", MW_PARITY_MOST_GROUPS, MW_PARITY_MOST_PANELS);
    for (size_t k = 0; k < picture->n_panel; k++)
        if (!range_of(picture, &picture->panel[k], &lo, &hi))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "panel %zu of a parity plot has no point", k + 1);
    const mw_status status = mw_picture_allowed(path, overwrite, err);
    if (status != MW_OK)
        return status;
    const double key = FOOT + HEAD + KEY_LINE * (double)(picture->n_group + 3);
    mw_parity_picture copy = *picture;
    return mw_picture_write(path, overwrite, page_width(picture), fmax(HEAD + SIDE + FOOT, key), draw_all, &copy, err);
}
