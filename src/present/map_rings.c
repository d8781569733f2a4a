/* SPDX-License-Identifier: GPL-3.0-or-later
 * What is done with finished outlines: area, inside or outside, and fewer points. */
#include "present/outline.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

void mw_outline_free(mw_outline *outline)
{
    free(outline->start);
    free(outline->x);
    free(outline->y);
    free(outline->rim);
    memset(outline, 0, sizeof *outline);
}

double mw_outline_area(const mw_outline *o)
{
    double twice = 0;
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t b = o->start[r], e = o->start[r + 1];
        for (size_t i = b; i < e; i++) { /* about the first point, so that large coordinates do not cancel */
            const size_t k = i + 1 < e ? i + 1 : b;
            twice += (o->x[i] - o->x[b]) * (o->y[k] - o->y[b]) - (o->x[k] - o->x[b]) * (o->y[i] - o->y[b]);
        }
    }
    return 0.5 * twice;
}

bool mw_outline_inside(const mw_outline *o, double x, double y)
{
    bool in = false;
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t b = o->start[r], e = o->start[r + 1];
        for (size_t i = b, p = e - 1; i < e; p = i++)
            if ((o->y[i] > y) != (o->y[p] > y) && x < o->x[i] + (y - o->y[i]) * (o->x[p] - o->x[i]) / (o->y[p] - o->y[i]))
                in = !in;
    }
    return in;
}

/* ---- fewer points ---------------------------------------------------------------------------------------------- */

typedef struct thinner {
    const mw_outline *o;
    size_t begin, n; /* the ring */
    double tol_x, tol_y;
    bool *keep;
} thinner;

static double scaled_x(const thinner *t, size_t i)
{
    return t->o->x[t->begin + i % t->n] / t->tol_x;
}
static double scaled_y(const thinner *t, size_t i)
{
    return t->o->y[t->begin + i % t->n] / t->tol_y;
}

/* Distance of point i from the stretch a-b, in tolerances. */
static double offset(const thinner *t, size_t a, size_t b, size_t i)
{
    const double ax = scaled_x(t, a), ay = scaled_y(t, a);
    const double ux = scaled_x(t, b) - ax, uy = scaled_y(t, b) - ay;
    const double px = scaled_x(t, i) - ax, py = scaled_y(t, i) - ay;
    const double length2 = ux * ux + uy * uy;
    double at = length2 > 0 ? (px * ux + py * uy) / length2 : 0;
    at = at < 0 ? 0 : at > 1 ? 1 : at;
    return hypot(px - at * ux, py - at * uy);
}

/* Keeps the point farthest from the chord when it is more than a tolerance away, and does the same with both
 * parts. The smaller part is the one that recurses, so the depth is at most log2(n). */
static void thin(const thinner *t, size_t a, size_t b)
{
    while (b - a > 1) {
        size_t far = a;
        double most = 1;
        for (size_t i = a + 1; i < b; i++) {
            const double d = offset(t, a, b, i);
            if (d > most) {
                most = d;
                far = i;
            }
        }
        if (far == a)
            return;
        t->keep[t->begin + far % t->n] = true;
        if (far - a < b - far) {
            thin(t, a, far);
            a = far;
        } else {
            thin(t, far, b);
            b = far;
        }
    }
}

/* Fixed points: both ends of every stretch along the rim. A ring without any gets its first point and the one farthest from it.
 */
static size_t fix_points(const thinner *t)
{
    const bool *rim = t->o->rim + t->begin;
    size_t fixed = 0, any = 0;
    for (size_t i = 0; i < t->n; i++)
        if (rim[i] != rim[(i + t->n - 1) % t->n]) {
            t->keep[t->begin + i] = true;
            any = i;
            fixed++;
        }
    t->keep[t->begin + any] = true;
    if (fixed < 2) {
        size_t far = any;
        double most = -1;
        for (size_t i = 0; i < t->n; i++) {
            const double d = hypot(scaled_x(t, i) - scaled_x(t, any), scaled_y(t, i) - scaled_y(t, any));
            if (d > most) {
                most = d;
                far = i;
            }
        }
        t->keep[t->begin + far] = true;
    }
    return any;
}

static void thin_ring(const thinner *t)
{
    const size_t first = fix_points(t);
    size_t ends[2] = {first, first};
    /* Stretches between fixed points, found before thinning marks others. */
    bool *fixed = malloc(t->n * sizeof *fixed);
    if (fixed == NULL) { /* thinner outlines are a comfort, not a need */
        memset(t->keep + t->begin, true, t->n);
        return;
    }
    memcpy(fixed, t->keep + t->begin, t->n * sizeof *fixed);
    for (size_t i = first + 1; i <= first + t->n; i++)
        if (fixed[i % t->n]) {
            ends[0] = ends[1];
            ends[1] = i;
            thin(t, ends[0], ends[1]);
        }
    free(fixed);
}

