/* SPDX-License-Identifier: GPL-3.0-or-later
 * The inside of one panel: regions, lines over them, and labels where there is room. */
#include "present/map_panel.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "present/map_place.h"

typedef struct panel_drawing {
    const mw_canvas *c;
    const mw_map_picture *picture;
    const mw_map_panel *panel;
    const mw_map_scene *scene;
    const mw_map_frame *frame;
    mw_placer placer;
} panel_drawing;

static int region_at(const mw_map_scene *s, double x, double y)
{
    for (int r = MW_REGION_COUNT - 1; r >= 0; r--) /* no track covers the others */
        if (mw_outline_inside(&s->region[r], x, y))
            return r;
    return MW_REGION_COUNT;
}

static mw_colour fill_at(const mw_map_scene *s, double x, double y)
{
    const int r = region_at(s, x, y);
    return r == MW_REGION_COUNT ? mw_paper : mw_region_styles[r].fill;
}

/* ---- open lines: the stretches of an outline off the rim ------------------------------------------------------- */

typedef void (*run_drawer)(panel_drawing *d, size_t n, const double x[], const double y[], const void *how);

static void each_run(panel_drawing *d, const mw_outline *o, run_drawer draw, const void *how)
{
    double *x = malloc(2 * (o->n_point + 2) * sizeof *x), *y = x + o->n_point + 2;
    if (x == NULL)
        return;
    for (size_t r = 0; r < o->n_ring; r++) {
        const size_t b = o->start[r], n = o->start[r + 1] - b;
        size_t first = 0; /* a point where a run begins; any point of a ring without rim */
        for (size_t i = 0; i < n; i++)
            if (!o->rim[b + i] && o->rim[b + (i + n - 1) % n]) {
                first = i;
                break;
            }
        size_t m = 0;
        for (size_t k = 0; k <= n; k++) {
            const size_t i = b + (first + k) % n;
            const bool into = k > 0 && !o->rim[b + (first + k - 1) % n], on = k < n && !o->rim[i];
            if (into || on) {
                x[m] = o->x[i];
                y[m++] = o->y[i];
            }
            if (!on && m > 0) {
                if (m > 1)
                    draw(d, m, x, y, how);
                m = 0;
            }
        }
    }
    free(x);
}

static void draw_thin(panel_drawing *d, size_t n, const double x[], const double y[], const void *how)
{
    mw_canvas_line(d->c, n, x, y, 1.8, *(const mw_colour *)how);
}

static void draw_limit_run(panel_drawing *d, size_t n, const double x[], const double y[], const void *how)
{
    (void)how;
    mw_draw_limit(d->c, n, x, y);
}

static void draw_contour_run(panel_drawing *d, size_t n, const double x[], const double y[], const void *how)
{
    const mw_contour_style *s = how;
    if (s->off > 0)
        mw_canvas_dashes(d->c, n, x, y, 2, s->on, s->off, s->colour);
    else
        mw_canvas_line(d->c, n, x, y, 2, s->colour);
}

/* ---- energy density -------------------------------------------------------------------------------------------- */

/* The line P = E v h t within the frame; false when it misses. */
static bool energy_line(const panel_drawing *d, double energy, double x[2], double y[2])
{
    const mw_map_frame *f = d->frame;
    const double watts_per_speed = energy * d->panel->hatch_um * 1e-3 * d->panel->layer_um * 1e-3;
    const double p0 = fmax(f->p0, watts_per_speed * f->v0), p1 = fmin(f->p1, watts_per_speed * f->v1);
    if (!(watts_per_speed > 0) || !(p0 < p1))
        return false;
    x[0] = mw_frame_x(f, p0);
    y[0] = mw_frame_y(f, p0 / watts_per_speed);
    x[1] = mw_frame_x(f, p1);
    y[1] = mw_frame_y(f, p1 / watts_per_speed);
    return true;
}

typedef struct crossing_list {
    enum mw_region owner;
    double x[2], y[2]; /* the line */
    size_t n;
    double at_x[32], at_y[32];
} crossing_list;

