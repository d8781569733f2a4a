/* SPDX-License-Identifier: GPL-3.0-or-later
 * The process map as a file: checks, scenes, page. */
#include "meltwright/mapplot.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "present/map_canvas.h"
#include "present/map_layout.h"
#include "present/map_panel.h"
#include "present/map_scene.h"
#include "present/picture.h"

enum { MOST_POINTS = 1 << 22 };

/* ---- checks ---------------------------------------------------------------------------------------------------- */

static mw_status check_axis(const char *name, size_t n, const double v[], mw_error *err)
{
    if (n < 2 || v == NULL)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "a map needs at least two values of %s", name);
    for (size_t i = 0; i < n; i++)
        if (!isfinite(v[i]) || (i > 0 && !(v[i] > v[i - 1])))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "value %zu of %s on a map does not rise: %g", i + 1, name, v[i]);
    return MW_OK;
}

static mw_status check_panel(const mw_map_panel *p, mw_error *err)
{
    if (p->lof == NULL)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "a map panel has no lack-of-fusion field");
    for (size_t s = 0; s < p->n_contour; s++)
        if (p->contours[s].field == NULL || (p->contours[s].n_level > 0 && p->contours[s].levels == NULL))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "contour set %zu of a map panel has no field or levels", s + 1);
    return MW_OK;
}

static mw_status check_picture(const mw_map_picture *p, mw_error *err)
{
    mw_status status = check_axis("laser power", p->n_power, p->power_W, err);
    if (status == MW_OK)
        status = check_axis("scan speed", p->n_speed, p->speed_mm_per_s, err);
    if (status != MW_OK)
        return status;
    if (p->n_panel < 1 || p->panels == NULL)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "a map needs at least one panel");
    if (p->n_panel > MW_MAP_MOST_PANELS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%zu panels are more than the %d a map can hold", p->n_panel,
                       MW_MAP_MOST_PANELS);
    if (p->n_power > MOST_POINTS / p->n_speed)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%zu x %zu points are more than the %d a map can hold", p->n_power, p->n_speed,
                       MOST_POINTS);
    for (size_t k = 0; k < p->n_panel && status == MW_OK; k++)
        status = check_panel(&p->panels[k], err);
    return status;
}

/* ---- drawing --------------------------------------------------------------------------------------------------- */

typedef struct drawing {
    const mw_map_picture *picture;
    mw_map_scene *scene;
    mw_map_page page;
} drawing;

static void draw_all(const mw_canvas *c, void *what)
{
    const drawing *d = what;
    for (size_t k = 0; k < d->picture->n_panel; k++)
        mw_draw_panel(c, d->picture, k, &d->scene[k], &d->page.frame[k]);
    mw_map_page_draw(c, d->picture, &d->page);
}

static mw_status make_scenes(const mw_map_picture *p, mw_map_scene scene[], mw_error *err)
{
    const mw_outline_grid grid = {p->n_power, p->n_speed, p->power_W, p->speed_mm_per_s};
    mw_status status = MW_OK;
    for (size_t k = 0; k < p->n_panel && status == MW_OK; k++)
        status = mw_map_scene_make(&p->panels[k], &grid, &scene[k], err);
    return status;
}

mw_status mw_map_draw(const mw_map_picture *picture, const char *path, bool overwrite, mw_error *err)
{
    mw_status status = mw_picture_allowed(path, overwrite, err);
    if (status == MW_OK)
        status = check_picture(picture, err);
    if (status != MW_OK)
        return status;
    drawing *d = calloc(1, sizeof *d);
    mw_map_scene *scene = calloc(picture->n_panel, sizeof *scene);
    if (d == NULL || scene == NULL) {
        status = mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory for a picture");
        goto done;
    }
    status = make_scenes(picture, scene, err);
    if (status != MW_OK)
        goto done;
    d->picture = picture;
    d->scene = scene;
    mw_map_page_make(picture, scene, &d->page);
    for (size_t k = 0; k < picture->n_panel; k++)
        mw_map_scene_place(&scene[k], &d->page.frame[k]);
    status = mw_picture_write(path, overwrite, d->page.width, d->page.height, draw_all, d, err);
done:
    for (size_t k = 0; scene != NULL && k < picture->n_panel; k++)
        mw_map_scene_free(&scene[k]);
    free(scene);
    free(d);
    return status;
}

/* ---- shares ---------------------------------------------------------------------------------------------------- */

mw_status mw_map_shares(const mw_map_panel *panel, size_t n_power, const double power_W[], size_t n_speed,
                        const double speed_mm_per_s[], mw_map_share *share, mw_error *err)
{
    memset(share, 0, sizeof *share);
    const mw_map_picture p = {.n_power = n_power,
                              .power_W = power_W,
                              .n_speed = n_speed,
                              .speed_mm_per_s = speed_mm_per_s,
                              .n_panel = 1,
                              .panels = panel};
    mw_map_fields f;
    mw_status status = check_picture(&p, err);
    if (status == MW_OK)
        status = mw_map_fields_make(panel, n_power, n_speed, &f, err);
    if (status != MW_OK)
        return status;
    const mw_outline_grid grid = {n_power, n_speed, power_W, speed_mm_per_s};
    const double all = (power_W[n_power - 1] - power_W[0]) * (speed_mm_per_s[n_speed - 1] - speed_mm_per_s[0]);
    share->nominal = mw_outline_overlap(&grid, 3, (const double *const[]){f.minus_lof, f.minus_over, f.melt}) / all;
    share->lack_of_fusion = mw_outline_overlap(&grid, 3, (const double *const[]){f.lof, f.lof_first, f.melt}) / all;
    share->keyhole = mw_outline_overlap(&grid, 3, (const double *const[]){f.over, f.over_first, f.melt}) / all;
    share->no_track = mw_outline_overlap(&grid, 1, (const double *const[]){f.minus_melt}) / all;
    mw_map_fields_free(&f);
    return MW_OK;
}