void mw_outline_simplify(mw_outline *o, double tol_x, double tol_y)
{
    bool *keep = calloc(o->n_point + 1, sizeof *keep);
    if (keep == NULL || !(tol_x > 0) || !(tol_y > 0)) {
        free(keep);
        return;
    }
    for (size_t r = 0; r < o->n_ring; r++) {
        const thinner t = {
            .o = o, .begin = o->start[r], .n = o->start[r + 1] - o->start[r], .tol_x = tol_x, .tol_y = tol_y, .keep = keep};
        thin_ring(&t);
    }
    size_t n = 0, rings = 0, begin = 0;
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t end = o->start[r + 1], first = n;
        for (size_t i = begin; i < end; i++)
            if (keep[i]) {
                o->x[n] = o->x[i];
                o->y[n] = o->y[i];
                o->rim[n++] = o->rim[i];
            }
        begin = end;
        if (n - first < 3) /* a sliver thinner than the tolerance */
            n = first;
        else
            o->start[++rings] = n;
    }
    o->n_ring = rings;
    o->n_point = n;
    free(keep);
}

/* ---- area of an overlap ---------------------------------------------------------------------------------------- */

enum { MOST_CORNERS = 3 + MW_OUTLINE_MOST_FIELDS };

typedef struct cut_corner {
    double x, y, f[MW_OUTLINE_MOST_FIELDS];
} cut_corner;

/* Cuts a convex polygon to where field k is positive. */
static int cut(const cut_corner from[], int n, size_t k, size_t n_field, cut_corner to[])
{
    int m = 0;
    for (int i = 0; i < n; i++) {
        const cut_corner *p = &from[i], *q = &from[(i + 1) % n];
        if (p->f[k] > 0)
            to[m++] = *p;
        if ((p->f[k] > 0) != (q->f[k] > 0)) {
            const double at = p->f[k] / (p->f[k] - q->f[k]);
            cut_corner c = {.x = p->x + at * (q->x - p->x), .y = p->y + at * (q->y - p->y)};
            for (size_t l = 0; l < n_field; l++)
                c.f[l] = l == k ? 0 : p->f[l] + at * (q->f[l] - p->f[l]);
            to[m++] = c;
        }
    }
    return m;
}

static double triangle_area(const cut_corner p[3], size_t n_field)
{
    cut_corner a[2 * MOST_CORNERS], b[2 * MOST_CORNERS];
    memcpy(a, p, 3 * sizeof *a);
    int n = 3;
    for (size_t k = 0; k < n_field && n > 0; k++) {
        n = cut(a, n, k, n_field, b);
        memcpy(a, b, (size_t)n * sizeof *a);
    }
    double twice = 0;
    for (int i = 2; i < n; i++)
        twice += (a[i - 1].x - a[0].x) * (a[i].y - a[0].y) - (a[i].x - a[0].x) * (a[i - 1].y - a[0].y);
    return 0.5 * twice;
}

static double cell_area(const mw_outline_grid *g, size_t n_field, const double *const field[], size_t i, size_t j)
{
    cut_corner c[4], centre = {.x = 0.5 * (g->x[i] + g->x[i + 1]), .y = 0.5 * (g->y[j] + g->y[j + 1])};
    int missing = 0, gone = 0;
    for (int q = 0; q < 4; q++) {
        const size_t ci = i + (q == 1 || q == 2), cj = j + (q >= 2);
        c[q] = (cut_corner){.x = g->x[ci], .y = g->y[cj]};
        bool blank = false;
        for (size_t k = 0; k < n_field; k++) {
            c[q].f[k] = field[k][cj * g->nx + ci];
            centre.f[k] += 0.25 * c[q].f[k];
            blank = blank || !isfinite(c[q].f[k]);
        }
        missing += blank;
        gone = blank ? q : gone;
    }
    if (missing > 1)
        return 0;
    if (missing == 1) {
        const cut_corner p[3] = {c[(gone + 1) % 4], c[(gone + 2) % 4], c[(gone + 3) % 4]};
        return triangle_area(p, n_field);
    }
    double area = 0;
    for (int q = 0; q < 4; q++) {
        const cut_corner p[3] = {c[q], c[(q + 1) % 4], centre};
        area += triangle_area(p, n_field);
    }
    return area;
}

double mw_outline_overlap(const mw_outline_grid *grid, size_t n_field, const double *const field[])
{
    double area = 0;
    for (size_t j = 0; j + 1 < grid->ny; j++)
        for (size_t i = 0; i + 1 < grid->nx; i++)
            area += cell_area(grid, n_field, field, i, j);
    return area;
}
