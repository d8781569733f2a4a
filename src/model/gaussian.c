/* SPDX-License-Identifier: GPL-3.0-or-later
 * Pool of a moving Gaussian source: peak, tips, widest and deepest section, each a small Newton problem on exact derivatives,
 * with a bracket around it so that no start can send it astray. Lengths in sigma; T. W. Eagar, N.-S. Tsai, Weld. J. 62 (1983)
 * 346-s. */
#include "meltwright/gaussian.h"

#include <math.h>
#include <stdbool.h>
#include <stddef.h>

#include "model/gaussian_integral.h"

static const double pi = 3.14159265358979323846;

enum { MOST_STEPS = 80, SCAN = 40 };
/* I falls by less than depth * sqrt(P |x|) of itself: depths below this are the surface (and z^2 does not underflow above it). */
static const double NO_DEPTH = 1e-25;
/* I < 1/distance: nothing is felt here, and squares do not overflow before it. */
static const double NOWHERE = 1e100;

/* ln(B I) carries a rounding error of some 1e-15, a share of ln s: sizes are known to that share and no better. Newton doubles
 * the digits, so a change of 2e-8 is the last that matters. A pool with ln s below 1e-12 is smaller than 2e-6 sigma, less than an
 * atom's width for any beam in use, and B itself is hardly known to that: it counts as none. */
static const double SETTLED = 2e-8, ROUNDING = 2e-14, LEAST_EXCESS = 1e-12;

static const mw_pool no_pool = {NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN};

static double usable_peclet(double peclet)
{
    return fmax(peclet, MW_LEAST_PECLET);
}

mw_status mw_gaussian_numbers(const mw_source *source, const mw_medium *medium, double *peclet, double *strength)
{
    const double k = medium->conductivity_W_per_mK, heat = medium->volumetric_heat_J_per_m3K;
    const double rise = medium->isotherm_K - medium->ambient_K;
    *peclet = *strength = NAN;
    if (!(source->absorbed_W > 0 && source->speed_m_per_s > 0 && source->sigma_m > 0 && k > 0 && heat > 0 && rise > 0))
        return MW_BAD_VALUE;
    const double p = source->speed_m_per_s * source->sigma_m * heat / (2 * k);
    const double b = source->absorbed_W / (sqrt(2 * pi) * pi * k * source->sigma_m * rise);
    if (!(p > 0 && b > 0) || !isfinite(p) || !isfinite(b) || !isfinite(medium->ambient_K))
        return MW_BAD_VALUE;
    *peclet = p;
    *strength = b;
    return MW_OK;
}

double mw_gaussian_log_integral(double x, double y, double z, double peclet)
{
    if (!(peclet >= 0) || isinf(peclet) || isnan(x) || isnan(y) || isnan(z))
        return NAN;
    if (fmax(fabs(x), fmax(fabs(y), fabs(z))) > NOWHERE)
        return -INFINITY;
    const double p = usable_peclet(peclet), depth = fabs(z);
    mw_moments m;
    if (depth < NO_DEPTH) {
        mw_gaussian_surface(x, y * y, p, &m);
        return m.log_i;
    }
    /* y enters only through A2 = (x-P)^2 + y^2: move x back until A2 is right without it, then mend the term 2P(x-P). */
    const double a = hypot(x - p, y), shift = x < p ? y * y / (a + (p - x)) : a + (x - p);
    mw_gaussian_below(x - shift, depth, p, &m);
    return m.log_i - p * shift;
}

