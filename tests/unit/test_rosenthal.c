/* SPDX-License-Identifier: GPL-3.0-or-later
 * Moving point source: multi-precision rows, GSL's Lambert function, root finder and minimiser, the heat equation
 * itself, closed forms and limits. */
#include "reference_rows.h"

#include <gsl/gsl_deriv.h>
#include <gsl/gsl_errno.h>
#include <gsl/gsl_min.h>
#include <gsl/gsl_qrng.h>
#include <gsl/gsl_roots.h>
#include <gsl/gsl_sf_lambert.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/rosenthal.h"
#include "model/rosenthal_line.h"

static const double pi = 3.14159265358979323846;

/* Columns of tests/data/rosenthal_pools.csv (two multi-precision methods that agree to 30 digits; SI). */
enum {
    ID,
    P_W,
    V,
    D4S,
    A,
    K,
    RHO,
    CP,
    T0,
    TM,
    X1,
    Y1,
    Z1,
    T1,
    N = 22,
    WIDTH,
    DEPTH,
    LENGTH,
    FRONT,
    BACK,
    X_WIDTH,
    Z0,
    T_Z0,
    COLUMNS
};

static void setup(const double *v, mw_source *s, mw_medium *m)
{
    *s = (mw_source){v[A] * v[P_W], v[V], v[D4S] / 4};
    *m = (mw_medium){v[K], v[RHO] * v[CP], v[T0], v[TM]};
}

/* The header states 1e-12. Reached, and held here: 4e-15, some ten roundings of the inputs and of n (a temperature
 * difference of two decimals is itself uncertain by eps T/dT). */
static void every_reference_pool_is_met(void **state)
{
    (void)state;
    reference_row rows[REFERENCE_ROWS];
    const size_t count = read_reference_rows("tests/data/rosenthal_pools.csv", COLUMNS, rows);
    assert_true(count >= 30);
    for (size_t i = 0; i < count; i++) {
        const double *v = rows[i].v, bound = 4e-15;
        mw_source s;
        mw_medium m;
        mw_pool p;
        setup(v, &s, &m);
        assert_int_equal(mw_rosenthal_pool(&s, &m, &p), MW_OK);
        CHECK_REL(mw_rosenthal_number(&s, &m), v[N], bound);
        CHECK_REL(p.width_m, v[WIDTH], bound);
        CHECK_REL(p.depth_m, v[DEPTH], bound);
        CHECK_REL(p.length_m, v[LENGTH], bound);
        CHECK_REL(p.front_m, v[FRONT], bound);
        CHECK_REL(p.back_m, v[BACK], bound);
        CHECK_REL(p.width_at_m, v[X_WIDTH], bound);
        assert_true(p.depth_at_m == p.width_at_m);
        assert_true(isnan(p.peak_temperature_K) && isnan(p.peak_at_m));
    }
}

/* A relative error in the distances (1e-15) times the exponent, which is below 50 in these rows, bounds the
 * temperature. */
static void every_reference_temperature_is_met(void **state)
{
    (void)state;
    reference_row rows[REFERENCE_ROWS];
    const size_t count = read_reference_rows("tests/data/rosenthal_pools.csv", COLUMNS, rows);
    for (size_t i = 0; i < count; i++) {
        const double *v = rows[i].v;
        mw_source s;
        mw_medium m;
        setup(v, &s, &m);
        for (const double *at = v + X1; at < v + N; at += 4)
            CHECK_REL(mw_rosenthal_temperature(&s, &m, at[0], at[1], at[2]), at[3], 5e-14);
        CHECK_REL(mw_rosenthal_peak_at(&s, &m, v[Z0]), v[T_Z0], 1e-14);
    }
}

/* Ten-digit values of half width (unit 2 alpha/v), leading length and length over width; computed apart from this
 * code. */
