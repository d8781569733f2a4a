/* SPDX-License-Identifier: GPL-3.0-or-later
 * A panel made ready for drawing: clean fields and the outlines of its regions. */
#ifndef MELTWRIGHT_PRESENT_MAP_SCENE_H
#define MELTWRIGHT_PRESENT_MAP_SCENE_H

#include "meltwright/mapplot.h"
#include "present/outline.h"

typedef enum mw_region { MW_REGION_NOMINAL, MW_REGION_LOF, MW_REGION_KEYHOLE, MW_REGION_NO_TRACK, MW_REGION_COUNT } mw_region;

/* The signed fields that all outlines come from. One block; arrays of nx * ny. */
typedef struct mw_map_fields {
    double *block;
    double *lof, *over, *lof_first, *over_first, *minus_lof, *minus_over, *melt, *minus_melt;
} mw_map_fields;

mw_status mw_map_fields_make(const mw_map_panel *panel, size_t nx, size_t ny, mw_map_fields *out, mw_error *err);
void mw_map_fields_free(mw_map_fields *fields);

/* Outlines in power and speed; mw_map_scene_place moves them to the page. */
typedef struct mw_map_scene {
    mw_outline region[MW_REGION_COUNT];
    mw_outline balling;
    size_t n_line; /* contour levels of all sets */
    struct mw_map_level {
        size_t set;
        double level;
        mw_outline line; /* above the level; only the stretches off the rim count */
    } * line;
} mw_map_scene;

mw_status mw_map_scene_make(const mw_map_panel *panel, const mw_outline_grid *grid, mw_map_scene *out, mw_error *err);
void mw_map_scene_free(mw_map_scene *scene);

typedef struct mw_map_frame {
    double x0, y0, x1, y1; /* on the page */
    double p0, p1, v0, v1; /* axis ends */
} mw_map_frame;

double mw_frame_x(const mw_map_frame *f, double power_W);
double mw_frame_y(const mw_map_frame *f, double speed_mm_per_s);
void mw_map_scene_place(mw_map_scene *scene, const mw_map_frame *frame);

/* Round numbers within [low, high], about `wanted` of them. Returns how many (at most `room`). */
size_t mw_round_levels(double low, double high, double wanted, size_t room, double level[]);

#endif
