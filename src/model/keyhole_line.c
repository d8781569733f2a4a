/* SPDX-License-Identifier: GPL-3.0-or-later
 * The default pool in lanes. The steps and their names are those of keyhole.c, which is the reference. */
#include "model/keyhole_line.h"

#include <math.h>
#include <stdbool.h>

#include "meltwright/gaussian.h"
#include "model/gaussian_table.h"
#include "model/wide.h"

enum { LANES = 128 };

/* What is the same for every power of the line. */
typedef struct line_constants {
    mw_table_line width, depth;
    double s_per_W;      /* melting index of the flat surface, B Imax over power */
    double onset_per_W;  /* onset index over power */
    double full_per_W;   /* cavity depth in beam diameters if it absorbed all, over power */
    double absorptivity, shape, widening, d4sigma_m, sigma_m;
    int gate;            /* exponent, when a small whole number */
} line_constants;

static bool make_constants(const mw_keyhole_input *in, const mw_keyhole_constants *c, line_constants *k)
{
    const mw_source one = {in->absorptivity, in->speed_m_per_s, in->d4sigma_m / 4}; /* one watt */
    double melt_peclet, melt_strength, boil_peclet, boil_strength;
    if (mw_gaussian_numbers(&one, &in->melt, &melt_peclet, &melt_strength) < 0 || mw_gaussian_numbers(&one, &in->boil, &boil_peclet, &boil_strength) < 0)
        return false;
    if (!mw_table_line_make(MW_TABLE_WIDTH, melt_peclet, &k->width) || !mw_table_line_make(MW_TABLE_DEPTH, melt_peclet, &k->depth))
        return false;
    const double rise = in->boil.isotherm_K - in->boil.ambient_K;
    k->s_per_W = melt_strength * mw_table_peak(melt_peclet);
    k->onset_per_W = boil_strength * mw_table_peak(boil_peclet) / c->onset_ratio;
    k->full_per_W = 1 / (in->d4sigma_m * in->boil.conductivity_W_per_mK * rise * mw_table_cylinder(2 * boil_peclet));
    k->absorptivity = in->absorptivity;
    k->shape = c->cavity_shape;
    k->widening = c->flow_widening;
    k->d4sigma_m = in->d4sigma_m;
    k->sigma_m = in->d4sigma_m / 4;
    k->gate = (int)c->gate_exponent;
    return isfinite(k->onset_per_W) && isfinite(k->full_per_W);
}

/* x^n for a whole n of 1 to 64, the same bits in every lane and for every width of vector. */
static inline double whole_power(double x, int n)
{
    double product = 1, square = x;
    for (int bit = 0; bit < 7; bit++) {
        product = (n >> bit & 1) != 0 ? product * square : product;
        square = square * square;
    }
    return product;
}

/* Cavity depth over beam diameter, 0 below the onset, and the melting index at the absorptivity it gives. */
MW_WIDE static void cavity_lanes(const line_constants *k, const double *restrict power, double *restrict onset, double *restrict relative, double *restrict flat,
                                 double *restrict inside)
{
    const double a0 = k->absorptivity, a = k->shape * a0;
    for (int i = 0; i < LANES; i++) {
        const double s = k->onset_per_W * power[i], full = k->full_per_W * power[i], open_s = s > 1 ? s : 1;
        const double gate = 1 - whole_power(1 / open_s, k->gate);
        const double b = a * full - 1, root = sqrt(b * b + 4 * a * a0 * full);
        const double over = b < 0 ? 2 * a0 * full : b + root, under = b < 0 ? root - b : 2 * a; /* without cancellation */
        const double open = over / under;
        const double x = gate * open;
        onset[i] = s;
        relative[i] = x;
        flat[i] = k->s_per_W * power[i];
        inside[i] = flat[i] * (1 + k->shape * x) / (1 + a * x);
    }
}

/* Melting index at the surface, where the cavity's share of the heat is missing; width in sigma in, index out. */
MW_WIDE static void surface_lanes(const double *restrict relative, const double *restrict inside, const double *restrict width,
                                  double *restrict surface)
{
    for (int i = 0; i < LANES; i++) {
        const double w = width[i] > 0 ? width[i] : 1; /* in sigma, as h = 4 relative */
        surface[i] = inside[i] * w / (w + 4 * relative[i]);
    }
}

/* ((3 + x)/2)^(1/3) on -1..1 in powers of x: interpolation at the Chebyshev nodes, within 2e-9. */
enum { CUBE_ROOT_TERMS = 11 };
static const double cube_root_powers[CUBE_ROOT_TERMS] = {
    1.1447142425533321, 0.12719047231385361, -0.014132274872966422, 0.0026170695901565856,
    -0.00058156964044890993, 0.00014226409579148251, -3.6887163482102314e-05, 9.7193217967192641e-06,
    -2.6953637134329139e-06, 9.99534060288614e-07, -2.9053792455053583e-07};

/* (a^3 + b^3)^(1/3): the larger times the cube root of 1 + q, q in 0..1, by a series good to 1e-8. */
static inline double cubic_blend(double a, double b)
{
    const double big = a > b ? a : b, small = a > b ? b : a, ratio = small / (big > 0 ? big : 1), x = 2 * ratio * ratio * ratio - 1;
    double y = cube_root_powers[CUBE_ROOT_TERMS - 1];
    for (int k = CUBE_ROOT_TERMS - 2; k >= 0; k--)
        y = y * x + cube_root_powers[k];
    return big * y;
}

