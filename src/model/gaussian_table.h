/* SPDX-License-Identifier: GPL-3.0-or-later
 * The Gaussian pool from tables, for sweeps: width, depth and length over the two numbers, made at build time from the exact solver
 * (src/generate) and within 1e-5 of it. A row holds one Peclet number: its series are contracted once and then evaluated for many strengths,
 * with + - * / and square roots alone, so that the result is the same for every width of vector.
 *
 * Coordinates: s = B Imax(P) > 1 melts; z = sqrt(s-1), t = z/(z+2). Stored: W/z, D/z^2, L/z, all in sigma, which are smooth down to the edge of
 * melting. Where two widest places compete (P above about 2.88) the series of W end at the switch curve. */
#ifndef MELTWRIGHT_MODEL_GAUSSIAN_TABLE_H
#define MELTWRIGHT_MODEL_GAUSSIAN_TABLE_H

#include <stdbool.h>
#include <stddef.h>

/* What the tables cover; s up to 3000. Outside the exact solver must be asked. */
#define MW_TABLE_LEAST_PECLET 7e-4
#define MW_TABLE_MOST_PECLET 110.0
#define MW_TABLE_MOST_S 3000.0
#define MW_TABLE_HALF 2.0 /* z at which t is one half */

enum { MW_TABLE_U = 10, MW_TABLE_Y = 8, MW_TABLE_SEGMENTS = 40 }; /* coefficients along u and y; most segments of a row */

typedef enum mw_table_quantity { MW_TABLE_WIDTH, MW_TABLE_DEPTH, MW_TABLE_LENGTH, MW_TABLE_QUANTITIES } mw_table_quantity;

/* One quantity at one Peclet number. Segment i covers edge[i] to edge[i+1] of t. */
typedef struct mw_table_line {
    size_t n;
    double edge[MW_TABLE_SEGMENTS + 1], middle[MW_TABLE_SEGMENTS], scale[MW_TABLE_SEGMENTS];
    double c[MW_TABLE_SEGMENTS][MW_TABLE_U];
} mw_table_line;

/* Contracts a quantity for a Peclet number. False outside the range. Plain data. */
bool mw_table_line_make(mw_table_quantity quantity, double peclet, mw_table_line *line);

/* out[i] in sigma for s[i]; 0 where s <= 1 (no melt), NaN above MW_TABLE_MOST_S. Any order; rising or equal s is fastest. Arrays may not overlap. */
void mw_table_line_eval(const mw_table_line *line, mw_table_quantity quantity, const double *s, size_t n, double *out);

/* Several quantities of the same Peclet number at once: what they share is worked out once. */
void mw_table_lines_eval(const mw_table_line *const line[], const mw_table_quantity quantity[], size_t n_line, const double *s, size_t n, double *const out[]);

/* Largest value of the integral, as mw_gaussian_peak, and the heat of the moving cylinder, as mw_cylinder_heat, to 1e-11 in the range
 * MW_TABLE_LEAST_PECLET/10 to MW_TABLE_MOST_PECLET*2; NaN outside. */
double mw_table_peak(double peclet);
double mw_table_cylinder(double peclet);

#endif
