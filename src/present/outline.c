/* SPDX-License-Identifier: GPL-3.0-or-later
 * Tracing of closed outlines on a grid of triangles.
 *
 * Inside a triangle each field is linear, so the region is the triangle cut by one half plane for each field. Whether
 * and where an edge of a triangle is cut depends on the two values at its ends alone and is always computed from the
 * end with the lower number, so the two triangles at an edge agree to the last bit. Points are identified by what they
 * lie on (a node, a cut of an edge, the inside of a triangle) and never by comparing coordinates. */
#include "present/outline.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

enum { NO_FIELD = -1, TRIANGLES_IN_A_CELL = 4 };

static const size_t NONE = SIZE_MAX;

typedef struct segment {
    size_t from, to; /* names of the end points */
    size_t sibling;  /* next segment with the same start */
    double x, y;     /* of the start */
    bool rim, used;
} segment;

typedef struct tracer {
    const mw_outline_grid *grid;
    size_t n_field;
    const double *const *field;
    size_t cells, corners, nodes, edges;
    size_t n, room;
    segment *segments;
    bool out_of_memory;
} tracer;

typedef struct node {
    size_t name;
    double x, y;
    double f[MW_OUTLINE_MOST_FIELDS];
} node;

/* The part of a triangle's edge that is in the region, in the direction of travel. */
typedef struct stretch {
    bool some;
    size_t name[2];
    double x[2], y[2];
    int cut_by[2]; /* field whose zero ends the stretch here, or NO_FIELD at a node */
} stretch;

static bool valid(const tracer *t, size_t i, size_t j)
{
    for (size_t k = 0; k < t->n_field; k++)
        if (!isfinite(t->field[k][j * t->grid->nx + i]))
            return false;
    return true;
}

static node corner(const tracer *t, size_t i, size_t j)
{
    node p = {.name = j * t->grid->nx + i, .x = t->grid->x[i], .y = t->grid->y[j]};
    for (size_t k = 0; k < t->n_field; k++)
        p.f[k] = t->field[k][p.name];
    return p;
}

static void put(tracer *t, size_t from, size_t to, double x, double y, bool rim)
{
    if (t->n == t->room) {
        const size_t room = t->room == 0 ? 1024 : t->room * 2;
        segment *larger = realloc(t->segments, room * sizeof *larger);
        if (larger == NULL) {
            t->out_of_memory = true;
            return;
        }
        t->segments = larger;
        t->room = room;
    }
    t->segments[t->n++] = (segment){.from = from, .to = to, .sibling = NONE, .x = x, .y = y, .rim = rim, .used = false};
}

static stretch cut_edge(const tracer *t, const node *u, const node *v, size_t edge)
{
    const bool forward = u->name < v->name;
    const node *a = forward ? u : v, *b = forward ? v : u;
    double low = 0, high = 1;
    int low_by = NO_FIELD, high_by = NO_FIELD;
    stretch s = {.some = false};
    for (size_t k = 0; k < t->n_field; k++) {
        const bool a_in = a->f[k] > 0, b_in = b->f[k] > 0;
        if (!a_in && !b_in)
            return s;
        const double at = a->f[k] / (a->f[k] - b->f[k]);
        if (!a_in && (low_by == NO_FIELD || at > low)) {
            low = at;
            low_by = (int)k;
        }
        if (!b_in && (high_by == NO_FIELD || at < high)) {
            high = at;
            high_by = (int)k;
        }
    }
    if (low_by != NO_FIELD && high_by != NO_FIELD && !(low < high))
        return s;
    s.some = true;
    const size_t from = forward ? 0 : 1, to = 1 - from;
    s.name[from] = low_by == NO_FIELD ? a->name : t->nodes + 2 * edge;
    s.name[to] = high_by == NO_FIELD ? b->name : t->nodes + 2 * edge + 1;
    s.cut_by[from] = low_by;
    s.cut_by[to] = high_by;
    s.x[from] = low_by == NO_FIELD ? a->x : a->x + low * (b->x - a->x);
    s.y[from] = low_by == NO_FIELD ? a->y : a->y + low * (b->y - a->y);
    s.x[to] = high_by == NO_FIELD ? b->x : a->x + high * (b->x - a->x);
    s.y[to] = high_by == NO_FIELD ? b->y : a->y + high * (b->y - a->y);
    return s;
}