static void the_dimensionless_table_is_met(void **state)
{
    (void)state;
    static const struct {
        double n, half, front, aspect;
    } t[] = {{0.1, 0.09159959726, 0.08445798675, 1.006871}, {1, 0.6133990185, 0.4263027510, 1.162622},
             {5, 1.728171229, 0.8727640014, 1.699127},      {10, 2.559452764, 1.102501639, 2.168921},
             {20, 3.718502746, 1.348404949, 2.870565},      {50, 5.986477309, 1.692815070, 4.317465},
             {100, 8.520675430, 1.964871634, 5.983380}};
    for (size_t i = 0; i < sizeof t / sizeof *t; i++) { /* half a unit of the last digit printed */
        const double half = mw_rosenthal_half_width(t[i].n), front = mw_rosenthal_front(t[i].n);
        CHECK_REL(half, t[i].half, 6e-10);
        CHECK_REL(front, t[i].front, 6e-10);
        CHECK_NEAR((t[i].n + front) / (2 * half), t[i].aspect, 6e-7);
    }
}

/* Steel-, titanium-, nickel- and aluminium-like constants: n, width, back, front, gradient and cooling rate at the
 * tail. */
static void the_table_in_si_is_met(void **state)
{
    (void)state;
    static const struct {
        double q, v, k, heat, rise, n, width, back, front, gradient, cooling;
    } t[] = {
        {70, 0.8, 26.9, 6881.0 * 790, 1430, 23.410798, 99.963543, 289.62087, 17.396027, 4.9374895e6, 3.9499916e6},
        {80, 1.2, 33.4, 3920.0 * 830, 1630, 13.669260, 103.84484, 233.87082, 20.729618, 6.9696594e6, 8.3635913e6},
        {78, 0.8, 22, 8440.0 * 600, 1325, 39.210934, 114.76137, 425.86914, 17.373231, 3.1112843e6, 2.4890275e6},
        {120, 1.3, 90, 2415.0 * 1170, 560, 7.7329408, 217.42336, 378.94034, 49.748304, 1.4778052e6, 1.9211467e6}};
    for (size_t i = 0; i < sizeof t / sizeof *t; i++) {
        const mw_source s = {t[i].q, t[i].v, NAN};
        const mw_medium m = {t[i].k, t[i].heat, 300, 300 + t[i].rise};
        mw_pool p;
        assert_int_equal(mw_rosenthal_pool(&s, &m, &p), MW_OK);
        CHECK_REL(mw_rosenthal_number(&s, &m), t[i].n, 7e-8); /* eight digits printed */
        CHECK_REL(p.width_m, 1e-6 * t[i].width, 7e-8);
        CHECK_REL(-p.back_m, 1e-6 * t[i].back, 7e-8);
        CHECK_REL(p.front_m, 1e-6 * t[i].front, 7e-8);
        CHECK_REL(p.gradient_K_per_m, t[i].gradient, 7e-8);
        CHECK_REL(p.cooling_rate_K_per_s, t[i].cooling, 7e-8);
    }
}

/* Both within a few units of 2.2e-16 for every n from 1e-6 to 1e6; beyond, the limit W0(y) = y - y^2 and the
 * equation. */
static void the_front_is_the_lambert_function(void **state)
{
    (void)state;
    for (double n = 1e-6; n < 1.1e6; n *= 1.013)
        CHECK_REL(mw_rosenthal_front(n), gsl_sf_lambert_W0(2 * n) / 2, 2e-15);
    for (double n = 1e-300; n < 1e-8; n *= 1e12)
        CHECK_REL(mw_rosenthal_front(n), n, 3 * n + 1e-15);
    for (double n = 1e7; n < 1e308; n *= 1e12) {
        const double w = 2 * mw_rosenthal_front(n);
        CHECK_REL(w + log(w), log(n) + log(2.0), 1e-15);
    }
}

static double widest_equation(double r, void *n)
{
    return log(r / *(double *)n) + r / (1 + r);
}