double mw_gaussian_peak(double peclet, double *at_x)
{
    if (at_x != NULL)
        *at_x = NAN;
    if (!(peclet >= 0) || isinf(peclet))
        return NAN;
    const double p = usable_peclet(peclet);
    /* The peak lies between 0 and -0.763 sigma (fast limit); Newton on d ln I/dX from a rational guess. */
    double x = -0.763 * p / (p + 0.85), low = -1, high = 0;
    mw_moments m;
    mw_gaussian_surface(x, 0, p, &m);
    for (int i = 0; i < MOST_STEPS; i++) {
        if (m.g < 0)
            low = x; /* I still rises forward */
        else
            high = x;
        const double curvature = m.gg - m.s - m.g * m.g, step = m.g / curvature;
        double next = x + step;
        if (fabs(step) < 1e-5) { /* the rest is known to third order: below 1e-15 */
            x = next;
            m.log_i += step * (-m.g + step * curvature / 2);
            break;
        }
        if (!(next > low && next < high))
            next = (low + high) / 2;
        x = next;
        mw_gaussian_surface(x, 0, p, &m);
    }
    if (at_x != NULL)
        *at_x = x;
    return exp(m.log_i);
}

typedef struct problem {
    double p, log_b, peak_at, log_s; /* log_s = ln(B Imax) > 0 */
    double settled;                  /* relative change of a size at which Newton has nothing left to gain */
    double front, back;
} problem;

static double surface_excess(const problem *q, double x, double *slope)
{
    mw_moments m;
    mw_gaussian_surface(x, 0, q->p, &m);
    *slope = -m.g;
    return m.log_i + q->log_b;
}

/* Curvature of ln I at the peak: a quadratic gives the first guess near the threshold. */
static double near_reach(const problem *q)
{
    mw_moments m;
    mw_gaussian_surface(q->peak_at, 0, q->p, &m);
    return sqrt(2 * q->log_s / (m.s - m.gg + m.g * m.g));
}

/* Distance d = |x - peak| of a tip: Newton in d ahead (concave) and in ln d behind (ln I falls like ln d), bracketed. */
static bool find_tip(const problem *q, double side, double guess, double *tip)
{
    double inside = 0, outside = INFINITY, d = guess;
    for (int i = 0; i < MOST_STEPS; i++) {
        double slope;
        const double f = surface_excess(q, q->peak_at + side * d, &slope);
        if (f > 0)
            inside = d;
        else
            outside = d;
        const double by_d = side * slope, step = -f / by_d; /* df/dd < 0 */
        double next = side > 0 || d < 1 ? d + step : d * exp(step / d);
        /* So short a step is the end of it, also where rounding puts it just outside the bracket. */
        if (fabs(step) <= q->settled * d) {
            *tip = q->peak_at + side * next;
            return true;
        }
        if (!(next > inside && next < outside))
            next = isinf(outside) ? 2 * d : (inside + outside) / 2;
        d = next;
    }
    *tip = q->peak_at + side * d;
    return fabs(outside - inside) <= fmax(1e-12, q->settled) * d;
}

/* ---- the outline at a fixed x ----
 * across = true: q = Y^2 on the surface. Otherwise the depth Z. Both fall monotonically from positive excess to the edge. */
typedef struct outline {
    const problem *of;
    bool across;
} outline;

/* Excess ln(B I) at (x, r), and the moments there. */
static double excess(const outline *o, double x, double r, mw_moments *m)
{
    if (o->across)
        mw_gaussian_surface(x, r * r, o->of->p, m);
    else
        mw_gaussian_below(x, r, o->of->p, m);
    return m->log_i + o->of->log_b;
}

/* r(x): half width or depth of the outline at x, 0 outside the pool. *slope = dr/dx (slope may be NULL). */
static double edge_at(const outline *o, double x, double guess, double tolerance, double *slope)
{
    mw_moments m;
    mw_gaussian_surface(x, 0, o->of->p, &m);
    const double surface = m.log_i + o->of->log_b;
    if (slope != NULL)
        *slope = 0;
    if (!(surface > 0))
        return 0;
    double low = 0, high = INFINITY, r = guess > 0 ? guess : o->across ? sqrt(2 * surface / m.s) : surface;
    for (int i = 0; i < MOST_STEPS; i++) {
        const double f = excess(o, x, r, &m);
        const double by_r = -r * m.t;
        if (f > 0)
            low = r;
        else
            high = r;
        double next = r - f / by_r;
        if (fabs(next - r) < fmax(tolerance, o->of->settled) * r) {
            r = next;
            break;
        }
        if (!(next > low && next < high))
            next = isinf(high) ? 2 * r : (low + high) / 2;
        r = next;
    }
    if (slope != NULL) {
        (void)excess(o, x, r, &m);
        *slope = -m.g / (r * m.t);
    }
    return r;
}