/* Where fields k and m are both zero in the triangle: barycentric weights are the cross product of the two rows. */
static bool meeting_point(const node corner_of[3], int k, int m, double *x, double *y)
{
    double w[3], sum = 0;
    for (int i = 0; i < 3; i++) {
        const node *p = &corner_of[(i + 1) % 3], *q = &corner_of[(i + 2) % 3];
        w[i] = p->f[k] * q->f[m] - q->f[k] * p->f[m];
        sum += w[i];
    }
    *x = *y = 0;
    for (int i = 0; i < 3; i++) {
        w[i] /= sum;
        if (!(w[i] >= 0))
            return false;
        *x += w[i] * corner_of[i].x;
        *y += w[i] * corner_of[i].y;
    }
    return true;
}

static void add_triangle(tracer *t, const node p[3], const size_t edge[3], const bool rim[3], size_t triangle)
{
    stretch s[3];
    for (int e = 0; e < 3; e++)
        s[e] = cut_edge(t, &p[e], &p[(e + 1) % 3], edge[e]);
    for (int e = 0; e < 3; e++) {
        if (!s[e].some)
            continue;
        if (rim[e])
            put(t, s[e].name[0], s[e].name[1], s[e].x[0], s[e].y[0], true);
        int next = (e + 1) % 3;
        while (!s[next].some)
            next = (next + 1) % 3;
        if (s[e].name[1] == s[next].name[0])
            continue;
        const int k = s[e].cut_by[1], m = s[next].cut_by[0];
        double x, y;
        if (k != m && k != NO_FIELD && m != NO_FIELD && meeting_point(p, k, m, &x, &y)) {
            const size_t inside = t->nodes + 2 * t->edges + triangle;
            put(t, s[e].name[1], inside, s[e].x[1], s[e].y[1], false);
            put(t, inside, s[next].name[0], x, y, false);
        } else {
            put(t, s[e].name[1], s[next].name[0], s[e].x[1], s[e].y[1], false);
        }
    }
}

/* Corner q (0 to 3, counter-clockwise from lower left) of cell (i, j). */
static void corner_at(size_t i, size_t j, int q, size_t *ci, size_t *cj)
{
    *ci = i + (q == 1 || q == 2);
    *cj = j + (q == 2 || q == 3);
}

static int missing_corners(const tracer *t, size_t i, size_t j, int *which)
{
    int n = 0;
    for (int q = 0; q < 4; q++) {
        size_t ci, cj;
        corner_at(i, j, q, &ci, &cj);
        if (!valid(t, ci, cj)) {
            n++;
            *which = q;
        }
    }
    return n;
}

/* Side q of a cell runs from corner q to corner q + 1. Is there a triangle on the other side of it? */
static bool side_is_rim(const tracer *t, size_t i, size_t j, int q)
{
    if ((q == 0 && j == 0) || (q == 3 && i == 0) || (q == 1 && i + 2 == t->grid->nx) || (q == 2 && j + 2 == t->grid->ny))
        return true;
    const size_t ni = q == 1 ? i + 1 : q == 3 ? i - 1 : i;
    const size_t nj = q == 2 ? j + 1 : q == 0 ? j - 1 : j;
    int which;
    return missing_corners(t, ni, nj, &which) > 1; /* the two corners of the side itself are known to be there */
}

static size_t side_edge(const tracer *t, size_t i, size_t j, int q)
{
    const size_t nx = t->grid->nx, ny = t->grid->ny, level = (nx - 1) * ny;
    switch (q) {
    case 0:
        return j * (nx - 1) + i;
    case 2:
        return (j + 1) * (nx - 1) + i;
    case 1:
        return level + j * nx + i + 1;
    default:
        return level + j * nx + i;
    }
}

