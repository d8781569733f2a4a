/* SPDX-License-Identifier: GPL-3.0-or-later
 * Closed outlines of the region where every one of a few sampled fields is positive. */
#ifndef MELTWRIGHT_PRESENT_OUTLINE_H
#define MELTWRIGHT_PRESENT_OUTLINE_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/status.h"

enum { MW_OUTLINE_MOST_FIELDS = 3 };

/* A rectangular grid, both axes rising; a field value of node (i, j) stands at [j * nx + i]. NaN or infinite: blank. */
typedef struct mw_outline_grid {
    size_t nx, ny;
    const double *x, *y;
} mw_outline_grid;

/* Rings of points; ring r is points start[r] .. start[r + 1] - 1 and closes from its last point to its first.
 * The region lies to the left: outer rings run counter-clockwise, holes clockwise. */
typedef struct mw_outline {
    size_t n_ring, n_point;
    size_t *start; /* n_ring + 1 */
    double *x, *y;
    bool *rim; /* the stretch from this point to the next lies on the edge of the sampled area, not on a zero line */
} mw_outline;

/* Traces the region where fields 0 .. n_field-1 (1 or 2) are all positive. Each cell is cut into four triangles about
 * its centre (whose value is the mean of the corners), and the fields are linear in a triangle; so regions that part
 * the plane by the signs of the same fields meet without gap or overlap. Errors: MW_BAD_VALUE, MW_NO_MEMORY. */
mw_status mw_outline_trace(const mw_outline_grid *grid, size_t n_field, const double *const field[], mw_outline *out,
                           mw_error *err);

/* Area where fields 0 .. n_field-1 (1 to 3) are all positive, on the same triangles. */
double mw_outline_overlap(const mw_outline_grid *grid, size_t n_field, const double *const field[]);

/* Drops points that lie within (tol_x, tol_y) of what is left, in place. */
void mw_outline_simplify(mw_outline *outline, double tol_x, double tol_y);

double mw_outline_area(const mw_outline *outline);
bool mw_outline_inside(const mw_outline *outline, double x, double y);
void mw_outline_free(mw_outline *outline);

#endif
