/* SPDX-License-Identifier: GPL-3.0-or-later
 * Room for labels. Distances are measured with the label's box as the unit ball (the larger of the two distances, each
 * in half sizes of the box), so that a distance above 1 says that the box is clear. */
#include "present/map_place.h"

#include <math.h>

void mw_placer_add_box(mw_placer *p, mw_box box)
{
    if (p->n_box < MW_PLACER_BOXES)
        p->box[p->n_box++] = box;
}

void mw_placer_add_line(mw_placer *p, double x0, double y0, double x1, double y1)
{
    if (p->n_line < MW_PLACER_LINES)
        p->line[p->n_line++] = (mw_box){x0, y0, x1, y1};
}

bool mw_placer_free(const mw_placer *p, mw_box b)
{
    if (b.x0 < p->bounds.x0 || b.y0 < p->bounds.y0 || b.x1 > p->bounds.x1 || b.y1 > p->bounds.y1)
        return false;
    for (size_t i = 0; i < p->n_box; i++)
        if (b.x0 < p->box[i].x1 && b.x1 > p->box[i].x0 && b.y0 < p->box[i].y1 && b.y1 > p->box[i].y0)
            return false;
    return true;
}

static double larger_at(double t, double ax, double ay, double ux, double uy)
{
    const double s = t < 0 ? 0 : t > 1 ? 1 : t;
    return fmax(fabs(ax + s * ux), fabs(ay + s * uy));
}

/* From the origin to the stretch a .. a + u. The larger of two absolute linear functions is convex in t: its least value
 * is at an end, at a zero of one of them, or where they are equal. */
static double distance(double ax, double ay, double ux, double uy)
{
    const double at[] = {0,
                         1,
                         ux != 0 ? -ax / ux : 0,
                         uy != 0 ? -ay / uy : 0,
                         ux != uy ? (ay - ax) / (ux - uy) : 0,
                         ux + uy != 0 ? -(ax + ay) / (ux + uy) : 0};
    double least = INFINITY;
    for (size_t k = 0; k < sizeof at / sizeof at[0]; k++)
        least = fmin(least, larger_at(at[k], ax, ay, ux, uy));
    return least;
}

double mw_placer_clearance(const mw_placer *p, double x, double y, double hw, double hh, bool with_lines)
{
    double least = fmin(fmin(x - p->bounds.x0, p->bounds.x1 - x) / hw, fmin(y - p->bounds.y0, p->bounds.y1 - y) / hh);
    for (size_t i = 0; i < p->n_box; i++) {
        const mw_box *b = &p->box[i];
        const double dx = fabs(x - 0.5 * (b->x0 + b->x1)) - 0.5 * (b->x1 - b->x0);
        const double dy = fabs(y - 0.5 * (b->y0 + b->y1)) - 0.5 * (b->y1 - b->y0);
        least = fmin(least, fmax(dx / hw, dy / hh));
    }
    for (size_t k = 0; k < p->n_outline && least > 0; k++) {
        const mw_outline *o = p->outline[k];
        for (size_t r = 0; r < o->n_ring; r++)
            for (size_t b = o->start[r], e = o->start[r + 1], i = b; i < e; i++) {
                const size_t j = i + 1 < e ? i + 1 : b;
                const double ax = (o->x[i] - x) / hw, ay = (o->y[i] - y) / hh;
                least = fmin(least, distance(ax, ay, (o->x[j] - o->x[i]) / hw, (o->y[j] - o->y[i]) / hh));
            }
    }
    for (size_t i = 0; with_lines && i < p->n_line; i++) {
        const mw_box *l = &p->line[i];
        least = fmin(least, distance((l->x0 - x) / hw, (l->y0 - y) / hh, (l->x1 - l->x0) / hw, (l->y1 - l->y0) / hh));
    }
    return least;
}

double mw_placer_pole(const mw_placer *p, const mw_outline *in, const mw_outline *out, double w, double h, bool with_lines,
                      double *x, double *y)
{
    enum { NX = 32, NY = 24 };
    double best = 0, step_x = (p->bounds.x1 - p->bounds.x0) / NX, step_y = (p->bounds.y1 - p->bounds.y0) / NY;
    for (int j = 0; j < NY; j++)
        for (int i = 0; i < NX; i++) {
            const double cx = p->bounds.x0 + (i + 0.5) * step_x, cy = p->bounds.y0 + (j + 0.5) * step_y;
            if (!mw_outline_inside(in, cx, cy) || (out != NULL && mw_outline_inside(out, cx, cy)))
                continue;
            const double clear = mw_placer_clearance(p, cx, cy, 0.5 * w, 0.5 * h, with_lines);
            if (clear > best) {
                best = clear;
                *x = cx;
                *y = cy;
            }
        }
    for (int round = 0; best > 0 && round < 12; round++) { /* climb with ever smaller steps */
        const double x0 = *x, y0 = *y;
        step_x *= 0.6;
        step_y *= 0.6;
        for (int k = 0; k < 8; k++) {
            static const int sx[] = {1, 1, 0, -1, -1, -1, 0, 1}, sy[] = {0, 1, 1, 1, 0, -1, -1, -1};
            const double cx = x0 + sx[k] * step_x, cy = y0 + sy[k] * step_y;
            const double clear = mw_placer_clearance(p, cx, cy, 0.5 * w, 0.5 * h, with_lines);
            if (clear > best && mw_outline_inside(in, cx, cy) && (out == NULL || !mw_outline_inside(out, cx, cy))) {
                best = clear;
                *x = cx;
                *y = cy;
            }
        }
    }
    return best;
}
