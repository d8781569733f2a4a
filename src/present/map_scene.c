/* SPDX-License-Identifier: GPL-3.0-or-later
 * From the fields of a panel to the outlines of its regions. */
#include "present/map_scene.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Large enough for "everywhere trouble", small enough that four of them can be added. */
static const double huge = 1e300;
/* A zero belongs to the side that the definition of the regions gives it to. */
static const double hair = 1e-300;

static double clean(double value, double zero_becomes)
{
    return isnan(value) ? value : value > huge ? huge : value < -huge ? -huge : value == 0 ? zero_becomes : value;
}

/* Mean of the finite values among the eight neighbours. */
static double neighbours(const double *field, size_t nx, size_t ny, size_t i, size_t j)
{
    double sum = 0;
    int n = 0;
    for (size_t b = j > 0 ? j - 1 : 0; b <= j + 1 && b < ny; b++)
        for (size_t a = i > 0 ? i - 1 : 0; a <= i + 1 && a < nx; a++)
            if (isfinite(field[b * nx + a])) {
                sum += field[b * nx + a];
                n++;
            }
    return n > 0 ? sum / n : NAN;
}

/* Where there is no track the indices may be undefined. They are carried on by one node, so that the neighbouring
 * region reaches under the no-track region and its edge shows no steps. */
static double value_at(const mw_map_panel *p, const double *field, double absent, size_t nx, size_t ny, size_t i, size_t j)
{
    if (field == NULL)
        return absent;
    const size_t at = j * nx + i;
    double v = field[at];
    if (isnan(v) && p->melt != NULL && p->melt[at] < 0)
        v = neighbours(field, nx, ny, i, j);
    return clean(v, -hair);
}