static void add_cell(tracer *t, size_t i, size_t j)
{
    const size_t nx = t->grid->nx, ny = t->grid->ny, cell = j * (nx - 1) + i;
    const size_t spokes = (nx - 1) * ny + nx * (ny - 1) + 5 * cell;
    int gone = 0;
    const int missing = missing_corners(t, i, j, &gone);
    if (missing > 1)
        return;
    node c[4];
    for (int q = 0; q < 4; q++) {
        size_t ci, cj;
        corner_at(i, j, q, &ci, &cj);
        c[q] = corner(t, ci, cj);
    }
    if (missing == 1) { /* the half of the cell away from the blank corner */
        const int a = (gone + 1) % 4, b = (gone + 2) % 4, d = (gone + 3) % 4;
        const node p[3] = {c[a], c[b], c[d]};
        const size_t edge[3] = {side_edge(t, i, j, a), side_edge(t, i, j, b), spokes + 4};
        const bool rim[3] = {side_is_rim(t, i, j, a), side_is_rim(t, i, j, b), true};
        add_triangle(t, p, edge, rim, TRIANGLES_IN_A_CELL * cell);
        return;
    }
    node centre = {.name = t->corners + cell, .x = 0.5 * (c[0].x + c[1].x), .y = 0.5 * (c[0].y + c[3].y)};
    for (size_t k = 0; k < t->n_field; k++)
        centre.f[k] = 0.25 * (c[0].f[k] + c[1].f[k] + c[2].f[k] + c[3].f[k]);
    for (int q = 0; q < 4; q++) {
        const int r = (q + 1) % 4;
        const node p[3] = {c[q], c[r], centre};
        const size_t edge[3] = {side_edge(t, i, j, q), spokes + (size_t)r, spokes + (size_t)q};
        const bool rim[3] = {side_is_rim(t, i, j, q), false, false};
        add_triangle(t, p, edge, rim, TRIANGLES_IN_A_CELL * cell + (size_t)q);
    }
}

/* Follows the segments from point to point. Every point has as many segments leaving as arriving, so each walk closes. */
static void chain(tracer *t, size_t head[], mw_outline *out)
{
    for (size_t s = t->n; s-- > 0;) {
        t->segments[s].sibling = head[t->segments[s].from];
        head[t->segments[s].from] = s;
    }
    out->n_ring = out->n_point = 0;
    for (size_t first = 0; first < t->n; first++) {
        if (t->segments[first].used)
            continue;
        const size_t begin = out->n_point;
        for (size_t s = first; s != NONE;) {
            segment *g = &t->segments[s];
            g->used = true;
            out->x[out->n_point] = g->x;
            out->y[out->n_point] = g->y;
            out->rim[out->n_point++] = g->rim;
            size_t next = g->to == t->segments[first].from ? NONE : head[g->to];
            while (next != NONE && t->segments[next].used)
                next = t->segments[next].sibling;
            s = next;
        }
        if (out->n_point - begin < 3)
            out->n_point = begin;
        else
            out->start[++out->n_ring] = out->n_point;
    }
}

static bool rising(size_t n, const double v[])
{
    for (size_t i = 0; i < n; i++)
        if (!isfinite(v[i]) || (i > 0 && !(v[i] > v[i - 1])))
            return false;
    return n >= 2;
}

mw_status mw_outline_trace(const mw_outline_grid *grid, size_t n_field, const double *const field[], mw_outline *out,
                           mw_error *err)
{
    memset(out, 0, sizeof *out);
    if (n_field < 1 || n_field > 2 || !rising(grid->nx, grid->x) || !rising(grid->ny, grid->y))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "an outline needs one or two fields on two rising axes");
    const size_t nx = grid->nx, ny = grid->ny;
    tracer t = {.grid = grid, .n_field = n_field, .field = field, .cells = (nx - 1) * (ny - 1), .corners = nx * ny};
    t.nodes = t.corners + t.cells;
    t.edges = (nx - 1) * ny + nx * (ny - 1) + 5 * t.cells;
    for (size_t j = 0; j + 1 < ny; j++)
        for (size_t i = 0; i + 1 < nx; i++)
            add_cell(&t, i, j);
    mw_status status = MW_OK;
    const size_t names = t.nodes + 2 * t.edges + TRIANGLES_IN_A_CELL * t.cells;
    size_t *head = malloc(names * sizeof *head);
    out->x = malloc((t.n + 1) * sizeof *out->x);
    out->y = malloc((t.n + 1) * sizeof *out->y);
    out->rim = malloc((t.n + 1) * sizeof *out->rim);
    out->start = calloc(t.n + 1, sizeof *out->start);
    if (t.out_of_memory || head == NULL || out->x == NULL || out->y == NULL || out->rim == NULL || out->start == NULL) {
        mw_outline_free(out);
        status = mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory for an outline");
        goto done;
    }
    for (size_t i = 0; i < names; i++)
        head[i] = NONE;
    chain(&t, head, out);
done:
    free(head);
    free(t.segments);
    return status;
}
