/* SPDX-License-Identifier: GPL-3.0-or-later
 * Colours, hatching and signs of a map. */
#include <math.h>
#include <stdlib.h>

#include "present/map_panel.h"

const mw_colour mw_ink = {28, 32, 38}, mw_soft_ink = {92, 98, 106}, mw_paper = {255, 255, 255};
const mw_colour mw_energy_ink = {74, 40, 92}, mw_balling_ink = {140, 20, 60};

const mw_region_style mw_region_styles[MW_REGION_COUNT] = {
    [MW_REGION_NOMINAL] = {"nominal", "nominal window", {244, 248, 236}, {18, 66, 58}, {14, 58, 50}, 0, 0, 0},
    [MW_REGION_LOF] = {"lack of fusion", "lack of fusion", {176, 204, 232}, {92, 134, 176}, {16, 52, 92}, 45, 24, 1.4},
    [MW_REGION_KEYHOLE] = {"keyhole", "keyhole porosity", {232, 158, 96}, {176, 96, 40}, {84, 36, 4}, 135, 13, 1.3},
    [MW_REGION_NO_TRACK] = {"no track", "no track", {112, 118, 128}, {60, 64, 72}, {255, 255, 255}, 0, 0, 0},
};

const mw_contour_style mw_contour_styles[MW_CONTOUR_STYLES] = {
    {{20, 84, 92}, 0, 0},
    {{96, 60, 16}, 34, 10},
    {{60, 60, 60}, 10, 8},
};

/* ---- fills ----------------------------------------------------------------------------------------------------- */

/* PLplot also strokes what it fills, so a path with bridges to its holes would show them. Rings are painted instead,
 * the large before the small: a hole is painted as paper and then by whatever region lies in it. */
typedef struct painted_ring {
    const mw_outline *of;
    size_t ring;
    double area; /* positive: outer ring, negative: hole */
    mw_colour colour;
} painted_ring;

static double ring_area(const mw_outline *o, size_t r)
{
    size_t start[2] = {0, o->start[r + 1] - o->start[r]};
    const mw_outline one = {.n_ring = 1, .n_point = start[1], .start = start, .x = o->x + o->start[r], .y = o->y + o->start[r]};
    return mw_outline_area(&one);
}

/* A hole and the region that fills it have the same ring but for rounding and thinning: the hole goes first. */
static double painting_order(const painted_ring *p)
{
    return p->area < 0 ? -1.01 * p->area : p->area;
}

static int large_first(const void *a, const void *b)
{
    const double x = painting_order(a), y = painting_order(b);
    return (x < y) - (x > y);
}

static void paint(const mw_canvas *c, size_t n, const mw_outline *const outline[], const mw_colour colour[])
{
    size_t rings = 0;
    for (size_t k = 0; k < n; k++)
        rings += outline[k]->n_ring;
    painted_ring *list = malloc((rings + 1) * sizeof *list);
    if (list == NULL)
        return;
    size_t m = 0;
    for (size_t k = 0; k < n; k++)
        for (size_t r = 0; r < outline[k]->n_ring; r++) {
            list[m] = (painted_ring){outline[k], r, ring_area(outline[k], r), colour[k]};
            if (list[m].area < 0)
                list[m].colour = mw_paper;
            m++;
        }
    qsort(list, m, sizeof *list, large_first);
    for (size_t i = 0; i < m; i++) {
        const mw_outline *o = list[i].of;
        const size_t b = o->start[list[i].ring];
        mw_canvas_fill(c, o->start[list[i].ring + 1] - b, o->x + b, o->y + b, list[i].colour);
    }
    free(list);
}

/* ---- hatching -------------------------------------------------------------------------------------------------- */