mw_status mw_map_fields_make(const mw_map_panel *panel, size_t nx, size_t ny, mw_map_fields *out, mw_error *err)
{
    const size_t n = nx * ny;
    memset(out, 0, sizeof *out);
    out->block = malloc(8 * n * sizeof *out->block);
    if (out->block == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory for a map of %zu points", n);
    double **const part[8] = {&out->lof,       &out->over,       &out->lof_first, &out->over_first,
                              &out->minus_lof, &out->minus_over, &out->melt,      &out->minus_melt};
    for (size_t k = 0; k < 8; k++)
        *part[k] = out->block + k * n;
    for (size_t j = 0; j < ny; j++)
        for (size_t i = 0; i < nx; i++) {
            const size_t at = j * nx + i;
            const double lof = value_at(panel, panel->lof, -1, nx, ny, i, j);
            const double over = value_at(panel, panel->over, -1, nx, ny, i, j);
            out->lof[at] = lof;
            out->over[at] = over;
            out->lof_first[at] = clean(lof - over, hair);
            out->over_first[at] = -out->lof_first[at];
            out->minus_lof[at] = -lof;
            out->minus_over[at] = -over;
            out->melt[at] = panel->melt == NULL ? 1 : clean(panel->melt[at], hair);
            out->minus_melt[at] = -out->melt[at];
        }
    return MW_OK;
}

void mw_map_fields_free(mw_map_fields *fields)
{
    free(fields->block);
    memset(fields, 0, sizeof *fields);
}

static mw_status trace(const mw_outline_grid *g, size_t n, const double *a, const double *b, mw_outline *out, mw_error *err)
{
    const double *const field[] = {a, b};
    const mw_status status = mw_outline_trace(g, n, field, out, err);
    if (status == MW_OK) /* 0.02 % of the axis cannot be seen and takes most points away */
        mw_outline_simplify(out, 2e-4 * (g->x[g->nx - 1] - g->x[0]), 2e-4 * (g->y[g->ny - 1] - g->y[0]));
    return status;
}

size_t mw_round_levels(double low, double high, double wanted, size_t room, double level[])
{
    if (!(high > low) || !isfinite(high - low))
        return 0;
    const double raw = (high - low) / wanted, ten = pow(10, floor(log10(raw))), lead = raw / ten;
    const double step = ten * (lead <= 1.0001 ? 1 : lead <= 2.0001 ? 2 : lead <= 5.0001 ? 5 : 10);
    size_t n = 0;
    for (double k = ceil(low / step - 1e-9); k * step <= high + 1e-9 * step && n < room; k++)
        level[n++] = k * step;
    return n;
}

enum { MOST_LEVELS = 64 };

static size_t one_two_five(double low, double high, double level[MOST_LEVELS])
{
    static const double lead[] = {1, 2, 5};
    size_t n = 0;
    for (double decade = floor(log10(low)); decade <= log10(high); decade++)
        for (int k = 0; k < 3; k++) {
            const double l = lead[k] * pow(10, decade);
            if (l > low && l < high && n < MOST_LEVELS)
                level[n++] = l;
        }
    return n;
}

static size_t levels_of(const mw_map_contours *c, size_t n, double level[MOST_LEVELS])
{
    if (c->n_level > 0) {
        const size_t m = c->n_level < MOST_LEVELS ? c->n_level : MOST_LEVELS;
        memcpy(level, c->levels, m * sizeof *level);
        return m;
    }
    double low = INFINITY, high = -INFINITY;
    for (size_t i = 0; i < n; i++)
        if (isfinite(c->field[i])) {
            low = fmin(low, c->field[i]);
            high = fmax(high, c->field[i]);
        }
    /* Over a wide range even steps would crowd one corner of the map; 1, 2, 5, 10 ... do not. */
    return low > 0 && high > 8 * low ? one_two_five(low, high, level) : mw_round_levels(low, high, 6, MOST_LEVELS, level);
}

static mw_status add_contours(const mw_map_panel *p, size_t set, const mw_outline_grid *g, double *work, mw_map_scene *out,
                              mw_error *err)
{
    const size_t n = g->nx * g->ny;
    double level[MOST_LEVELS];
    const size_t m = levels_of(&p->contours[set], n, level);
    struct mw_map_level *larger = realloc(out->line, (out->n_line + m + 1) * sizeof *larger);
    if (larger == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory for contours");
    out->line = larger;
    for (size_t k = 0; k < m; k++) {
        for (size_t i = 0; i < n; i++)
            work[i] = clean(p->contours[set].field[i] - level[k], hair);
        struct mw_map_level *l = &out->line[out->n_line];
        *l = (struct mw_map_level){.set = set, .level = level[k]};
        const mw_status status = trace(g, 1, work, NULL, &l->line, err);
        if (status != MW_OK)
            return status;
        out->n_line++;
    }
    return MW_OK;
}

mw_status mw_map_scene_make(const mw_map_panel *panel, const mw_outline_grid *grid, mw_map_scene *out, mw_error *err)
{
    memset(out, 0, sizeof *out);
    mw_map_fields f;
    mw_status status = mw_map_fields_make(panel, grid->nx, grid->ny, &f, err);
    if (status == MW_OK)
        status = trace(grid, 2, f.minus_lof, f.minus_over, &out->region[MW_REGION_NOMINAL], err);
    if (status == MW_OK)
        status = trace(grid, 2, f.lof, f.lof_first, &out->region[MW_REGION_LOF], err);
    if (status == MW_OK)
        status = trace(grid, 2, f.over, f.over_first, &out->region[MW_REGION_KEYHOLE], err);
    if (status == MW_OK && panel->melt != NULL)
        status = trace(grid, 1, f.minus_melt, NULL, &out->region[MW_REGION_NO_TRACK], err);
    if (status == MW_OK && panel->balling != NULL) {
        for (size_t i = 0; i < grid->nx * grid->ny; i++)
            f.lof[i] = clean(panel->balling[i], -hair);
        status = trace(grid, 1, f.lof, NULL, &out->balling, err);
    }
    for (size_t s = 0; s < panel->n_contour && status == MW_OK; s++)
        status = add_contours(panel, s, grid, f.lof, out, err);
    mw_map_fields_free(&f);
    if (status != MW_OK)
        mw_map_scene_free(out);
    return status;
}

void mw_map_scene_free(mw_map_scene *scene)
{
    for (int r = 0; r < MW_REGION_COUNT; r++)
        mw_outline_free(&scene->region[r]);
    mw_outline_free(&scene->balling);
    for (size_t i = 0; i < scene->n_line; i++)
        mw_outline_free(&scene->line[i].line);
    free(scene->line);
    memset(scene, 0, sizeof *scene);
}

double mw_frame_x(const mw_map_frame *f, double power_W)
{
    return f->x0 + (power_W - f->p0) / (f->p1 - f->p0) * (f->x1 - f->x0);
}

double mw_frame_y(const mw_map_frame *f, double speed_mm_per_s)
{
    return f->y0 + (speed_mm_per_s - f->v0) / (f->v1 - f->v0) * (f->y1 - f->y0);
}

static void place(mw_outline *o, const mw_map_frame *f)
{
    for (size_t i = 0; i < o->n_point; i++) {
        o->x[i] = mw_frame_x(f, o->x[i]);
        o->y[i] = mw_frame_y(f, o->y[i]);
    }
}

void mw_map_scene_place(mw_map_scene *scene, const mw_map_frame *frame)
{
    for (int r = 0; r < MW_REGION_COUNT; r++)
        place(&scene->region[r], frame);
    place(&scene->balling, frame);
    for (size_t i = 0; i < scene->n_line; i++)
        place(&scene->line[i].line, frame);
}
