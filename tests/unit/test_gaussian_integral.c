/* SPDX-License-Identifier: GPL-3.0-or-later
 * The Gaussian source's integral: GSL's adaptive quadrature, the stationary limit, far ahead and just below the surface. */
#include "gaussian_quadrature.h"

#include <gsl/gsl_qrng.h>
#include <gsl/gsl_sf_bessel.h>
#include <gsl/gsl_sf_erf.h>

#include "meltwright/gaussian.h"

static const double pi = 3.14159265358979323846;

static void check_against_quadrature(point at, gsl_integration_workspace *ws, int *checked)
{
    double doubt;
    const double want = quadrature(at, ws, &doubt);
    if (want < 1e-6)
        return; /* the absolute floor of the quadrature shows */
    if (doubt > 1e-9 * want)
        fail_msg("x %g y %g z %g P %g: quadrature doubts its own %g by %g", at.x, at.y, at.z, at.p, want, doubt);
    CHECK_NEAR(mw_gaussian_log_integral(at.x, at.y, at.z, at.p), log(want), 1e-13 + doubt / want);
    (*checked)++;
}

static void the_integral_matches_adaptive_quadrature(void **state)
{
    (void)state;
    gsl_integration_workspace *ws = gsl_integration_workspace_alloc(2000);
    gsl_error_handler_t *before = gsl_set_error_handler_off();
    gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 4);
    int checked = 0;
    for (int i = 0; i < 600; i++) {
        double u[4];
        gsl_qrng_get(q, u);
        const point at = {-30 * u[0] * u[0] + 2 * u[1], 3 * u[1], i % 2 ? 0.05 + 3 * u[2] : 0, 0.02 * pow(5000, u[3]), false};
        check_against_quadrature(at, ws, &checked);
    }
    assert_true(checked > 350);
    gsl_qrng_free(q);
    (void)gsl_set_error_handler(before);
    gsl_integration_workspace_free(ws);
}

/* Just below the surface behind a fast beam the integrand spans many decades of time with a narrow bump at the end of them. */
static void small_depths_behind_a_fast_beam(void **state)
{
    (void)state;
    gsl_integration_workspace *ws = gsl_integration_workspace_alloc(2000);
    gsl_error_handler_t *before = gsl_set_error_handler_off();
    int checked = 0;
    for (double p = 0.1; p < 260; p *= 2.1)
        for (double x = 0.5; x < 60; x *= 1.3)
            for (double z = 1e-9; z < 1; z *= 30) {
                const point at = {-x, 0, z, p, false};
                check_against_quadrature(at, ws, &checked);
            }
    assert_true(checked > 1000);
    /* Depth zero is the limit, from any depth that a double holds. */
    for (double z = 1e-300; z < 1e-14; z *= 1e10)
        CHECK_NEAR(mw_gaussian_log_integral(-7, 0.3, z, 90), mw_gaussian_log_integral(-7, 0.3, 0, 90), 1e-12);
    (void)gsl_set_error_handler(before);
    gsl_integration_workspace_free(ws);
}

/* Far ahead I itself underflows. Laplace's method at the floor S = A/P, A = X - P, E = 2PA, E'' = P^3/A, is right to a share of
 * about 1/(P A), the next term of its series. */
static void far_ahead_the_logarithm_holds(void **state)
{
    (void)state;
    static const double t[][2] = {{5000, 50}, {1e5, 3}, {800, 200}};
    for (size_t i = 0; i < sizeof t / sizeof *t; i++) {
        const double x = t[i][0], p = t[i][1], a = x - p, s = a / p;
        const double want = -2 * p * a - log(2 * s * sqrt(s - 1)) + 0.5 * log(2 * pi * a / (p * p * p));
        CHECK_NEAR(mw_gaussian_log_integral(x, 0, 0, p), want, 3 / (p * a) + 1e-15 * 2 * p * a);
    }
    assert_true(mw_gaussian_log_integral(INFINITY, 0, 0, 1) == -INFINITY &&
                mw_gaussian_log_integral(0, 0, -1e200, 1) == -INFINITY);
}

/* Stationary beam: surface (pi/2) exp(-q/4) I0(q/4), q = Y^2; axis (pi/2) exp(Z^2/2) erfc(Z/sqrt 2). J. Lax, J. Appl. Phys. 48
 * (1977) 3919 (from memory). The speed's own effect at P = 1e-8 is of order P (1 + distance). */
static void the_stationary_limit_is_reached(void **state)
{
    (void)state;
    for (double r = 0.01; r < 12; r *= 1.7) {
        const double q = r * r / 4;
        CHECK_NEAR(mw_gaussian_log_integral(0, r, 0, 1e-8), log(pi / 2 * gsl_sf_bessel_I0_scaled(q)), 4e-8 * (1 + r));
        CHECK_NEAR(mw_gaussian_log_integral(0, 0, r, 1e-8), log(pi / 2) + r * r / 2 + gsl_sf_log_erfc(r / sqrt(2)),
                   4e-8 * (1 + r));
        CHECK_NEAR(mw_gaussian_log_integral(r / sqrt(2), r / sqrt(2), 0, 0), mw_gaussian_log_integral(0, r, 0, 0),
                   4e-8 * (1 + r));
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(the_integral_matches_adaptive_quadrature),
        cmocka_unit_test(small_depths_behind_a_fast_beam),
        cmocka_unit_test(far_ahead_the_logarithm_holds),
        cmocka_unit_test(the_stationary_limit_is_reached),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