/* Two-variable Newton on {ln(B I) = 0, I_X = 0} from (x, r), to the last digits. False when it leaves the pool or does not
 * settle on a maximum. */
static bool polish(const outline *o, double *x, double *r)
{
    double px = *x, pr = *r;
    for (int i = 0; i < 30; i++) {
        mw_moments m;
        const double f1 = excess(o, px, pr, &m), f2 = m.g;
        const double a = -m.g, b = -pr * m.t;                                  /* d f1 / d(x, r) */
        const double c = m.s - m.gg + m.g * m.g, d = -pr * (m.gt - m.g * m.t); /* d f2 / d(x, r) */
        const double det = a * d - b * c;
        const double dx = (f1 * d - f2 * b) / det, dr = (f2 * a - f1 * c) / det;
        double damp = 1;
        while (damp > 1e-3 && !(pr - damp * dr > 0.3 * pr && pr - damp * dr < 3 * pr))
            damp /= 2;
        px -= damp * dx;
        pr -= damp * dr;
        if (!(px > o->of->back && px < o->of->front && pr > 0))
            return false;
        if (fabs(dr) < o->of->settled * pr && fabs(dx) < 1e-6 * (1 + fabs(px))) {
            *x = px;
            *r = pr;
            return c > 0; /* I_XX < 0: a maximum of I over x, so of the outline */
        }
    }
    return false;
}

/* Widest or deepest x by a scan of the outline over ln distance from the peak, back from it; every local maximum is polished. */
static bool scan_for_extreme(const outline *o, double *at, double *extreme)
{
    const problem *q = o->of;
    const double nearest = fmin(1e-3, 0.01 * (q->peak_at - q->back)), farthest = q->peak_at - q->back;
    double x[SCAN + 1], r[SCAN + 1], slope[SCAN + 1];
    for (int i = 0; i <= SCAN; i++) {
        x[i] = q->peak_at - nearest * pow(farthest / nearest, (double)i / SCAN);
        r[i] = i < SCAN ? edge_at(o, x[i], i > 0 ? r[i - 1] : 0, 1e-6, &slope[i]) : 0;
    }
    slope[SCAN] = INFINITY; /* toward the trailing tip the outline closes */
    bool found = false;
    for (int i = 0; i < SCAN; i++) {
        if (!(slope[i] <= 0 && slope[i + 1] > 0) && !(i == 0 && slope[0] > 0))
            continue;
        /* dr/dx changes sign between x[i+1] (rises forward) and x[i] (falls forward): bisect a little, then polish. */
        double fall = i == 0 && slope[0] > 0 ? q->peak_at : x[i], rise = i == 0 && slope[0] > 0 ? x[0] : x[i + 1];
        double px = (fall + rise) / 2, pr = fmax(r[i], r[i + 1]), s;
        bool good = false;
        for (int k = 0; k < 60 && !good; k++) {
            px = (fall + rise) / 2;
            pr = edge_at(o, px, pr, 1e-12, &s);
            if (s > 0)
                rise = px;
            else
                fall = px;
            double tx = px, tr = pr;
            good =
                k >= 2 && polish(o, &tx, &tr) && tx > rise - 0.5 * (fall - rise) - 1e-9 && tx < fall + 0.5 * (fall - rise) + 1e-9;
            if (good) {
                px = tx;
                pr = tr;
            }
        }
        if (!found || pr > *extreme) {
            *extreme = pr;
            *at = px;
        }
        found = true;
    }
    return found;
}