static double root(double (*f)(double, void *), double low, double high, void *with)
{
    gsl_root_fsolver *solver = gsl_root_fsolver_alloc(gsl_root_fsolver_brent);
    gsl_function g = {f, with};
    assert_int_equal(gsl_root_fsolver_set(solver, &g, low, high), GSL_SUCCESS);
    double x = NAN;
    for (int i = 0; i < 300; i++) {
        gsl_root_fsolver_iterate(solver);
        x = gsl_root_fsolver_root(solver);
        if (gsl_root_test_interval(gsl_root_fsolver_x_lower(solver), gsl_root_fsolver_x_upper(solver), 0, 1e-15) ==
            GSL_SUCCESS)
            break;
    }
    gsl_root_fsolver_free(solver);
    return x;
}

static void the_half_width_solves_its_equation(void **state)
{
    (void)state;
    for (double n = 1e-6; n < 1.1e6; n *= 1.07) {
        double with = n;
        const double r = root(widest_equation, n / exp(1.0) * 0.9, n * 1.1, &with);
        CHECK_REL(mw_rosenthal_half_width(n), r * sqrt(1 + 2 * r) / (1 + r), 5e-15);
    }
}

/* The isotherm r exp(r + x) = n at distance r from the source: minus the square of its distance from the axis. */
static double minus_square_from_axis(double r, void *n)
{
    const double x = log(*(double *)n / r) - r;
    return (x - r) * (x + r);
}

/* No equation of the widest point used: GSL looks for the largest distance from the axis along the isotherm. A
 * minimiser finds the place to the root of eps and the value to eps; near the tips' bracket no other extreme exists.
 */
static void the_half_width_is_the_largest_over_the_isotherm(void **state)
{
    (void)state;
    gsl_min_fminimizer *search = gsl_min_fminimizer_alloc(gsl_min_fminimizer_brent);
    for (double n = 0.03; n < 3e4; n *= 1.9) {
        double with = n;
        gsl_function f = {minus_square_from_axis, &with};
        /* from the leading tip to the trailing one */
        const double low = gsl_sf_lambert_W0(2 * n) / 2, high = n;
        double best = (low + high) / 2;
        for (int i = 1; i < 400; i++) {
            const double r = low * pow(high / low, i / 400.0);
            if (minus_square_from_axis(r, &with) < minus_square_from_axis(best, &with))
                best = r;
        }
        assert_int_equal(gsl_min_fminimizer_set(search, &f, best, low, high), GSL_SUCCESS);
        for (int i = 0; i < 200; i++)
            gsl_min_fminimizer_iterate(search);
        const double half = sqrt(-gsl_min_fminimizer_f_minimum(search));
        /* log(n/r) - r and x + r lose up to x/(x + r) = about r of the digits */
        CHECK_REL(mw_rosenthal_half_width(n), half, 1e-13 * (1 + n / exp(1.0)));
    }
    gsl_min_fminimizer_free(search);
}

/* Sources and media over the whole field: 20 to 1500 W, 0.02 to 10 m/s, titanium to copper. */
static void draw(gsl_qrng *sequence, mw_source *s, mw_medium *m, double *spare)
{
    double u[8];
    gsl_qrng_get(sequence, u);
    *s = (mw_source){20 * pow(75, u[0]) * (0.1 + 0.8 * u[1]), 0.02 * pow(500, u[2]), NAN};
    *m = (mw_medium){15 * pow(25, u[3]), 2.5e6 + 3.5e6 * u[4], 250 + 900 * u[5], 0};
    m->isotherm_K = m->ambient_K + 300 + 2700 * u[6];
    *spare = u[7];
}

/* Every point that the pool names lies on the isotherm, the surface is steepest along x at the tail, and dT/dx
 * vanishes where the pool is widest. An error of 4e-15 in a place times the exponent there (at most n) bounds the
 * temperature. */