static void collect_crossings(const panel_drawing *d, const mw_outline *o, crossing_list *l)
{
    const double ux = l->x[1] - l->x[0], uy = l->y[1] - l->y[0];
    for (size_t r = 0; r < o->n_ring; r++)
        for (size_t b = o->start[r], e = o->start[r + 1], i = b; i < e; i++) {
            if (o->rim[i])
                continue;
            const size_t j = i + 1 < e ? i + 1 : b;
            const double a0 = (o->y[i] - l->y[0]) * ux - (o->x[i] - l->x[0]) * uy;
            const double a1 = (o->y[j] - l->y[0]) * ux - (o->x[j] - l->x[0]) * uy;
            if ((a0 > 0) == (a1 > 0))
                continue;
            const double t = a0 / (a0 - a1), x = o->x[i] + t * (o->x[j] - o->x[i]), y = o->y[i] + t * (o->y[j] - o->y[i]);
            const double along = ((x - l->x[0]) * ux + (y - l->y[0]) * uy) / (ux * ux + uy * uy);
            bool known = along < 0 || along > 1 || l->n == 32 ||
                         (l->owner != MW_REGION_NO_TRACK && mw_outline_inside(&d->scene->region[MW_REGION_NO_TRACK], x, y));
            for (size_t k = 0; k < l->n && !known; k++) /* each border belongs to two regions */
                known = hypot(l->at_x[k] - x, l->at_y[k] - y) < 4;
            if (!known) {
                l->at_x[l->n] = x;
                l->at_y[l->n++] = y;
            }
        }
}

static void draw_energy_lines(panel_drawing *d)
{
    for (size_t k = 0; k < d->picture->n_energy; k++) {
        double x[2], y[2];
        if (!energy_line(d, d->picture->energy_J_per_mm3[k], x, y))
            continue;
        mw_canvas_line(d->c, 2, x, y, 2, mw_energy_ink);
        mw_placer_add_line(&d->placer, x[0], y[0], x[1], y[1]);
    }
}

static void draw_crossings(panel_drawing *d)
{
    for (size_t k = 0; k < d->picture->n_energy; k++) {
        crossing_list l = {.n = 0};
        if (!energy_line(d, d->picture->energy_J_per_mm3[k], l.x, l.y))
            continue;
        for (int r = 0; r < MW_REGION_COUNT; r++) {
            l.owner = (mw_region)r;
            collect_crossings(d, &d->scene->region[r], &l);
        }
        for (size_t i = 0; i < l.n; i++) {
            mw_draw_crossing(d->c, l.at_x[i], l.at_y[i]);
            mw_placer_add_box(&d->placer, (mw_box){l.at_x[i] - 8, l.at_y[i] - 8, l.at_x[i] + 8, l.at_y[i] + 8});
        }
    }
}

/* Labels stand outside the frame, where the lines leave it; one that would cover another is left out. */
static void label_energy_lines(const panel_drawing *d)
{
    static mw_placer outside;
    outside = (mw_placer){.bounds = {-INFINITY, -INFINITY, INFINITY, INFINITY}};
    for (size_t k = 0; k < d->picture->n_energy; k++) {
        double x[2], y[2];
        if (!energy_line(d, d->picture->energy_J_per_mm3[k], x, y))
            continue;
        char text[48];
        (void)snprintf(text, sizeof text, "%.4g J/mm\xc2\xb3", d->picture->energy_J_per_mm3[k]);
        mw_text_style style = {.size = MW_SIZE_TEXT, .colour = mw_energy_ink};
        const double w = mw_text_width(text, false) * style.size, h = style.size;
        const bool right = x[1] > d->frame->x1 - 0.5;
        style.anchor = right ? 0 : 0.5;
        const double tx = right ? x[1] + 10 : x[1], ty = right ? y[1] : y[1] + 0.85 * h;
        const mw_box box = {tx - style.anchor * w - 6, ty - 0.55 * h, tx + (1 - style.anchor) * w + 6, ty + 0.55 * h};
        if (!mw_placer_free(&outside, box))
            continue;
        mw_placer_add_box(&outside, box);
        mw_canvas_text(d->c, tx, ty, &style, text);
    }
}

/* ---- labels inside --------------------------------------------------------------------------------------------- */

static void boxed_text(panel_drawing *d, double x, double y, const mw_text_style *style, const char *text, double w, double h)
{
    const mw_box box = {x - 0.5 * w, y - 0.5 * h, x + 0.5 * w, y + 0.5 * h};
    mw_canvas_box(d->c, box.x0, box.y0, box.x1, box.y1, fill_at(d->scene, x, y));
    mw_canvas_text(d->c, x, y, style, text);
    mw_placer_add_box(&d->placer, box);
}

static void name_region(panel_drawing *d, int r)
{
    const mw_region_style *s = &mw_region_styles[r];
    const mw_outline *cover = r == MW_REGION_NO_TRACK ? NULL : &d->scene->region[MW_REGION_NO_TRACK];
    if (d->scene->region[r].n_ring == 0)
        return;
    for (int pass = 0; pass < 8; pass++) { /* clear of energy lines if possible; lying before standing; large before small */
        const bool clear = pass < 4, upward = pass / 2 % 2 == 1;
        const double size = pass % 2 == 0 ? MW_SIZE_HEAD : MW_SIZE_MARK, w = mw_text_width(s->name, true) * size + 14,
                     h = 1.35 * size;
        double x, y;
        const double room =
            mw_placer_pole(&d->placer, &d->scene->region[r], cover, upward ? h : w, upward ? w : h, clear, &x, &y);
        if (room < 1.08)
            continue;
        const mw_text_style style = {.size = size, .anchor = 0.5, .bold = true, .upward = upward, .colour = s->text};
        boxed_text(d, x, y, &style, s->name, upward ? h : w, upward ? w : h);
        return;
    }
}

