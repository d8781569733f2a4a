/* SPDX-License-Identifier: GPL-3.0-or-later
 * Evaluation of the pool tables. */
#include "model/gaussian_table.h"

#include <math.h>

#include "gaussian_table_data.h" /* generated: src/generate */
#include "model/series.h"
#include "model/wide.h"

typedef struct table_set {
    const struct table_strip *strip;
    size_t n_strip;
    const struct table_patch *patch;
} table_set;

#define SET(name) {name##_strip, sizeof name##_strip / sizeof *name##_strip, name##_patch}
static const table_set set_of[MW_TABLE_QUANTITIES] = {SET(width), SET(depth), SET(length)};

static double curve_at(const double series[CURVE_PIECES][CURVE_TERMS], double peclet)
{
    const double y = log(peclet);
    if (!(y >= curve_lo && y <= curve_hi))
        return NAN;
    const double at = CURVE_PIECES * (y - curve_lo) / (curve_hi - curve_lo);
    const int piece = at >= CURVE_PIECES ? CURVE_PIECES - 1 : (int)at;
    return exp(mw_series_at(series[piece], CURVE_TERMS, 2 * (at - piece) - 1));
}

double mw_table_peak(double peclet)
{
    return curve_at(peak_series, peclet);
}

double mw_table_cylinder(double peclet)
{
    return curve_at(cylinder_series, peclet);
}

/* t where the second widest place takes over; level below the Peclet number where there is a second one. */
static double switch_at(double y)
{
    return mw_series_at(switch_series, SWITCH_TERMS, fmax(-1, 2 * (y - switch_lo) / (switch_hi - switch_lo) - 1));
}

/* Powers of u of one patch at height x of its strip, -1..1. */
MW_WIDE static void contract(const struct table_patch *patch, double x, double *restrict c)
{
    double sum[MW_TABLE_U];
    for (int i = 0; i < MW_TABLE_U; i++)
        sum[i] = patch->c[MW_TABLE_Y - 1][i];
    for (int j = MW_TABLE_Y - 2; j >= 0; j--)
        for (int i = 0; i < MW_TABLE_U; i++)
            sum[i] = sum[i] * x + patch->c[j][i];
    for (int i = 0; i < MW_TABLE_U; i++)
        c[i] = sum[i];
}

bool mw_table_line_make(mw_table_quantity quantity, double peclet, mw_table_line *line)
{
    line->n = 0;
    if (!(peclet >= MW_TABLE_LEAST_PECLET && peclet <= MW_TABLE_MOST_PECLET))
        return false;
    const table_set *set = &set_of[quantity];
    const double y = log(peclet);
    const struct table_strip *strip = set->strip;
    while (y > strip->y1 && strip + 1 < set->strip + set->n_strip)
        strip++;
    const double x = 2 * (y - strip->y0) / (strip->y1 - strip->y0) - 1;
    const double turn = quantity == MW_TABLE_WIDTH ? switch_at(y) : table_most_t / 2;
    line->n = (size_t)strip->n;
    for (size_t i = 0; i < line->n; i++) {
        const struct table_patch *patch = &set->patch[(size_t)strip->first + i];
        const double to = patch->u1 <= 1 ? patch->u1 * turn : turn + (patch->u1 - 1) * (table_most_t - turn);
        const double from = i == 0 ? 0 : line->edge[i];
        line->edge[i] = from;
        line->edge[i + 1] = to;
        line->middle[i] = (from + to) / 2;
        line->scale[i] = 2 / (to - from);
        contract(patch, x, line->c[i]);
    }
    return true;
}

enum { LANES = 32 };

/* z and t of a block, and what part of the tables it needs. */
typedef struct place {
    double z[LANES], t[LANES], least, most;
} place;

MW_WIDE static void find_place(const double *restrict s, place *restrict at)
{
    double least = 1, most = 0;
    for (int i = 0; i < LANES; i++) {
        const double z = sqrt(s[i] > 1 ? s[i] - 1 : 0);
        at->z[i] = z;
        at->t[i] = z / (z + MW_TABLE_HALF);
    }
    for (int i = 0; i < LANES; i++) {
        least = at->t[i] < least ? at->t[i] : least;
        most = at->t[i] > most ? at->t[i] : most;
    }
    at->least = least;
    at->most = most;
}

/* Every segment that any lane needs is evaluated for all of them, and each lane keeps its own. */
MW_WIDE static void block(const mw_table_line *line, bool square, const place *restrict at, double *restrict out)
{
    double value[LANES];
    for (int i = 0; i < LANES; i++)
        value[i] = NAN; /* beyond the table */
    for (size_t k = 0; k < line->n; k++) {
        const double lo = line->edge[k], hi = line->edge[k + 1], middle = line->middle[k], scale = line->scale[k];
        if (hi < at->least || lo > at->most)
            continue;
        const double *c = line->c[k];
        for (int i = 0; i < LANES; i++) {
            const double u = (at->t[i] - middle) * scale;
            double v = c[MW_TABLE_U - 1];
            for (int j = MW_TABLE_U - 2; j >= 0; j--)
                v = v * u + c[j];
            value[i] = at->t[i] >= lo && at->t[i] <= hi ? v : value[i];
        }
    }
    for (int i = 0; i < LANES; i++) {
        const double shape = square ? at->z[i] * at->z[i] : at->z[i];
        out[i] = shape * value[i];
    }
}

/* NaN above what the tables promise, though their last segment reaches a little farther. */
static void cut_off(const double *s, size_t n, double *out)
{
    for (size_t i = 0; i < n; i++)
        out[i] = s[i] <= MW_TABLE_MOST_S ? out[i] : NAN;
}

void mw_table_lines_eval(const mw_table_line *const line[], const mw_table_quantity quantity[], size_t n_line, const double *s, size_t n, double *const out[])
{
    for (size_t i = 0; i < n; i += LANES) {
        place at;
        double rest[LANES], value[LANES];
        const size_t m = n - i < LANES ? n - i : LANES;
        for (size_t k = 0; m < LANES && k < LANES; k++)
            rest[k] = s[i + (k < m ? k : m - 1)];
        find_place(m < LANES ? rest : s + i, &at);
        for (size_t q = 0; q < n_line; q++) {
            double *to = m < LANES ? value : out[q] + i;
            block(line[q], quantity[q] == MW_TABLE_DEPTH, &at, to);
            for (size_t k = 0; m < LANES && k < m; k++)
                out[q][i + k] = value[k];
            if (!(at.most <= line[q]->edge[line[q]->n] * (1 - 1e-4)))
                cut_off(s + i, m, out[q] + i);
        }
    }
}

void mw_table_line_eval(const mw_table_line *line, mw_table_quantity quantity, const double *s, size_t n, double *out)
{
    mw_table_lines_eval(&line, &quantity, 1, s, n, &out);
}