static void the_pool_lies_on_its_isotherm(void **state)
{
    (void)state;
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 8);
    for (int i = 0; i < 2000; i++) {
        mw_source s;
        mw_medium m;
        mw_pool p;
        double spare, g[3];
        draw(sequence, &s, &m, &spare);
        assert_int_equal(mw_rosenthal_pool(&s, &m, &p), MW_OK);
        const double bound = 4e-15 * (2 + mw_rosenthal_number(&s, &m));
        CHECK_REL(mw_rosenthal_temperature(&s, &m, p.front_m, 0, 0), m.isotherm_K, bound);
        CHECK_REL(mw_rosenthal_temperature(&s, &m, p.back_m, 0, 0), m.isotherm_K, bound);
        CHECK_REL(mw_rosenthal_temperature(&s, &m, p.width_at_m, -p.width_m / 2, 0), m.isotherm_K, bound);
        CHECK_REL(mw_rosenthal_temperature(&s, &m, p.depth_at_m, 0, p.depth_m), m.isotherm_K, bound);
        CHECK_REL(mw_rosenthal_peak_at(&s, &m, p.depth_m), m.isotherm_K, 1e-14);
        mw_rosenthal_gradient(&s, &m, p.depth_at_m, 0, p.depth_m, g);
        CHECK_NEAR(g[0], 0, bound * fabs(g[2]));
        mw_rosenthal_gradient(&s, &m, p.back_m, 0, 0, g);
        CHECK_REL(g[0], p.gradient_K_per_m, 1e-14);
        CHECK_REL(p.cooling_rate_K_per_s, s.speed_m_per_s * g[0], 1e-14);
    }
    gsl_qrng_free(sequence);
}

typedef struct line {
    mw_source s;
    mw_medium m;
    double at[3];
    int axis, component; /* component -1: the temperature, else that of the gradient */
} line;

static double along(double x, void *with)
{
    const line *l = with;
    double p[3] = {l->at[0], l->at[1], l->at[2]}, g[3];
    p[l->axis] = x;
    if (l->component < 0)
        return mw_rosenthal_temperature(&l->s, &l->m, p[0], p[1], p[2]);
    mw_rosenthal_gradient(&l->s, &l->m, p[0], p[1], p[2], g);
    return g[l->component];
}

/* Against GSL's central differences, which give their own error; and the heat equation of a source travelling in +x,
 * laplacian T + (v/alpha) dT/dx = 0. Points up to a few pool lengths away, ahead and behind. */
static void the_gradient_and_the_heat_equation_hold(void **state)
{
    (void)state;
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 8);
    for (int i = 0; i < 1000; i++) {
        line l;
        double u, g[3], laplacian = 0, error_sum = 0;
        draw(sequence, &l.s, &l.m, &u);
        const double unit = 2 * l.m.conductivity_W_per_mK / (l.s.speed_m_per_s * l.m.volumetric_heat_J_per_m3K);
        const double r = unit * (0.3 + 4 * u), turn = 2.4 * i, across = r * sin(0.7 * i);
        l.at[0] = r * cos(0.7 * i), l.at[1] = across * cos(turn), l.at[2] = across * sin(turn);
        mw_rosenthal_gradient(&l.s, &l.m, l.at[0], l.at[1], l.at[2], g);
        const double scale = fabs(g[0]) + fabs(g[1]) + fabs(g[2]);
        for (l.axis = 0; l.axis < 3; l.axis++) {
            gsl_function f = {along, &l};
            double slope, error;
            l.component = -1;
            assert_int_equal(gsl_deriv_central(&f, l.at[l.axis], 1e-3 * r, &slope, &error), GSL_SUCCESS);
            CHECK_NEAR(g[l.axis], slope, 2 * error + 1e-9 * scale);
            l.component = l.axis;
            assert_int_equal(gsl_deriv_central(&f, l.at[l.axis], 1e-3 * r, &slope, &error), GSL_SUCCESS);
            laplacian += slope;
            error_sum += error;
        }
        CHECK_NEAR(laplacian, -2 / unit * g[0], 2 * error_sum + 1e-9 * scale / unit);
    }
    gsl_qrng_free(sequence);
}

