/* SPDX-License-Identifier: GPL-3.0-or-later
 * Moving point source (law and sources: see the header). With r = distance from the source in units of 2 alpha/v:
 *   isotherm            r exp(r + x) = n
 *   widest, deepest     x = -r^2/(1+r) and n = r exp(r/(1+r)); the distance from the axis is r sqrt(1+2r)/(1+r)
 *   tips (on the axis)  ahead x = r: 2r exp(2r) = 2n, the Lambert function; behind x = -r: r = n */
#include "meltwright/rosenthal.h"

#include <math.h>
#include <stdbool.h>

static const double pi = 3.14159265358979323846;

enum { MOST_STEPS = 60 }; /* 3 to 6 are used; the bound only keeps a surprise from looping */

static bool positive(double x)
{
    return x > 0 && isfinite(x);
}

static bool field_usable(const mw_source *s, const mw_medium *m)
{
    return positive(s->absorbed_W) && positive(s->speed_m_per_s) && positive(m->conductivity_W_per_mK) &&
           positive(m->volumetric_heat_J_per_m3K) && positive(m->ambient_K);
}

static double melting_rise_K(const mw_medium *m)
{
    return m->isotherm_K - m->ambient_K;
}

/* v / (2 alpha), 1/m */
static double inverse_length(const mw_source *s, const mw_medium *m)
{
    return s->speed_m_per_s * m->volumetric_heat_J_per_m3K / (2 * m->conductivity_W_per_mK);
}

double mw_rosenthal_number(const mw_source *source, const mw_medium *medium)
{
    const double rise = melting_rise_K(medium);
    if (!field_usable(source, medium) || !positive(rise))
        return NAN;
    return source->absorbed_W * inverse_length(source, medium) / (2 * pi * medium->conductivity_W_per_mK * rise);
}

/* r of the widest section: n = r exp(r/(1+r)). The start has both limits right (r -> n and n/e) and is 21 % off at
 * most between them. Halley's method on f(ln r) = ln(r/n) + r/(1+r), whose slope lies in (1, 5/4]. */
static double widest_radius(double n)
{
    double r = n < 1e150 ? n * (1 + n) / (1 + exp(1.0) * n) : n / exp(1.0);
    for (int i = 0; i < MOST_STEPS; i++) {
        const double q = 1 / (1 + r), t = r * q;
        const double f = log(r / n) + t, slope = 1 + t * q, bend = t * q * (1 - 2 * t);
        const double step = -f / slope / (1 - f * bend / (2 * slope * slope));
        r *= exp(step);
        if (fabs(step) < 1e-6) /* cubic convergence: what is left is below 1e-18 */
            break;
    }
    return r;
}

double mw_rosenthal_half_width(double n)
{
    if (!(n > 0))
        return NAN;
    if (isinf(n))
        return n;
    const double r = widest_radius(n);
    return r * (sqrt(1 + 2 * r) / (1 + r));
}

/* W0(2n)/2 by the fourth-order step of F.N. Fritsch, R.E. Shafer, W.P. Crowley, Comm. ACM 16 (1973) 123-124 (from
 * memory). */
double mw_rosenthal_front(double n)
{
    if (!(n > 0))
        return NAN;
    if (isinf(n))
        return n;
    const double ln2 = log(2.0);
    const double l = n < 1e150 ? log1p(2 * n) : log(n) + ln2;
    double w = l * (1 - log1p(l) / (2 + l));
    for (int i = 0; i < MOST_STEPS; i++) {
        const double z = log(n / w) + ln2 - w, q = 2 * (1 + w) * (1 + w + 2 * z / 3);
        const double step = z / (1 + w) * ((q - z) / (q - 2 * z));
        w *= 1 + step;
        if (fabs(step) < 1e-5)
            break;
    }
    return w / 2;
}

