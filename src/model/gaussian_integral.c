/* SPDX-License-Identifier: GPL-3.0-or-later
 * I(X,Y,Z;P) = int_0^inf dw/(1+w^2) exp(-E),  E = [(X + P w^2)^2 + Y^2]/(2 S) + Z^2/(2 w^2),  S = 1 + w^2.
 * With A2 = (X-P)^2 + Y^2 the exponent is [P^2 S + 2P(X-P) + A2/S + Z^2/(S-1)]/2: convex in S, so it has one valley, and where it
 * stands CUT above its floor follows from quadratics. Between those ends the integrand is analytic and falls to exp(-CUT), which
 * makes the plain trapezoid rule converge geometrically in the mapped variable. */
#include "model/gaussian_integral.h"

#include <math.h>

#include "model/wide.h"

enum {
    LANES = 8,
    SURFACE_NODES = 72,
    BELOW_NODES = 112,
    MOST_NODES = 8000
};                            /* the first two are the least; multiples of LANES */
static const double CUT = 37; /* exp(-37) = 8.5e-17 */

/* Sums over nodes with weight jacobian/(1+w^2), relative to the floor of the exponent, in LANES strands: node i goes to strand
 * i mod LANES, so the order of additions is the same whatever the width of the machine's vectors. */
typedef struct strands {
    double one[LANES], g[LANES], gg[LANES], s[LANES], t[LANES], gt[LANES];
} strands;

static double total(const double x[LANES])
{
    return ((x[0] + x[4]) + (x[2] + x[6])) + ((x[1] + x[5]) + (x[3] + x[7]));
}

static void finish(const strands *a, double step, double floor_exponent, mw_moments *out)
{
    const double one = total(a->one);
    out->log_i = log(one * step) - floor_exponent;
    out->g = total(a->g) / one;
    out->gg = total(a->gg) / one;
    out->s = total(a->s) / one;
    out->t = total(a->t) / one;
    out->gt = total(a->gt) / one;
}

/* Nodes, a multiple of LANES, that keep the step within `widest`; bounded whatever a range that is no number of use. */
static int node_count(double range, double widest, int least)
{
    const double groups = fmin(fmax(ceil((range / widest + 1) / LANES), least / LANES), MOST_NODES / LANES);
    return LANES * (int)groups; /* fmax drops a NaN */
}

/* from e^(i h) for the first LANES nodes, and e^(LANES h): the others follow by multiplication. The growth is taken by exp
 * itself, since an error in it acts like an error in the step. */
static double first_nodes(double from, double step, double e[LANES])
{
    const double grow = exp(step);
    e[0] = from;
    for (int i = 1; i < LANES; i++)
        e[i] = e[i - 1] * grow;
    return exp(LANES * step);
}

/* The widest steps that keep aliasing near rounding. An integrand that ends like exp(-c e^(+-2u)) is bounded in a strip of half
 * width pi/4, so a step h leaves exp(-pi^2/(2h)). */
static const double STRIP_STEP = 0.14;

/* In ln w two things narrow the strip. A fast beam ends like exp(-c e^(4u)): pi/8. And behind the source the heat is a bump at
 * w^2 = -x/P of relative width d = sqrt(1+w^2)/(2|x|); there the integrand grows like exp(x^2 G/2), G = cos^2(2v)/cos(4v) - 1, at
 * a distance v into the complex plane, so that a step of 0.35 d leaves min over v of exp(x^2 G/2 - 2 pi v/h) < 1e-15. */
static double widest_step(double x, double p)
{
    const double end = fmax(STRIP_STEP / 3, STRIP_STEP / (1 + p / 2));
    return x < 0 ? fmin(end, 0.175 * sqrt(1 - x / p) / -x) : end;
}

/* Where E, Z = 0, stands CUT above its floor on the far side, in S. */
static double far_end(double a2, double p)
{
    const double a = sqrt(a2);
    if (a > p) {
        const double root = (sqrt(2 * CUT + 4 * p * a) + sqrt(2 * CUT)) / (2 * p);
        return root * root;
    }
    const double m = p * p + a2 + 2 * CUT;
    return (m + sqrt(fmax(0, m * m - 4 * p * p * a2))) / (2 * p * p);
}

/* w = sinh u on the surface. `first` weighs node 0: one half where the interval starts at u = 0, since the integrand is even in
 * u. */
MW_WIDE static void surface_nodes(double x, double y2, double p, double floor_exponent, double first, int nodes, double e[LANES],
                                  double grow, strands *a)
{
    /* e^-u goes along by multiplication too: a division is what costs most here. */
    double inv[LANES];
    const double shrink = 1 / grow;
    for (int l = 0; l < LANES; l++)
        inv[l] = 1 / e[l];
    for (int i = 0; i < nodes; i += LANES) {
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            const double cosh_u = 0.5 * (e[l] + inv[l]), sinh_u = 0.5 * (e[l] - inv[l]);
            const double w2 = sinh_u * sinh_u, s = 1 / (cosh_u * cosh_u), reach = x + p * w2, g = reach * s;
            const double weight = exp(floor_exponent - 0.5 * (reach * reach + y2) * s) * (cosh_u * s) * (i + l == 0 ? first : 1);
            a->one[l] += weight;
            a->g[l] += weight * g;
            a->gg[l] += weight * g * g;
            a->s[l] += weight * s;
            a->gt[l] += weight * g * s;
            e[l] *= grow;
            inv[l] *= shrink;
        }
    }
    for (int l = 0; l < LANES; l++)
        a->t[l] = a->s[l];
}