/* Close to the source the heat through a half sphere is the absorbed power: 2 pi r^2 k |dT/dr| -> Q, error of order
 * (r/unit)^2. */
static void the_source_gives_off_its_power(void **state)
{
    (void)state;
    const mw_source s = {70, 0.8, NAN};
    const mw_medium m = {26.9, 6881.0 * 790, 300, 1730};
    double up[3], side[3], down[3];
    const double r = 1e-10;
    mw_rosenthal_gradient(&s, &m, r, 0, 0, up);
    mw_rosenthal_gradient(&s, &m, 0, r, 0, side);
    mw_rosenthal_gradient(&s, &m, 0, 0, r, down);
    CHECK_REL(-2 * pi * r * r * m.conductivity_W_per_mK * side[1], s.absorbed_W, 1e-9);
    CHECK_REL(-2 * pi * r * r * m.conductivity_W_per_mK * down[2], s.absorbed_W, 1e-9);
    /* r (x + r) lam = 2e-10 * 1e5 */
    CHECK_REL(-2 * pi * r * r * m.conductivity_W_per_mK * up[0], s.absorbed_W, 1e-9);
}

static double minus_temperature(double x, void *with)
{
    const line *l = with;
    return -mw_rosenthal_temperature(&l->s, &l->m, x, l->at[1], l->at[2]);
}

/* GSL's minimiser along x, for lines 0.01 to 100 units from the axis. */
static void the_peak_at_a_distance_is_the_largest_along_x(void **state)
{
    (void)state;
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 8);
    gsl_min_fminimizer *search = gsl_min_fminimizer_alloc(gsl_min_fminimizer_brent);
    for (int i = 0; i < 300; i++) {
        line l;
        double u;
        draw(sequence, &l.s, &l.m, &u);
        const double unit = 2 * l.m.conductivity_W_per_mK / (l.s.speed_m_per_s * l.m.volumetric_heat_J_per_m3K);
        const double far = 0.01 * pow(1e4, u) * unit;
        l.at[1] = far * cos(i), l.at[2] = far * fabs(sin(i));
        gsl_function f = {minus_temperature, &l};
        const double low = -far * (1 + far / unit), high = far;
        double best = 0;
        for (int j = 0; j < 400; j++) {
            const double x = low * pow(j / 400.0, 2);
            if (minus_temperature(x, &l) < minus_temperature(best, &l))
                best = x;
        }
        assert_int_equal(gsl_min_fminimizer_set(search, &f, best, low, high), GSL_SUCCESS);
        for (int j = 0; j < 100; j++)
            gsl_min_fminimizer_iterate(search);
        CHECK_REL(mw_rosenthal_peak_at(&l.s, &l.m, far), -gsl_min_fminimizer_f_minimum(search), 1e-13);
        CHECK_REL(mw_rosenthal_peak_at(&l.s, &l.m, -far), mw_rosenthal_peak_at(&l.s, &l.m, far), 0);
    }
    gsl_min_fminimizer_free(search);
    gsl_qrng_free(sequence);
}

/* Trailing length Q/(2 pi k dT) whatever the speed and the heat capacity. Width over the fast formula
 * sqrt(8 Q/(pi e rho c v dT)): too large by the shares listed (rounded to the digits given), towards 0 for large n;
 * width over the slow formula Q/(pi k dT) towards 1. Both in units: fast 2 half = sqrt(8 n/e), slow 2 half = 2 n. */
