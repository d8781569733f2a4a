/* SPDX-License-Identifier: GPL-3.0-or-later
 * I(X,Y,Z;P) = int_0^inf dw/(1+w^2) exp(-E),  E = [(X + P w^2)^2 + Y^2]/(2 S) + Z^2/(2 w^2),  S = 1 + w^2.
 * With A2 = (X-P)^2 + Y^2 the exponent is [P^2 S + 2P(X-P) + A2/S + Z^2/(S-1)]/2: convex in S, so it has one valley, and where it
 * stands CUT above its floor follows from quadratics. Between those ends the integrand is analytic and falls to exp(-CUT), which
 * makes the plain trapezoid rule converge geometrically in the mapped variable. */
#include "model/gaussian_integral.h"

#include <math.h>

#include "model/wide.h"

enum { LANES = 8, SURFACE_NODES = 72, BELOW_NODES = 112 }; /* multiples of LANES */
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

/* e^(from + i h) for the first LANES nodes, and e^(LANES h): the others follow by multiplication. */
static double first_nodes(double from, double step, double e[LANES])
{
    const double grow = exp(step);
    e[0] = exp(from);
    for (int i = 1; i < LANES; i++)
        e[i] = e[i - 1] * grow;
    const double grow2 = grow * grow, grow4 = grow2 * grow2;
    return grow4 * grow4;
}

/* w = sinh u on the surface. `first` weighs node 0: one half where the interval starts at u = 0, since the integrand is even in u. */
MW_WIDE static void surface_nodes(double x, double y2, double p, double floor_exponent, double first, double e[LANES], double grow, strands *a)
{
    for (int i = 0; i < SURFACE_NODES; i += LANES) {
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            const double inv = 1 / e[l], cosh_u = 0.5 * (e[l] + inv), sinh_u = 0.5 * (e[l] - inv);
            const double w2 = sinh_u * sinh_u, s = 1 / (cosh_u * cosh_u), reach = x + p * w2, g = reach * s;
            const double weight = exp(floor_exponent - 0.5 * (reach * reach + y2) * s) / cosh_u * (i + l == 0 ? first : 1);
            a->one[l] += weight;
            a->g[l] += weight * g;
            a->gg[l] += weight * g * g;
            a->s[l] += weight * s;
            a->gt[l] += weight * g * s;
            e[l] *= grow;
        }
    }
    for (int l = 0; l < LANES; l++)
        a->t[l] = a->s[l];
}

/* w = e^u below it. */
MW_WIDE static void below_nodes(double x, double z2, double p, double floor_exponent, double w[LANES], double grow, strands *a)
{
    for (int i = 0; i < BELOW_NODES; i += LANES) {
#pragma omp simd
        for (int l = 0; l < LANES; l++) {
            const double w2 = w[l] * w[l], s = 1 / (1 + w2), t = 1 / w2, reach = x + p * w2, g = reach * s;
            const double weight = exp(floor_exponent - 0.5 * (reach * reach * s + z2 * t)) * w[l] * s;
            a->one[l] += weight;
            a->g[l] += weight * g;
            a->gg[l] += weight * g * g;
            a->s[l] += weight * s;
            a->t[l] += weight * t;
            a->gt[l] += weight * g * t;
            w[l] *= grow;
        }
    }
}

void mw_gaussian_surface(double x, double y2, double peclet, mw_moments *out)
{
    const double p = peclet, a2 = (x - p) * (x - p) + y2, a = sqrt(a2);
    /* Valley and ends in S. */
    double low = 1, high, best = 1;
    if (a > p) {
        const double root = sqrt(2 * CUT + 4 * p * a), b = sqrt(2 * CUT);
        const double r = (root - b) / (2 * p), l = (root + b) / (2 * p);
        best = a / p;
        low = fmax(1, r * r);
        high = l * l;
    } else {
        const double m = p * p + a2 + 2 * CUT;
        high = (m + sqrt(fmax(0, m * m - 4 * p * p * a2))) / (2 * p * p);
    }
    const double from = low > 1 ? acosh(sqrt(low)) : 0, to = acosh(sqrt(high)), step = (to - from) / (SURFACE_NODES - 1);
    const double at_best = x + p * (best - 1), floor_exponent = (at_best * at_best + y2) / (2 * best);
    double e[LANES];
    const double grow = first_nodes(from, step, e);
    strands sums = {0};
    surface_nodes(x, y2, p, floor_exponent, low > 1 ? 1 : 0.5, e, grow, &sums);
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
    const double from = 0.5 * log(low), to = 0.5 * log(high), step = (to - from) / (BELOW_NODES - 1);
    const double at_best = x + p * best, floor_exponent = at_best * at_best / (2 * (1 + best)) + z2 / (2 * best);
    double w[LANES];
    const double grow = first_nodes(from, step, w);
    strands sums = {0};
    below_nodes(x, z2, p, floor_exponent, w, grow, &sums);
    finish(&sums, step, floor_exponent, out);
}

double mw_gaussian_drop(double x, double z, double peclet, double log_i_surface)
{
    /* int (1 - exp(-z^2/2w^2)) exp(-E) dw/S: falls like w below z and like the surface integrand above. */
    const double p = peclet, a2 = (x - p) * (x - p), a = sqrt(a2);
    double high;
    if (a > p) {
        const double l = (sqrt(2 * CUT + 4 * p * a) + sqrt(2 * CUT)) / (2 * p);
        high = l * l;
    } else {
        const double m = p * p + a2 + 2 * CUT;
        high = (m + sqrt(fmax(0, m * m - 4 * p * p * a2))) / (2 * p * p);
    }
    /* Behind the source the integrand is a bump at w^2 = -x/P, of relative width 1/(2|x|): the step must resolve it. */
    const double from = log(z) - 34, to = 0.5 * log(fmax(high - 1, z * z));
    const int n = 2 + (int)((to - from) * 10 * (1 + fabs(x)));
    const double step = (to - from) / (n - 1);
    double w = exp(from), sum = 0;
    const double grow = exp(step);
    for (int i = 0; i < n; i++, w *= grow) {
        const double w2 = w * w, reach = x + p * w2;
        sum -= expm1(-0.5 * z * z / w2) * exp(-0.5 * reach * reach / (1 + w2) - log_i_surface) * w / (1 + w2);
    }
    return sum * step;
}