typedef struct line_label {
    const char *text;
    mw_colour colour;
    double aside; /* gap between line and text; negative: the text interrupts the line */
    double best, x, y;
    double w, h;
} line_label;

/* Looks along a run for the roomiest place of its label, in the middle third first. */
static void seek_label(panel_drawing *d, size_t n, const double x[], const double y[], const void *how)
{
    const void *const *slot = how;
    line_label *l;
    memcpy(&l, slot, sizeof l);
    double total = 0, before = 0, next = 12;
    for (size_t i = 0; i + 1 < n; i++)
        total += hypot(x[i + 1] - x[i], y[i + 1] - y[i]);
    for (size_t i = 0; i + 1 < n; i++) {
        const double dx = x[i + 1] - x[i], dy = y[i + 1] - y[i], length = hypot(dx, dy);
        for (; next < before + length; next += 12) {
            const double t = (next - before) / length, ux = dx / length, uy = dy / length;
            const double gap = l->aside < 0 ? 0 : 0.5 * (fabs(uy) * l->w + fabs(ux) * l->h) + l->aside;
            const double px = x[i] + t * dx - uy * gap, py = y[i] + t * dy + ux * gap;
            if (mw_outline_inside(&d->scene->region[MW_REGION_NO_TRACK], x[i] + t * dx, y[i] + t * dy))
                continue;
            double room = mw_placer_clearance(&d->placer, px, py, 0.5 * l->w, 0.5 * l->h, true);
            if (room < 1)
                continue;
            room = fmin(room, 2) - 0.5 * fabs(next / total - 0.5); /* enough is enough; then nearer to the middle */
            if (room > l->best) {
                l->best = room;
                l->x = px;
                l->y = py;
            }
        }
        before += length;
    }
}

static void label_line(panel_drawing *d, const mw_outline *o, const char *text, mw_colour colour, double aside)
{
    line_label l = {.text = text,
                    .colour = colour,
                    .aside = aside,
                    .w = mw_text_width(text, false) * MW_SIZE_TEXT + 8,
                    .h = 1.15 * MW_SIZE_TEXT};
    line_label *to = &l;
    each_run(d, o, seek_label, &to);
    if (!(l.best > 0))
        return;
    const mw_text_style style = {.size = MW_SIZE_TEXT, .anchor = 0.5, .colour = colour};
    boxed_text(d, l.x, l.y, &style, text, l.w, l.h);
}

static bool in_frame(const mw_map_frame *f, double x, double y)
{
    return x >= f->x0 - 1e-6 && x <= f->x1 + 1e-6 && y >= f->y0 - 1e-6 && y <= f->y1 + 1e-6;
}

static void mark_at(const panel_drawing *d, size_t k, double *x, double *y)
{
    *x = mw_frame_x(d->frame, d->picture->marks[k].power_W);
    *y = mw_frame_y(d->frame, d->picture->marks[k].speed_mm_per_s);
}

/* On this panel, and inside its axes. */
static bool mark_shows(const panel_drawing *d, size_t k)
{
    const int panel = d->picture->marks[k].panel;
    double x, y;
    mark_at(d, k, &x, &y);
    return (panel < 0 || panel == d->panel - d->picture->panels) && in_frame(d->frame, x, y);
}

static void label_mark(panel_drawing *d, size_t k)
{
    static const double side_x[] = {1, -1, 1, 1, -1, -1, 0, 0}, side_y[] = {0, 0, 1, -1, 1, -1, 1, -1};
    const mw_map_mark *m = &d->picture->marks[k];
    char number[24];
    (void)snprintf(number, sizeof number, "%zu", k + 1);
    const char *text = m->label != NULL && m->label[0] != '\0' ? m->label : number;
    const double w = mw_text_width(text, true) * MW_SIZE_MARK + 14, h = 1.3 * MW_SIZE_MARK;
    double x, y, best = 0, tx = 0, ty = 0;
    mark_at(d, k, &x, &y);
    for (int s = 0; s < 8; s++) {
        const double cx = x + side_x[s] * (0.5 * w + 14), cy = y + side_y[s] * (0.5 * h + (side_x[s] == 0 ? 14 : 6));
        const mw_box box = {cx - 0.5 * w, cy - 0.5 * h, cx + 0.5 * w, cy + 0.5 * h};
        if (!mw_placer_free(&d->placer, box))
            continue;
        const double room = 0.01 + fmin(1, mw_placer_clearance(&d->placer, cx, cy, 0.5 * w, 0.5 * h, true)) - 0.02 * s;
        if (room > best) {
            best = room;
            tx = cx;
            ty = cy;
        }
    }
    if (!(best > 0)) { /* crowded: a label over something else is better than a point without a name */
        tx = x + (x + w + 20 < d->frame->x1 ? 1 : -1) * (0.5 * w + 14);
        ty = y;
    }
    const mw_box box = {tx - 0.5 * w, ty - 0.5 * h, tx + 0.5 * w, ty + 0.5 * h};
    mw_canvas_box(d->c, box.x0, box.y0, box.x1, box.y1, mw_paper);
    mw_canvas_frame(d->c, box.x0, box.y0, box.x1, box.y1, 1.4, mw_soft_ink);
    mw_canvas_text(d->c, tx, ty, &(mw_text_style){.size = MW_SIZE_MARK, .anchor = 0.5, .bold = true, .colour = mw_ink}, text);
    mw_placer_add_box(&d->placer, box);
}