static void speed_and_limits_enter_as_they_must(void **state)
{
    (void)state;
    static const struct {
        double n, percent, half_digit;
    } fast[] = {{1, 40, 0.5},    {2, 23, 0.5},    {5, 11, 0.5},    {10, 6.0, 0.05},
                {20, 3.2, 0.05}, {50, 1.3, 0.05}, {100, 0.7, 0.05}};
    for (size_t i = 0; i < sizeof fast / sizeof *fast; i++)
        CHECK_NEAR(100 * (sqrt(2 * fast[i].n / exp(1.0)) / mw_rosenthal_half_width(fast[i].n) - 1), fast[i].percent,
                   fast[i].half_digit);
    CHECK_REL(mw_rosenthal_half_width(1e12), sqrt(2e12 / exp(1.0)), 1e-11);
    CHECK_REL(mw_rosenthal_half_width(1e-12), 1e-12, 2e-12);
    for (double speed = 0.01; speed < 20; speed *= 1.7) {
        const mw_source s = {90, speed, NAN};
        const mw_medium m = {31, 4e6 + 1e5 * speed, 300, 1900};
        mw_pool p;
        assert_int_equal(mw_rosenthal_pool(&s, &m, &p), MW_OK);
        CHECK_REL(-p.back_m, 90 / (2 * pi * 31 * 1600), 2e-15);
        assert_true(p.depth_m == p.width_m / 2);
    }
}

static void sizes_rise_with_the_number(void **state)
{
    (void)state;
    double half = 0, front = 0;
    for (double n = 1e-9; n < 1e9; n *= 1.001) {
        const double h = mw_rosenthal_half_width(n), f = mw_rosenthal_front(n);
        assert_true(h > half && f > front && f < h * (1 + 1e-15) && h < n);
        half = h;
        front = f;
    }
}

static void pool_refused(mw_source s, mw_medium m)
{
    mw_pool p = {0};
    assert_int_equal(mw_rosenthal_pool(&s, &m, &p), MW_BAD_VALUE);
    assert_true(isnan(mw_rosenthal_number(&s, &m)));
    const double fields[] = {p.width_m,
                             p.depth_m,
                             p.length_m,
                             p.front_m,
                             p.back_m,
                             p.width_at_m,
                             p.depth_at_m,
                             p.peak_temperature_K,
                             p.peak_at_m,
                             p.gradient_K_per_m,
                             p.cooling_rate_K_per_s};
    for (size_t i = 0; i < sizeof fields / sizeof *fields; i++)
        assert_true(isnan(fields[i]));
}

static void unusable_values_are_refused(void **state)
{
    (void)state;
    const mw_source s = {70, 0.8, NAN};
    const mw_medium m = {26.9, 5.4e6, 300, 1730};
    const double bad[] = {NAN, INFINITY, -INFINITY, 0, -1};
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++) {
        const double b = bad[i];
        pool_refused((mw_source){b, 0.8, NAN}, m);
        pool_refused((mw_source){70, b, NAN}, m);
        pool_refused(s, (mw_medium){b, 5.4e6, 300, 1730});
        pool_refused(s, (mw_medium){26.9, b, 300, 1730});
        pool_refused(s, (mw_medium){26.9, 5.4e6, b, 1730});
        pool_refused(s, (mw_medium){26.9, 5.4e6, 300, b});
        assert_true(i == 1 || (isnan(mw_rosenthal_half_width(b)) && isnan(mw_rosenthal_front(b))));
        double g[3];
        const mw_source broken = {b, 0.8, NAN};
        mw_rosenthal_gradient(&broken, &m, 1e-5, 0, 0, g);
        assert_true(isnan(g[0]) && isnan(g[1]) && isnan(g[2]));
        assert_true(isnan(mw_rosenthal_temperature(&broken, &m, 1e-5, 0, 0)) &&
                    isnan(mw_rosenthal_peak_at(&broken, &m, 1e-5)));
    }
    pool_refused(s, (mw_medium){26.9, 5.4e6, 300, 300});
}

