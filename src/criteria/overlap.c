/* SPDX-License-Identifier: GPL-3.0-or-later
 * Do neighbouring pools, taken as half ellipses, melt the whole layer? */
#include <math.h>

#include "meltwright/criteria.h"

double mw_overlap_index(double width_m, double depth_m, double hatch_m, double layer_m)
{
    if (width_m == 0 || depth_m == 0)
        return isnan(hatch_m) || isnan(layer_m) ? NAN : INFINITY;
    const double across = hatch_m / width_m, down = layer_m / depth_m;
    return across * across + down * down;
}

double mw_effective_layer(double layer_m, double packing_ratio)
{
    return layer_m / packing_ratio;
}

static bool usable(double width_m, double depth_m, double hatch_m, double layer_m)
{
    return width_m >= 0 && depth_m >= 0 && hatch_m > 0 && layer_m > 0;
}

/* Antiderivative of 2 sqrt(1 - s^2). */
static double segment(double s)
{
    return asin(s) + s * sqrt(fmax(0, 1 - s * s));
}

double mw_unmelted_aligned(double width_m, double depth_m, double hatch_m, double layer_m)
{
    if (!usable(width_m, depth_m, hatch_m, layer_m))
        return NAN;
    if (width_m == 0 || depth_m == 0)
        return 1;
    /* The pool's floor at lateral distance y lies at D sqrt(1 - (2y/W)^2); the layer is whole out to `whole`, bare beyond `edge`. */
    const double edge = fmin(hatch_m, width_m) / 2;
    const double reach = layer_m / depth_m;
    const double whole = reach < 1 ? fmin(edge, width_m / 2 * sqrt(1 - reach * reach)) : 0;
    const double melted = depth_m * width_m / (4 * layer_m) * (segment(2 * edge / width_m) - segment(2 * whole / width_m));
    const double outside = fmax(0, (hatch_m - width_m) / 2);
    return fmax(0, 2 / hatch_m * (edge - whole - melted + outside));
}

/* Share of the hatch that a pool leaves bare at depth d below its own surface. */
static double bare_share(double d, double width_m, double depth_m, double hatch_m)
{
    if (d >= depth_m)
        return 1;
    const double s = d / depth_m;
    return fmax(0, 1 - width_m / hatch_m * sqrt(1 - s * s));
}

enum { NODES = 16, MOST_LAYERS = 4096 };

static const double node[NODES / 2] = {0.0950125098376374402, 0.281603550779258913, 0.458016777657227386, 0.617876244402643748,
                                       0.755404408355003034,  0.865631202387831744, 0.944575023073232576, 0.989400934991649933};
static const double weight[NODES / 2] = {0.189450610455068496, 0.182603415044923589, 0.169156519395002538, 0.149595988816576732,
                                         0.124628971255533872, 0.0951585116824927848, 0.0622535239386478929, 0.0271524594117540949};

/* Integral over z in [from, to] of the product over the layers still within reach. The square-root edges of the integrand sit at
 * the ends; z = mid + half sin(u) makes it smooth there. */
static double panel(double from, double to, double width_m, double depth_m, double hatch_m, double layer_m)
{
    const double quarter = 1.57079632679489661923, mid = (from + to) / 2, half = (to - from) / 2;
    double sum = 0;
    for (int i = 0; i < NODES; i++) {
        const double t = (i % 2 == 0 ? 1 : -1) * node[i / 2];
        const double z = mid + half * sin(quarter * t);
        double product = 1;
        for (double d = z; d < depth_m && product > 0; d += layer_m)
            product *= bare_share(d, width_m, depth_m, hatch_m);
        sum += weight[i / 2] * product * cos(quarter * t);
    }
    return sum * half * quarter;
}

double mw_unmelted_scattered(double width_m, double depth_m, double hatch_m, double layer_m)
{
    if (!usable(width_m, depth_m, hatch_m, layer_m))
        return NAN;
    if (width_m == 0 || depth_m == 0)
        return 1;
    const double layers = depth_m / layer_m;
    if (!(layers < MOST_LAYERS))
        return 0;
    /* The integrand over 0..layer is smooth but where some layer's floor runs out (z = D - mL) and where a pool starts to cover the
     * whole hatch (bare_share reaches zero at d0, below which the product vanishes for every z with some z + mL < d0). */
    const double covered = width_m > hatch_m ? depth_m * sqrt(1 - (hatch_m / width_m) * (hatch_m / width_m)) : 0;
    if (covered >= layer_m)
        return 0;
    const double floor_ends = depth_m - layer_m * floor(layers);
    const double cut[4] = {covered, fmin(fmax(floor_ends, covered), layer_m), layer_m, layer_m};
    double sum = 0;
    for (int i = 0; i < 3; i++) {
        if (!(cut[i + 1] > cut[i]))
            continue;
        enum { PIECES = 8 };
        const double step = (cut[i + 1] - cut[i]) / PIECES;
        for (int j = 0; j < PIECES; j++)
            sum += panel(cut[i] + j * step, cut[i] + (j + 1) * step, width_m, depth_m, hatch_m, layer_m);
    }
    return fmin(1, fmax(0, sum / layer_m));
}