/* The wider of conduction pool and surface pool; depth from conduction pool and cavity. */
MW_WIDE static void pool_lanes(const line_constants *k, const double *restrict relative, const double *restrict conduction, const double *restrict surface,
                               double *restrict width, double *restrict depth)
{
    for (int i = 0; i < LANES; i++) {
        const double wider = surface[i] > conduction[i] ? surface[i] : conduction[i];
        width[i] = k->widening * wider * k->sigma_m;
        const double down = depth[i] * k->sigma_m / k->widening;
        depth[i] = conduction[i] > 0 ? cubic_blend(down, relative[i] * k->d4sigma_m) : 0;
    }
}

static mw_status exact_lane(const mw_keyhole_input *input, const mw_keyhole_constants *constants, double power_W, size_t i, const mw_pool_lanes *out)
{
    mw_keyhole_input in = *input;
    mw_keyhole_pool p;
    in.power_W = power_W;
    in.layer_m = 0;
    const mw_status status = mw_keyhole_pool_compute(&in, constants, &p);
    out->width_m[i] = p.pool.width_m;
    out->depth_m[i] = p.pool.depth_m;
    out->conduction_width_m[i] = p.conduction.width_m;
    out->onset_index[i] = p.onset_index;
    if (out->melting_index != NULL)
        out->melting_index[i] = (p.conduction.peak_temperature_K - in.melt.ambient_K) / (in.melt.isotherm_K - in.melt.ambient_K);
    if (out->cavity_depth_m != NULL)
        out->cavity_depth_m[i] = p.cavity_depth_m;
    if (out->absorptivity != NULL)
        out->absorptivity[i] = p.absorptivity;
    return status == MW_NO_MELT ? MW_OK : status;
}

/* One block; n <= LANES. */
static mw_status block(const mw_keyhole_input *in, const mw_keyhole_constants *c, const line_constants *k, const double *power_W, size_t n, size_t at,
                       const mw_pool_lanes *out)
{
    double power[LANES], onset[LANES], relative[LANES], flat[LANES], inside[LANES], surface[LANES], w0[LANES], w1[LANES], w2[LANES], depth[LANES];
    bool cavity = false;
    for (size_t i = 0; i < LANES; i++)
        power[i] = power_W[i < n ? i : n - 1];
    cavity_lanes(k, power, onset, relative, flat, inside);
    for (size_t i = 0; i < n; i++)
        cavity = cavity || onset[i] > 1;
    mw_table_lines_eval((const mw_table_line *const[]){&k->width, &k->depth}, (const mw_table_quantity[]){MW_TABLE_WIDTH, MW_TABLE_DEPTH}, 2, flat, n,
                        (double *const[]){w0, depth});
    if (cavity) {
        mw_table_line_eval(&k->width, MW_TABLE_WIDTH, inside, n, w1);
        for (size_t i = n; i < LANES; i++)
            w1[i] = 1;
        surface_lanes(relative, inside, w1, surface);
        mw_table_line_eval(&k->width, MW_TABLE_WIDTH, surface, n, w2);
    }
    for (size_t i = cavity ? n : 0; i < LANES; i++)
        w2[i] = 0;
    for (size_t i = n; i < LANES; i++)
        w0[i] = depth[i] = 0;
    pool_lanes(k, relative, w0, w2, w1, depth);
    mw_status status = MW_OK;
    for (size_t i = 0; i < n && status == MW_OK; i++) {
        out->width_m[at + i] = w1[i];
        out->depth_m[at + i] = depth[i];
        out->conduction_width_m[at + i] = w0[i] * k->sigma_m;
        out->onset_index[at + i] = onset[i];
        if (out->melting_index != NULL)
            out->melting_index[at + i] = flat[i];
        if (out->cavity_depth_m != NULL)
            out->cavity_depth_m[at + i] = relative[i] * k->d4sigma_m;
        if (out->absorptivity != NULL)
            out->absorptivity[at + i] = k->absorptivity * (inside[i] / flat[i]);
        if (!(flat[i] <= MW_TABLE_MOST_S && inside[i] <= MW_TABLE_MOST_S))
            status = exact_lane(in, c, power_W[i], at + i, out);
    }
    return status;
}

mw_status mw_keyhole_line(const mw_keyhole_input *input, const mw_keyhole_constants *constants, const double *power_W, size_t n, const mw_pool_lanes *out)
{
    line_constants k;
    const bool usual = constants->blend_exponent == 3 && constants->gate_exponent >= 1 && constants->gate_exponent <= 64 &&
                       constants->gate_exponent == floor(constants->gate_exponent) && constants->cavity_shape > 0;
    mw_status status = MW_OK;
    if (!usual || !(input->absorptivity > 0 && input->absorptivity <= 1) || !make_constants(input, constants, &k)) {
        for (size_t i = 0; i < n && status == MW_OK; i++)
            status = exact_lane(input, constants, power_W[i], i, out);
        return status;
    }
    for (size_t at = 0; at < n && status == MW_OK; at += LANES)
        status = block(input, constants, &k, power_W + at, n - at < LANES ? n - at : LANES, at, out);
    return status;
}