/* At the source itself, far from it, and not anywhere. */
static void odd_places_have_sane_temperatures(void **state)
{
    (void)state;
    const mw_source s = {70, 0.8, NAN};
    const mw_medium m = {26.9, 5.4e6, 300, 1730};
    double g[3];
    assert_true(mw_rosenthal_temperature(&s, &m, 0, 0, 0) == INFINITY && mw_rosenthal_peak_at(&s, &m, 0) == INFINITY);
    mw_rosenthal_gradient(&s, &m, 0, 0, 0, g);
    assert_true(isnan(g[0]) && isnan(g[1]) && isnan(g[2]));
    assert_true(mw_rosenthal_temperature(&s, &m, 1, 0, 0) == 300 && mw_rosenthal_peak_at(&s, &m, INFINITY) == 300);
    assert_true(mw_rosenthal_peak_at(&s, &m, 1e200) == 300);
    assert_true(isnan(mw_rosenthal_temperature(&s, &m, NAN, 0, 0)) && isnan(mw_rosenthal_peak_at(&s, &m, NAN)));
}

/* 1 m behind and 60 um below a very fast source r + x = z^2/(2|x|) (1 - z^2/(4 x^2) + ...) = 1.8e-9 m counts 1e9
 * times per metre; a difference of two metres would leave 1e-7 of the rise. */
static void far_behind_no_digits_are_lost(void **state)
{
    (void)state;
    const mw_source s = {1e6, 1e3, NAN};
    const mw_medium m = {1, 2e6, 1e-3, 1000};
    const double rise = 1e6 / (2 * pi) * exp(-1e9 * (1.8e-9 - 1.62e-18)) / (1 + 1.8e-9);
    double g[3];
    CHECK_REL(mw_rosenthal_temperature(&s, &m, -1, 0, 60e-6), rise + 1e-3, 1e-14);
    mw_rosenthal_gradient(&s, &m, -1, 60e-6, 0, g);
    /* -(x/r^2 + lam (r + x)/r) = 1 - 1.8 with corrections of 2e-9 each */
    CHECK_REL(g[0], rise * (1 - 1.8), 2e-8);
    CHECK_REL(g[1], -rise * 60e-6 * 1e9, 1e-8);
}

/* Within the stated 5e-8 of the root over fourteen decades, and in both limits: n for small n, sqrt(2 n/e) for large n. */
static void half_widths_at_once_follow_the_root(void **state)
{
    (void)state;
    enum { COUNT = 1401 };
    static double n[COUNT], out[COUNT];
    for (int i = 0; i < COUNT; i++)
        n[i] = pow(10, -7 + i / 100.0);
    mw_rosenthal_half_widths(n, COUNT, out);
    for (int i = 0; i < COUNT; i++)
        CHECK_REL(out[i], mw_rosenthal_half_width(n[i]), 5e-8);
    double alone;
    mw_rosenthal_half_widths(&n[77], 1, &alone);
    assert_true(alone == out[77]);
    CHECK_REL(out[0], n[0], 1e-6);
    CHECK_REL(out[COUNT - 1], sqrt(2 * n[COUNT - 1] / exp(1)), 1e-3);
}

int main(void)
{
    gsl_set_error_handler_off();
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(half_widths_at_once_follow_the_root),
        cmocka_unit_test(every_reference_pool_is_met),
        cmocka_unit_test(every_reference_temperature_is_met),
        cmocka_unit_test(the_dimensionless_table_is_met),
        cmocka_unit_test(the_table_in_si_is_met),
        cmocka_unit_test(the_front_is_the_lambert_function),
        cmocka_unit_test(the_half_width_solves_its_equation),
        cmocka_unit_test(the_half_width_is_the_largest_over_the_isotherm),
        cmocka_unit_test(the_pool_lies_on_its_isotherm),
        cmocka_unit_test(the_gradient_and_the_heat_equation_hold),
        cmocka_unit_test(the_source_gives_off_its_power),
        cmocka_unit_test(the_peak_at_a_distance_is_the_largest_along_x),
        cmocka_unit_test(speed_and_limits_enter_as_they_must),
        cmocka_unit_test(sizes_rise_with_the_number),
        cmocka_unit_test(unusable_values_are_refused),
        cmocka_unit_test(odd_places_have_sane_temperatures),
        cmocka_unit_test(far_behind_no_digits_are_lost),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
