/* SPDX-License-Identifier: GPL-3.0-or-later
 * T. W. Eagar, N.-S. Tsai, Weld. J. 62 (1983) 346-s, lengths in sigma. */
#include "simple.h"

#include <gsl/gsl_errno.h>
#include <gsl/gsl_math.h>
#include <gsl/gsl_min.h>
#include <gsl/gsl_roots.h>
#include <math.h>

enum { MOST_STEPS = 200 };

typedef struct field {
    double strength, peclet;
    simple_clock clock;
    double front, back, peak_at;
    gsl_integration_workspace *ws;
    long integrals;
    bool failed;
} field;

typedef struct point {
    double x, y, z, peclet;
} point;

static double density(const point *p, double w2)
{
    const double s = 1 + w2, reach = p->x + p->peclet * w2;
    const double down = p->z > 0 ? p->z * p->z / (2 * w2) : 0;
    return exp(-(reach * reach + p->y * p->y) / (2 * s) - down) / s;
}

static double by_root_time(double w, void *at)
{
    return density(at, w * w);
}

static double by_time(double tau, void *at)
{
    return density(at, 2 * tau) / sqrt(2 * tau);
}

/* (T - T0) / (Tm - T0) */
static double rise(field *f, double x, double y, double z)
{
    point at = {x, y, z, f->peclet};
    gsl_function g = {f->clock == SIMPLE_TIME ? by_time : by_root_time, &at};
    double value, error;
    /* The code is no help: it also complains of round-off where the value is good. The pools are compared instead. */
    (void)gsl_integration_qagiu(&g, 0, 0, SIMPLE_QUADRATURE, SIMPLE_INTERVALS, f->ws, &value, &error);
    f->integrals++;
    return f->strength * value;
}

/* ---- golden section and bisection ---- */

/* Where the edge of the pool is looked for: along x from the peak, or across or down from (x, 0, 0). */
typedef enum ray { AHEAD, BEHIND, ACROSS, DOWN } ray;

static double rise_on(field *f, ray way, double x, double r)
{
    switch (way) {
    case AHEAD:
        return rise(f, x + r, 0, 0);
    case BEHIND:
        return rise(f, x - r, 0, 0);
    case ACROSS:
        return rise(f, x, r, 0);
    default:
        return rise(f, x, 0, r);
    }
}

/* Distance to the edge from a molten point; 0 from a solid one. */
static double bisected_edge(field *f, ray way, double x)
{
    double low = 0, high = 1;
    if (!(rise(f, x, 0, 0) > 1))
        return 0;
    while (rise_on(f, way, x, high) > 1) {
        low = high;
        high *= 2;
    }
    while (high - low > SIMPLE_SIZE * high) {
        const double middle = (low + high) / 2;
        if (rise_on(f, way, x, middle) > 1)
            low = middle;
        else
            high = middle;
    }
    return (low + high) / 2;
}

static double peak_height(field *f, ray unused, double x)
{
    (void)unused;
    return rise(f, x, 0, 0);
}

/* Largest value of `height` between two places; *at is where. */
static double golden(field *f, double (*height)(field *, ray, double), ray way, double from, double to, double *at)
{
    const double share = (sqrt(5) - 1) / 2;
    double a = from, b = to, x1 = b - share * (b - a), x2 = a + share * (b - a);
    double h1 = height(f, way, x1), h2 = height(f, way, x2);
    while (b - a > SIMPLE_PLACE * (1 + fabs(x1))) {
        if (h1 < h2) {
            a = x1;
            x1 = x2;
            h1 = h2;
            x2 = a + share * (b - a);
            h2 = height(f, way, x2);
        } else {
            b = x2;
            x2 = x1;
            h2 = h1;
            x1 = b - share * (b - a);
            h1 = height(f, way, x1);
        }
    }
    *at = h1 > h2 ? x1 : x2;
    return fmax(h1, h2);
}

static void by_bisection(field *f, double *half, double *depth)
{
    double at;
    f->front = f->peak_at + bisected_edge(f, AHEAD, f->peak_at);
    f->back = f->peak_at - bisected_edge(f, BEHIND, f->peak_at);
    *half = golden(f, bisected_edge, ACROSS, f->back, f->front, &at);
    *depth = golden(f, bisected_edge, DOWN, f->back, f->front, &at);
}

/* ---- Brent in Brent ---- */

typedef struct search {
    field *f;
    ray way;
    double r; /* distance of the line over which the minimiser moves */
    double x; /* where it last found the hottest place: the next start */
} search;

static double coldness(double x, void *v)
{
    const search *s = v;
    return -rise_on(s->f, s->way, x, s->r);
}