mw_status mw_rosenthal_pool(const mw_source *source, const mw_medium *medium, mw_pool *out)
{
    *out = (mw_pool){NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN};
    const double n = mw_rosenthal_number(source, medium);
    if (!positive(n))
        return MW_BAD_VALUE;
    const double unit = 1 / inverse_length(source, medium), rise = melting_rise_K(medium);
    const double r = widest_radius(n), half = unit * (r * (sqrt(1 + 2 * r) / (1 + r)));
    out->width_m = 2 * half;
    out->depth_m = half;
    out->front_m = unit * mw_rosenthal_front(n);
    out->back_m = -unit * n;
    out->length_m = out->front_m - out->back_m;
    out->width_at_m = out->depth_at_m = -unit * r * (r / (1 + r));
    /* On the axis behind the source T - T0 = Q/(2 pi k |x|), so the gradient is rise/|x|. */
    out->gradient_K_per_m = rise / -out->back_m;
    out->cooling_rate_K_per_s = source->speed_m_per_s * out->gradient_K_per_m;
    return MW_OK;
}

/* Distance from the source, r, and r + x without the cancellation behind the source. */
static double distance(double x, double y, double z, double *r_plus_x)
{
    const double across = hypot(y, z), r = hypot(x, across);
    *r_plus_x = x < 0 ? across * (across / (r - x)) : r + x;
    return r;
}

static double rise_at(const mw_source *s, const mw_medium *m, double r, double r_plus_x)
{
    return s->absorbed_W / (2 * pi * m->conductivity_W_per_mK * r) * exp(-inverse_length(s, m) * r_plus_x);
}

double mw_rosenthal_temperature(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m)
{
    if (!field_usable(source, medium))
        return NAN;
    double r_plus_x;
    const double r = distance(x_m, y_m, z_m, &r_plus_x);
    return r == 0 ? INFINITY : medium->ambient_K + rise_at(source, medium, r, r_plus_x);
}

void mw_rosenthal_gradient(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m,
                           double grad_K_per_m[3])
{
    double r_plus_x;
    const double r = distance(x_m, y_m, z_m, &r_plus_x);
    if (!field_usable(source, medium) || r == 0) { /* no gradient is defined at the source */
        grad_K_per_m[0] = grad_K_per_m[1] = grad_K_per_m[2] = NAN;
        return;
    }
    const double rise = rise_at(source, medium, r, r_plus_x), per_length = inverse_length(source, medium);
    const double radial = -rise * (1 / r + per_length) / r;
    grad_K_per_m[0] = -rise * (x_m / r / r + per_length * (r_plus_x / r));
    grad_K_per_m[1] = radial * y_m;
    grad_K_per_m[2] = radial * z_m;
}

/* The r at which a line at distance rho from the axis is hottest: rho = r sqrt(1+2r)/(1+r). Newton on ln rho as a
 * function of ln r, slope 1 - r^2/((1+r)(1+2r)) in (1/2, 1]; the start has both limits right (r -> rho, rho^2/2). */
static double hottest_radius(double rho)
{
    double r = rho + rho * rho / 2;
    for (int i = 0; i < MOST_STEPS; i++) {
        const double f = log(r * (sqrt(1 + 2 * r) / (1 + r)) / rho);
        const double step = -f / (1 - r / (1 + r) * (r / (1 + 2 * r)));
        r *= exp(step);
        if (fabs(step) < 1e-8) /* quadratic convergence */
            break;
    }
    return r;
}

double mw_rosenthal_peak_at(const mw_source *source, const mw_medium *medium, double distance_m)
{
    if (!field_usable(source, medium) || isnan(distance_m))
        return NAN;
    if (distance_m == 0)
        return INFINITY;
    const double per_length = inverse_length(source, medium);
    const double rho = per_length * fabs(distance_m);
    if (!(rho < 1e100))
        return medium->ambient_K; /* colder than any double can tell from ambient: the rise falls as 1/rho^2 */
    const double r = hottest_radius(rho);
    /* Isotherm of the point: n = r exp(r/(1+r)), so the rise is Q v/(4 pi alpha k n). */
    return medium->ambient_K +
           source->absorbed_W * per_length / (2 * pi * medium->conductivity_W_per_mK) * exp(-r / (1 + r)) / r;
}