/* w = e^u below it. */
MW_WIDE static void below_nodes(double x, double z2, double p, double floor_exponent, int nodes, double w[LANES], double grow,
                                strands *a)
{
    double inv[LANES]; /* 1/w^2, by multiplication */
    const double shrink = 1 / (grow * grow);
    for (int l = 0; l < LANES; l++)
        inv[l] = 1 / (w[l] * w[l]);
    for (int i = 0; i < nodes; i += LANES) {
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            const double w2 = w[l] * w[l], s = 1 / (1 + w2), t = inv[l], reach = x + p * w2, g = reach * s;
            const double weight = exp(floor_exponent - 0.5 * (reach * reach * s + z2 * t)) * w[l] * s;
            a->one[l] += weight;
            a->g[l] += weight * g;
            a->gg[l] += weight * g * g;
            a->s[l] += weight * s;
            a->t[l] += weight * t;
            a->gt[l] += weight * g * t;
            w[l] *= grow;
            inv[l] *= shrink;
        }
    }
}

void mw_gaussian_surface(double x, double y2, double peclet, mw_moments *out)
{
    const double p = peclet, a2 = (x - p) * (x - p) + y2, a = sqrt(a2);
    /* Floor and near end in S. */
    const double best = fmax(1, a / p), root = sqrt(2 * CUT + 4 * p * a), near = 2 * a / (root + sqrt(2 * CUT));
    const double low = a > p ? fmax(1, near * near) : 1, high = far_end(a2, p);
    /* e^u at both ends: S = cosh^2 u. */
    const double from = sqrt(low) + sqrt(low - 1), range = log((sqrt(high) + sqrt(fmax(0, high - 1))) / from);
    const int nodes = node_count(range, STRIP_STEP, SURFACE_NODES);
    const double step = range / (nodes - 1);
    const double at_best = x + p * (best - 1), floor_exponent = (at_best * at_best + y2) / (2 * best);
    double e[LANES];
    const double grow = first_nodes(from, step, e);
    strands sums = {0};
    surface_nodes(x, y2, p, floor_exponent, low > 1 ? 1 : 0.5, nodes, e, grow, &sums);
    finish(&sums, step, floor_exponent, out);
}

/* Ends of the valley in q = w^2 for z > 0, and its lowest point. */
static void valley_below(double x, double z2, double p, double *low, double *high, double *best)
{
    const double a2 = (x - p) * (x - p);
    /* Newton on f'(q) = p^2 - a2/(1+q)^2 - z2/q^2, convex f; from a point left of the floor it climbs monotonically. */
    double q = z2 / (p * sqrt(z2) + sqrt(z2 * (1 + a2)) + 1e-300);
    for (int i = 0; i < 60; i++) {
        const double s = 1 + q, f1 = p * p - a2 / (s * s) - z2 / (q * q), f2 = 2 * a2 / (s * s * s) + 2 * z2 / (q * q * q);
        double next = q - f1 / f2;
        next = next > 4 * q ? 4 * q : next < q / 4 ? q / 4 : next;
        const double change = fabs(next - q);
        q = next;
        if (change < 1e-6 * q)
            break;
    }
    *best = q;
    const double top = p * p * (1 + q) + a2 / (1 + q) + z2 / q + 2 * CUT;
    /* Upper end: p^2 S + (a2 + z2)/S <= top. Lower end: the same, and z2/q <= top - min over S of the rest. */
    const double both = a2 + z2, root = sqrt(fmax(0, top * top - 4 * p * p * both));
    *high = (top + root) / (2 * p * p) - 1;
    const double rest = sqrt(a2) > p ? 2 * p * sqrt(a2) : p * p + a2;
    const double by_z = z2 / (top - rest);
    const double by_s = 2 * both / (top + root) - 1;
    *low = fmax(by_z, by_s);
}

void mw_gaussian_below(double x, double z, double peclet, mw_moments *out)
{
    const double p = peclet, z2 = z * z;
    double low, high, best;
    valley_below(x, z2, p, &low, &high, &best);
    const double from = sqrt(low), range = 0.5 * log(high / low);
    const int nodes = node_count(range, widest_step(x, p), BELOW_NODES);
    const double step = range / (nodes - 1);
    const double at_best = x + p * best, floor_exponent = at_best * at_best / (2 * (1 + best)) + z2 / (2 * best);
    double w[LANES];
    const double grow = first_nodes(from, step, w);
    strands sums = {0};
    below_nodes(x, z2, p, floor_exponent, nodes, w, grow, &sums);
    finish(&sums, step, floor_exponent, out);
}
