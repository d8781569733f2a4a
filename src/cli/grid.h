/* SPDX-License-Identifier: GPL-3.0-or-later
 * Power, speed, hatch and layer as axes, for sweep and map. */
#ifndef MELTWRIGHT_CLI_GRID_H
#define MELTWRIGHT_CLI_GRID_H

#include "cli/common.h"

typedef struct grid_axes {
    double *power, *speed, *hatch, *layer; /* owned */
    mw_grid grid;                          /* points at them */
} grid_axes;

mw_status read_grid(const arguments *args, grid_axes *axes, mw_error *err);
void free_grid(grid_axes *axes);

/* The survey of a grid: sweep --samples N --seed S. */
mw_status write_survey(const arguments *args, const mw_plan *plan, const mw_grid *grid, int threads, output_format format, const shard *part, mw_error *err);

#endif