/* Where a point source of the same power is widest, in sigma: a start for pools much larger than the beam. */
static void point_source_guess(const problem *q, double *x, double *r)
{
    const double n = exp(q->log_b) * sqrt(pi / 2) * q->p;
    double rho = n > 1 ? n / 2.718281828 : n;
    for (int i = 0; i < 6; i++)
        rho *= exp(-(log(rho / n) + rho / (1 + rho)) / (1 + rho / ((1 + rho) * (1 + rho))));
    *x = -rho * rho / (1 + rho) / q->p;
    *r = rho * sqrt(1 + 2 * rho) / (1 + rho) / q->p;
}

/* Far behind a fast beam the section is a spreading Gaussian: with tau = w^2 at the source's passage,
 * ln(tau (1 + tau)) + 2 + 1/tau = 2 L, L = ln(B sqrt(pi/2)/P), marks the widest section; it exists where 2L > 3.60. */
static bool rear_guess(const problem *q, double *x, double *r)
{
    const double l = q->log_b + 0.5 * log(pi / 2) - log(q->p);
    if (2 * l < 3.4)
        return false;
    double tau = fmax(0.75, exp(l - 1));
    for (int i = 0; i < 20; i++) {
        const double f = log(tau * (1 + tau)) + 2 + 1 / tau - 2 * l, d = 1 / tau + 1 / (1 + tau) - 1 / (tau * tau);
        tau = fmax(0.72, tau - f / fmax(d, 1e-2));
    }
    *x = -q->p * tau;
    const double y2 = 2 * (1 + tau) * (l - 0.5 * log(tau * (1 + tau)));
    *r = sqrt(fmax(y2, 0.1));
    return true;
}

/* Above this Peclet number the outline of a pool can have two widest places: under the beam and far behind. */
static const double two_maxima_from = 2.5;

/* How far ln s stands above the curve on which both are equally wide (fitted to the jump of the widest place; within 0.03). */
static double beyond_switch(const problem *q)
{
    const double y = log(q->p);
    return q->log_s - (1.622 + 0.674 * y + 0.002 * y * y);
}

/* Farther than this from the curve, only the wider of the two is looked for. */
static const double clear_of_switch = 0.12;

/* From a start near a maximum to that maximum. */
static bool climb(const outline *o, double *x, double *r)
{
    *r = edge_at(o, *x, *r, 0.02, NULL); /* polish does the rest */
    return *r > 0 && polish(o, x, r);
}

static bool find_extreme(const outline *o, double *at, double *extreme)
{
    const problem *q = o->of;
    const double span = q->peak_at - q->back;
    double x, r;
    point_source_guess(q, &x, &r);
    if (x > q->peak_at || x < q->back || r < 2)
        x = q->peak_at - fmin(0.4, 0.3 * span);
    r = 0;
    if (!o->across || q->p < two_maxima_from) {
        if (!climb(o, &x, &r))
            return scan_for_extreme(o, at, extreme);
        *at = x;
        *extreme = r;
        return true;
    }
    double rear_x, rear_r, beam_x = q->peak_at - fmin(0.4, 0.3 * span), beam_r = 0;
    const double side = beyond_switch(q);
    if (side > clear_of_switch && rear_guess(q, &rear_x, &rear_r) && rear_x > q->back && climb(o, &rear_x, &rear_r)) {
        *at = rear_x;
        *extreme = rear_r;
        return true;
    }
    const bool beam = climb(o, &beam_x, &beam_r);
    if (beam && side < -clear_of_switch) {
        *at = beam_x;
        *extreme = beam_r;
        return true;
    }
    const bool two = rear_guess(q, &rear_x, &rear_r) && rear_x > q->back;
    if (!two && beam) {
        *at = beam_x;
        *extreme = beam_r;
        return true;
    }
    if (two && beam && climb(o, &rear_x, &rear_r) && rear_x < beam_x - 0.2) {
        *at = rear_r > beam_r ? rear_x : beam_x;
        *extreme = fmax(rear_r, beam_r);
        return true;
    }
    return scan_for_extreme(o, at, extreme);
}