static int by_value(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

/* Places along the line across == at where it enters and leaves the rings, sorted; even-odd. */
static size_t crossings(const mw_outline *o, double ux, double uy, double at, size_t room, double along[])
{
    size_t n = 0;
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t b = o->start[r], e = o->start[r + 1];
        for (size_t i = b, p = e - 1; i < e; p = i++) {
            const double d = o->y[i] * ux - o->x[i] * uy - at, dp = o->y[p] * ux - o->x[p] * uy - at;
            if ((d > 0) == (dp > 0) || n == room)
                continue;
            const double t = dp / (dp - d);
            const double x = o->x[p] + t * (o->x[i] - o->x[p]), y = o->y[p] + t * (o->y[i] - o->y[p]);
            along[n++] = x * ux + y * uy;
        }
    }
    qsort(along, n, sizeof along[0], by_value);
    return n;
}

/* Does the straight way between two points keep to the outline, so that its border line will cover it? */
static bool along_border(const mw_outline *o, const double x[2], const double y[2])
{
    const double mx = 0.5 * (x[0] + x[1]), my = 0.5 * (y[0] + y[1]);
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t b = o->start[r], e = o->start[r + 1];
        for (size_t i = b, p = e - 1; i < e; p = i++) {
            const double ux = o->x[i] - o->x[p], uy = o->y[i] - o->y[p], length2 = ux * ux + uy * uy;
            double t = length2 > 0 ? ((mx - o->x[p]) * ux + (my - o->y[p]) * uy) / length2 : 0;
            t = t < 0 ? 0 : t > 1 ? 1 : t;
            if (hypot(mx - o->x[p] - t * ux, my - o->y[p] - t * uy) < 0.5)
                return true;
        }
    }
    return false;
}

/* Successive hatch lines are drawn as one meander where the turn is hidden by the border: far fewer objects in a file. */
typedef struct meander {
    const mw_canvas *c;
    const mw_outline *o;
    const mw_region_style *style;
    size_t n;
    double x[256], y[256];
} meander;

static void flush(meander *m)
{
    mw_canvas_line(m->c, m->n, m->x, m->y, m->style->hatch_stroke, m->style->line);
    m->n = 0;
}

static void add_hatch_line(meander *m, const double x[2], const double y[2])
{
    int first = 0;
    if (m->n > 0) {
        const double lx = m->x[m->n - 1], ly = m->y[m->n - 1];
        first = hypot(x[1] - lx, y[1] - ly) < hypot(x[0] - lx, y[0] - ly);
        if (m->n + 2 > 256 || hypot(x[first] - lx, y[first] - ly) > 6 * m->style->hatch_spacing ||
            !along_border(m->o, (const double[]){lx, x[first]}, (const double[]){ly, y[first]})) {
            flush(m);
            first = 0;
        }
    }
    for (int k = 0; k < 2; k++) {
        m->x[m->n] = x[k == 0 ? first : 1 - first];
        m->y[m->n++] = y[k == 0 ? first : 1 - first];
    }
}

static void hatch(const mw_canvas *c, const mw_outline *o, const mw_region_style *s, double x0, double y0)
{
    enum { MOST_CROSSINGS = 512 };
    const double turn = s->hatch_degrees * 3.14159265358979323846 / 180, ux = cos(turn), uy = sin(turn);
    const double origin = y0 * ux - x0 * uy;
    double low = INFINITY, high = -INFINITY;
    for (size_t i = 0; i < o->n_point; i++) {
        const double across = o->y[i] * ux - o->x[i] * uy;
        low = fmin(low, across);
        high = fmax(high, across);
    }
    meander m = {.c = c, .o = o, .style = s, .n = 0};
    for (double k = ceil((low - origin) / s->hatch_spacing); origin + k * s->hatch_spacing < high; k++) {
        const double at = origin + k * s->hatch_spacing;
        double along[MOST_CROSSINGS];
        const size_t n = crossings(o, ux, uy, at, MOST_CROSSINGS, along);
        for (size_t i = 0; i + 1 < n; i += 2)
            if (along[i + 1] - along[i] > 1)
                add_hatch_line(&m, (const double[]){along[i] * ux - at * uy, along[i + 1] * ux - at * uy},
                               (const double[]){along[i] * uy + at * ux, along[i + 1] * uy + at * ux});
    }
    flush(&m);
}