/* The minimiser wants a start below both ends: the last place found, else the first of a few that is. */
static bool find_start(search *s, double front, double back, double least_end, double *x, double *least)
{
    *x = s->x;
    *least = coldness(*x, s);
    for (int i = 1; i < 16 && !(*least < least_end); i++) {
        *x = front + (back - front) * i / 16;
        *least = coldness(*x, s);
    }
    return *least < least_end;
}

/* Excess of the hottest place on the line at distance r from the track. Far out the line is hottest at an end: then
 * it is all solid. */
static double excess_of_line(double r, void *v)
{
    search *s = v;
    s->r = r;
    gsl_function g = {coldness, s};
    double a = s->f->back, b = s->f->front, x, least;
    const double at_a = coldness(a, s), at_b = coldness(b, s);
    if (!find_start(s, b, a, fmin(at_a, at_b), &x, &least))
        return -fmin(at_a, at_b) - 1;
    gsl_min_fminimizer *m = gsl_min_fminimizer_alloc(gsl_min_fminimizer_brent);
    int status = gsl_min_fminimizer_set_with_values(m, &g, x, least, a, at_a, b, at_b);
    for (int i = 0; i < MOST_STEPS && status == GSL_SUCCESS; i++) {
        status = gsl_min_fminimizer_iterate(m);
        a = gsl_min_fminimizer_x_lower(m);
        b = gsl_min_fminimizer_x_upper(m);
        if (gsl_min_test_interval(a, b, SIMPLE_PLACE, SIMPLE_PLACE) == GSL_SUCCESS)
            break;
    }
    if (status != GSL_SUCCESS)
        s->f->failed = true;
    s->x = gsl_min_fminimizer_x_minimum(m);
    least = gsl_min_fminimizer_f_minimum(m);
    gsl_min_fminimizer_free(m);
    return -least - 1;
}

static double excess_of_place(double r, void *v)
{
    search *s = v;
    return rise_on(s->f, s->way, s->x, r) - 1;
}

/* Where the excess over melting passes through 0; it is positive at r = 0. */
static double brent_edge(search *s, double (*excess)(double, void *))
{
    gsl_function g = {excess, s};
    double low = 0, high = 1;
    while (excess(high, s) > 0) {
        low = high;
        high *= 2;
    }
    gsl_root_fsolver *solver = gsl_root_fsolver_alloc(gsl_root_fsolver_brent);
    int status = gsl_root_fsolver_set(solver, &g, low, high);
    double root = gsl_root_fsolver_root(solver);
    for (int i = 0; i < MOST_STEPS && status == GSL_SUCCESS; i++) {
        const double before = root;
        status = gsl_root_fsolver_iterate(solver);
        root = gsl_root_fsolver_root(solver);
        if (gsl_root_test_delta(root, before, 0, SIMPLE_SIZE) == GSL_SUCCESS)
            break;
    }
    if (status != GSL_SUCCESS)
        s->f->failed = true;
    gsl_root_fsolver_free(solver);
    return root;
}

static void by_brent(field *f, double *half, double *depth)
{
    search s = {f, AHEAD, 0, f->peak_at};
    f->front = f->peak_at + brent_edge(&s, excess_of_place);
    s.way = BEHIND;
    f->back = f->peak_at - brent_edge(&s, excess_of_place);
    s.way = ACROSS;
    *half = brent_edge(&s, excess_of_line);
    s.way = DOWN;
    s.x = f->peak_at;
    *depth = brent_edge(&s, excess_of_line);
}

bool simple_pool_compute(const mw_source *source, const mw_medium *medium, simple_way way, simple_clock clock,
                         gsl_integration_workspace *ws, simple_pool *out)
{
    const double k = medium->conductivity_W_per_mK, alpha = k / medium->volumetric_heat_J_per_m3K,
                 sigma = source->sigma_m;
    field f = {.strength = source->absorbed_W /
                           (M_SQRT2 * pow(M_PI, 1.5) * k * sigma * (medium->isotherm_K - medium->ambient_K)),
               .peclet = source->speed_m_per_s * sigma / (2 * alpha),
               .clock = clock,
               .ws = ws};
    double half = 0, depth = 0;
    const double peak = golden(&f, peak_height, AHEAD, -2, 1, &f.peak_at);
    if (peak > 1)
        (way == SIMPLE_BISECTION ? by_bisection : by_brent)(&f, &half, &depth);
    *out = (simple_pool){2 * half * sigma, depth * sigma, (f.front - f.back) * sigma, f.integrals};
    return peak > 1 && !f.failed;
}