/* Everything but temperatures, in sigma; the depth only where it is wanted. */
static mw_status solve(double strength, double peclet, bool with_depth, mw_pool *out)
{
    problem q = {usable_peclet(peclet), log(strength), 0, 0, 0, 0, 0};
    q.log_s = log(mw_gaussian_peak(q.p, &q.peak_at)) + q.log_b;
    *out = no_pool;
    out->peak_at_m = q.peak_at;
    if (!(q.log_s > LEAST_EXCESS)) {
        out->width_m = out->depth_m = out->length_m = out->front_m = out->back_m = out->width_at_m = out->depth_at_m = 0;
        return MW_NO_MELT;
    }
    q.settled = fmax(SETTLED, ROUNDING / q.log_s);
    const double reach = near_reach(&q);
    const double far = strength * sqrt(pi / 2); /* trailing length of the point source, in sigma */
    bool good = find_tip(&q, 1, fmin(reach, sqrt(2 * q.log_s) + 1), &q.front);
    good = find_tip(&q, -1, reach < 1 ? reach : fmax(reach, far), &q.back) && good;
    const outline across = {&q, true}, down = {&q, false};
    double half = 0;
    good = good && find_extreme(&across, &out->width_at_m, &half);
    good = good && (!with_depth || find_extreme(&down, &out->depth_at_m, &out->depth_m));
    out->width_m = 2 * half;
    out->front_m = q.front;
    out->back_m = q.back;
    out->length_m = q.front - q.back;
    good = good && out->width_m > 0 && out->length_m > 0 && isfinite(out->width_m + out->length_m) &&
           (!with_depth || (out->depth_m > 0 && isfinite(out->depth_m)));
    return good ? MW_OK : MW_NO_CONVERGENCE;
}

mw_status mw_gaussian_pool_scaled(double strength, double peclet, mw_pool *out)
{
    *out = no_pool;
    if (!(strength > 0 && peclet >= 0) || isinf(strength) || isinf(peclet))
        return MW_BAD_VALUE;
    return solve(strength, peclet, true, out);
}

static mw_status dimensional(const mw_source *source, const mw_medium *medium, bool with_depth, mw_pool *out)
{
    double p, b;
    *out = no_pool;
    mw_status status = mw_gaussian_numbers(source, medium, &p, &b);
    if (status != MW_OK)
        return status;
    status = solve(b, p, with_depth, out);
    const double rise = medium->isotherm_K - medium->ambient_K, sigma = source->sigma_m;
    mw_moments m;
    mw_gaussian_surface(out->peak_at_m, 0, usable_peclet(p), &m);
    out->peak_temperature_K = medium->ambient_K + rise * b * exp(m.log_i);
    double *const length[] = {&out->width_m, &out->depth_m,    &out->length_m,   &out->front_m,
                              &out->back_m,  &out->width_at_m, &out->depth_at_m, &out->peak_at_m};
    const double back = out->back_m;
    for (unsigned i = 0; i < sizeof length / sizeof *length; i++)
        *length[i] *= sigma;
    if (status == MW_OK) {
        mw_gaussian_surface(back, 0, usable_peclet(p), &m);
        out->gradient_K_per_m = rise * fabs(m.g) / sigma; /* B I = 1 at the tip */
        out->cooling_rate_K_per_s = source->speed_m_per_s * out->gradient_K_per_m;
    }
    return status;
}

mw_status mw_gaussian_pool(const mw_source *source, const mw_medium *medium, mw_pool *out)
{
    return dimensional(source, medium, true, out);
}

mw_status mw_gaussian_surface_pool(const mw_source *source, const mw_medium *medium, mw_pool *out)
{
    return dimensional(source, medium, false, out);
}

double mw_gaussian_temperature(const mw_source *source, const mw_medium *medium, double x_m, double y_m, double z_m)
{
    double p, b;
    if (mw_gaussian_numbers(source, medium, &p, &b) != MW_OK)
        return NAN;
    const double s = source->sigma_m;
    const double log_i = mw_gaussian_log_integral(x_m / s, y_m / s, z_m / s, p);
    return medium->ambient_K + (medium->isotherm_K - medium->ambient_K) * b * exp(log_i);
}
