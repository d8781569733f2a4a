/* SPDX-License-Identifier: GPL-3.0-or-later
 * Heat of the moving hot cylinder: multi-precision values, GSL's Bessel functions in the series as it is usually
 * written, the published polynomial, the fast limit, properties. */
#include "check.h"

#include <gsl/gsl_sf_bessel.h>

#include "meltwright/keyhole.h"

static const double pi = 3.14159265358979323846;

/* F = 2 pi Sum eps_n (-1)^n I_n/K_n with 60 + 0.9 Pe digits or more in mpmath 1.3.0 (its own I_0, K_0, K_1, then
 * exact recurrences); up to Pe = 10 the form of the header with every I_n, K_n from mpmath gives the same 17 digits.
 */
static const struct {
    double peclet, heat;
} precise[] = {{0.0001, 0.6737080791992581204}, {0.001, 0.89456451233554596852}, {0.01, 1.3302371570558181109},
               {0.03, 1.7287206766379149346},   {0.1, 2.5315067449758950131},    {0.3, 4.0643871159943836772},
               {0.7, 6.4792627374412003103},    {1, 8.1064576188030709258},      {1.5, 10.663895687989660107},
               {1.9999, 13.110659035942758143}, {2, 13.111140780457539728},      {2.0001, 13.111622522321744074},
               {3, 17.823338741656739538},      {4, 22.393046785812992959},      {5.5, 29.093076095534838114},
               {7, 35.676304119754214949},      {10, 48.631494906246921549},     {15, 69.867036825295368185},
               {20, 90.851941964294195246},     {30, 132.4122051612366497},      {50, 214.7054081532526867},
               {75, 316.82638707590574993},     {100, 418.51550362285147396},    {200, 823.31866483700857395},
               {350, 1428.0947320186299345},    {600, 2433.6195674425654697},    {1000, 4039.8567206340829604}};

/* 1e-10 is what the header states. Held to 4e-15: in the series the largest term is ten times the sum at Pe = 2, the
 * rest less, and each carries about two units of 1.1e-16; the Chebyshev sum does not cancel. */
static void multi_precision_values_are_met(void **state)
{
    (void)state;
    for (size_t i = 0; i < sizeof precise / sizeof *precise; i++)
        CHECK_REL(mw_cylinder_heat(precise[i].peclet), precise[i].heat, 4e-15);
}

/* The form of the header, with the derivative, from GSL. *lost is the largest term over the sum. */
static double series_from_gsl(double pe, double *lost)
{
    double i[41], k[42], sum = 0, largest = 0;
    assert_int_equal(gsl_sf_bessel_In_scaled_array(0, 40, pe, i), 0);
    assert_int_equal(gsl_sf_bessel_Kn_scaled_array(0, 41, pe, k), 0);
    for (int n = 0; n <= 40 && (n < 2 || i[n] > 1e-25 * i[0]); n++) {
        const double below = n > 0 ? k[n - 1] : k[1], slope_over_k = -(below + k[n + 1]) / (2 * k[n]);
        const double term = (n == 0 ? 1 : 2) * (n % 2 ? -1 : 1) * i[n] * i[n] * exp(2 * pe) * slope_over_k;
        sum += term;
        largest = fmax(largest, fabs(term));
    }
    *lost = largest / fabs(sum);
    return -2 * pi * pe * sum;
}

static void the_series_from_gsl_agrees(void **state)
{
    (void)state;
    int compared = 0;
    for (double pe = 1e-3; pe < 9; pe *= 1.07, compared++) {
        double lost;
        const double want = series_from_gsl(pe, &lost);
        /* 16 units of 2.2e-16 for each of the four factors (the tolerance of GSL's own tests of them, from memory),
         * times what the alternating sum loses. */
        CHECK_REL(mw_cylinder_heat(pe), want, 64 * 2.2e-16 * (1 + lost));
    }
    assert_true(compared > 100);
}

/* Lankalapalli, Tu, Gartner, J. Phys. D 29 (1996) 1831 (from memory), good to 2.5 % over 0.2 to 5. */
static void the_published_polynomial_is_close(void **state)
{
    (void)state;
    for (double pe = 0.2; pe <= 5; pe *= 1.1)
        CHECK_REL(mw_cylinder_heat(pe), 2.1995 + pe * (6.2962 + pe * (-0.4994 + 0.0461 * pe)), 0.025);
}

/* Slow: a line source felt out to alpha/v, 2 pi / (ln(2/Pe) - gamma) with corrections of order Pe^2 ln Pe.
 * Fast: the strip swept is heated through, 4 Pe, and the layer at the shoulders adds a share of order Pe^(-2/3). */
static void both_limits_are_right(void **state)
{
    (void)state;
    const double gamma = 0.57721566490153286061;
    for (double pe = 1e-250; pe < 1e-4; pe *= 1e10)
        CHECK_REL(mw_cylinder_heat(pe), 2 * pi / (log(2 / pe) - gamma), 10 * pe * pe * log(1 / pe) + 1e-14);
    for (double pe = 1e3; pe < 1e12; pe *= 7)
        CHECK_REL(mw_cylinder_heat(pe), 4 * pe, 1.1 * pow(pe, -2.0 / 3));
}

/* Rises with speed, the rise slowing towards 4 but never below it; the seam at Pe = 2 does not show. */
static void it_rises_and_is_concave_across_the_seam(void **state)
{
    (void)state;
    double before = mw_cylinder_heat(0.5), slope_before = INFINITY;
    for (double pe = 0.505; pe < 60; pe += 0.005) {
        const double now = mw_cylinder_heat(pe), slope = (now - before) / 0.005;
        assert_true(slope > 4);
        assert_true(slope < slope_before + 1e-9); /* rounding of a difference of values below 300 over 0.005 */
        before = now;
        slope_before = slope;
    }
    CHECK_REL(mw_cylinder_heat(nextafter(2, 0)), mw_cylinder_heat(2), 4e-15);
}

static void no_speed_gives_no_number(void **state)
{
    (void)state;
    assert_true(isnan(mw_cylinder_heat(0)) && isnan(mw_cylinder_heat(-1)) && isnan(mw_cylinder_heat(NAN)));
    assert_true(isinf(mw_cylinder_heat(INFINITY)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(multi_precision_values_are_met),          cmocka_unit_test(the_series_from_gsl_agrees),
        cmocka_unit_test(the_published_polynomial_is_close),       cmocka_unit_test(both_limits_are_right),
        cmocka_unit_test(it_rises_and_is_concave_across_the_seam), cmocka_unit_test(no_speed_gives_no_number),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