static void draw_marks(panel_drawing *d)
{
    double x, y;
    for (size_t k = 0; k < d->picture->n_mark; k++) {
        if (!mark_shows(d, k))
            continue;
        mark_at(d, k, &x, &y);
        mw_draw_mark(d->c, x, y);
        mw_placer_add_box(&d->placer, (mw_box){x - 12, y - 12, x + 12, y + 12});
    }
    for (size_t k = 0; k < d->picture->n_mark; k++)
        if (mark_shows(d, k))
            label_mark(d, k);
}

/* ---- the panel ------------------------------------------------------------------------------------------------- */

static void draw_regions(panel_drawing *d)
{
    const mw_outline *o = d->scene->region;
    const mw_map_frame *f = d->frame;
    const mw_outline *const outline[] = {&o[MW_REGION_NOMINAL], &o[MW_REGION_LOF], &o[MW_REGION_KEYHOLE]};
    const mw_region_style *const style[] = {&mw_region_styles[MW_REGION_NOMINAL], &mw_region_styles[MW_REGION_LOF],
                                            &mw_region_styles[MW_REGION_KEYHOLE]};
    mw_draw_regions(d->c, 3, outline, style, f->x0, f->y0);
    each_run(d, &o[MW_REGION_KEYHOLE], draw_thin, &mw_ink);
    each_run(d, &o[MW_REGION_LOF], draw_thin, &mw_ink);
    mw_draw_nominal_outline(d->c, &o[MW_REGION_NOMINAL]);
}

static void draw_contours(panel_drawing *d)
{
    for (size_t i = 0; i < d->scene->n_line; i++)
        each_run(d, &d->scene->line[i].line, draw_contour_run, &mw_contour_styles[d->scene->line[i].set % MW_CONTOUR_STYLES]);
}

static void label_contours(panel_drawing *d)
{
    for (size_t i = 0; i < d->scene->n_line; i++) {
        char text[32];
        (void)snprintf(text, sizeof text, "%.6g", d->scene->line[i].level);
        label_line(d, &d->scene->line[i].line, text, mw_contour_styles[d->scene->line[i].set % MW_CONTOUR_STYLES].colour, -1);
    }
}

void mw_draw_panel(const mw_canvas *c, const mw_map_picture *picture, size_t index, const mw_map_scene *scene,
                   const mw_map_frame *frame)
{
    static panel_drawing d; /* too large for some stacks */
    d = (panel_drawing){.c = c, .picture = picture, .panel = &picture->panels[index], .scene = scene, .frame = frame};
    d.placer.bounds = (mw_box){frame->x0 + 4, frame->y0 + 4, frame->x1 - 4, frame->y1 - 4};
    for (int r = 0; r < MW_REGION_COUNT; r++)
        d.placer.outline[d.placer.n_outline++] = &scene->region[r];
    d.placer.outline[d.placer.n_outline++] = &scene->balling;
    draw_regions(&d);
    draw_contours(&d);
    draw_energy_lines(&d);
    each_run(&d, &scene->balling, draw_limit_run, NULL);
    /* Without a track there is nothing else to say. */
    const mw_outline *const no_track = &scene->region[MW_REGION_NO_TRACK];
    const mw_region_style *const no_track_style = &mw_region_styles[MW_REGION_NO_TRACK];
    mw_draw_regions(c, 1, &no_track, &no_track_style, frame->x0, frame->y0);
    each_run(&d, no_track, draw_thin, &mw_ink);
    draw_crossings(&d);
    mw_canvas_frame(c, frame->x0, frame->y0, frame->x1, frame->y1, 2.2, mw_ink);
    draw_marks(&d);
    for (int r = 0; r < MW_REGION_COUNT; r++)
        name_region(&d, r);
    label_line(&d, &scene->balling, "balling", mw_balling_ink, 14);
    label_contours(&d);
    label_energy_lines(&d);
}