void mw_draw_regions(const mw_canvas *c, size_t n, const mw_outline *const outline[], const mw_region_style *const style[],
                     double x0, double y0)
{
    mw_colour colour[MW_REGION_COUNT];
    for (size_t k = 0; k < n && k < MW_REGION_COUNT; k++)
        colour[k] = style[k]->fill;
    paint(c, n, outline, colour);
    for (size_t k = 0; k < n; k++)
        if (style[k]->hatch_spacing > 0)
            hatch(c, outline[k], style[k], x0, y0);
}

static void draw_ring(const mw_canvas *c, const mw_outline *o, size_t r, double stroke, mw_colour colour)
{
    const size_t b = o->start[r], n = o->start[r + 1] - b;
    double *x = malloc(2 * (n + 2) * sizeof *x), *y = x + n + 2;
    if (x == NULL)
        return;
    for (size_t i = 0; i < n + 2; i++) { /* two points more, so that the joint is a corner as all others */
        x[i] = o->x[b + i % n];
        y[i] = o->y[b + i % n];
    }
    mw_canvas_line(c, n + 2, x, y, stroke, colour);
    free(x);
}

void mw_draw_nominal_outline(const mw_canvas *c, const mw_outline *o)
{
    for (size_t r = 0; r < o->n_ring; r++)
        draw_ring(c, o, r, 5.5, mw_region_styles[MW_REGION_NOMINAL].line);
}

/* Point at a distance along a line, and the unit vector there. The walk goes forward only. */
typedef struct walker {
    size_t n, i;
    const double *x, *y;
    double before; /* length up to point i */
} walker;

static bool walk_to(walker *w, double at, double *x, double *y, double *ux, double *uy)
{
    for (; w->i + 1 < w->n; w->i++) {
        const double dx = w->x[w->i + 1] - w->x[w->i], dy = w->y[w->i + 1] - w->y[w->i], length = hypot(dx, dy);
        if (at <= w->before + length && length > 0) {
            *ux = dx / length;
            *uy = dy / length;
            *x = w->x[w->i] + (at - w->before) * *ux;
            *y = w->y[w->i] + (at - w->before) * *uy;
            return true;
        }
        w->before += length;
    }
    return false;
}

/* Each dash carries its tick in one stroke: along, out to the left, back, on. */
void mw_draw_limit(const mw_canvas *c, size_t n, const double x[], const double y[])
{
    const double half = 9, gap = 8, tick = 11;
    walker w = {.n = n, .x = x, .y = y};
    for (double at = 0.5 * gap;; at += 2 * half + gap) {
        double px[5], py[5], ux, uy;
        if (!walk_to(&w, at, &px[0], &py[0], &ux, &uy) || !walk_to(&w, at + half, &px[1], &py[1], &ux, &uy))
            return;
        px[2] = px[1] - tick * uy;
        py[2] = py[1] + tick * ux;
        px[3] = px[1];
        py[3] = py[1];
        const size_t points = walk_to(&w, at + 2 * half, &px[4], &py[4], &ux, &uy) ? 5 : 4;
        mw_canvas_line(c, points, px, py, 2.4, mw_balling_ink);
    }
}

void mw_draw_crossing(const mw_canvas *c, double x, double y)
{
    mw_canvas_disc(c, x, y, 6, mw_paper);
    mw_canvas_circle(c, x, y, 6, 2.2, mw_energy_ink);
}

void mw_draw_mark(const mw_canvas *c, double x, double y)
{
    mw_canvas_disc(c, x, y, 10.5, mw_paper);
    mw_canvas_disc(c, x, y, 8, mw_ink);
}
