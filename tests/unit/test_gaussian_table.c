/* SPDX-License-Identifier: GPL-3.0-or-later
 * The pool tables against the exact solver they were made from. */
#include <gsl/gsl_qrng.h>
#include <string.h>

#include "check.h"
#include "meltwright/gaussian.h"
#include "meltwright/keyhole.h"
#include "model/gaussian_table.h"

static const double stated = 1e-5;

static double exact(mw_table_quantity q, const mw_pool *p)
{
    return q == MW_TABLE_WIDTH ? p->width_m : q == MW_TABLE_DEPTH ? p->depth_m : p->length_m;
}

static void compare(double peclet, double s)
{
    mw_pool p;
    static mw_table_line line;
    assert_int_equal(mw_gaussian_pool_scaled(s / mw_gaussian_peak(peclet, NULL), peclet, &p), MW_OK);
    for (int q = 0; q < MW_TABLE_QUANTITIES; q++) {
        double got;
        assert_true(mw_table_line_make((mw_table_quantity)q, peclet, &line));
        mw_table_line_eval(&line, (mw_table_quantity)q, &s, 1, &got);
        const double want = exact((mw_table_quantity)q, &p);
        if (!(fabs(got / want - 1) <= stated))
            fail_msg("quantity %d at Peclet %.9g, s %.9g: got %.12g, want %.12g, error/bound %.3g", q, peclet, s, got, want, fabs(got / want - 1) / stated);
    }
}

static double between(double lo, double hi, double u)
{
    return lo * pow(hi / lo, u);
}

static void within_the_stated_error_over_the_whole_range(void **state)
{
    (void)state;
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 2);
    for (int i = 0; i < 6000; i++) {
        double u[2];
        gsl_qrng_get(sequence, u);
        const double peclet = between(MW_TABLE_LEAST_PECLET, MW_TABLE_MOST_PECLET, u[0]);
        if (i % 3 == 0) /* close to the edge of melting */
            compare(peclet, 1 + between(1e-6, 1, u[1]));
        else
            compare(peclet, between(1.0001, MW_TABLE_MOST_S, u[1]));
    }
    gsl_qrng_free(sequence);
}

/* Two widest places compete above Peclet 2.88, from s = 10.8 on; their heights cross at ln s = 1.622 + 0.674 ln P. */
static void within_it_around_the_switch_of_the_widest_place(void **state)
{
    (void)state;
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 2);
    for (int i = 0; i < 3000; i++) {
        double u[2];
        gsl_qrng_get(sequence, u);
        const double peclet = i % 2 == 0 ? 2.88 * exp(0.1 * (2 * u[0] - 1)) : between(2.88, MW_TABLE_MOST_PECLET, u[0]);
        compare(peclet, exp(1.622 + 0.674 * log(peclet) + 0.06 * (2 * u[1] - 1)));
    }
    gsl_qrng_free(sequence);
}

static void corners_are_covered_and_beyond_them_nothing_is(void **state)
{
    (void)state;
    static mw_table_line line;
    compare(MW_TABLE_LEAST_PECLET, MW_TABLE_MOST_S);
    compare(MW_TABLE_MOST_PECLET, MW_TABLE_MOST_S);
    compare(MW_TABLE_LEAST_PECLET, 1.001);
    compare(MW_TABLE_MOST_PECLET, 1.001);
    assert_false(mw_table_line_make(MW_TABLE_WIDTH, 0.999 * MW_TABLE_LEAST_PECLET, &line));
    assert_false(mw_table_line_make(MW_TABLE_WIDTH, 1.001 * MW_TABLE_MOST_PECLET, &line));
    assert_false(mw_table_line_make(MW_TABLE_WIDTH, NAN, &line));
    for (int q = 0; q < MW_TABLE_QUANTITIES; q++) {
        const double s[] = {0, 0.5, 1, 1.01 * MW_TABLE_MOST_S, 5};
        double out[5];
        assert_true(mw_table_line_make((mw_table_quantity)q, 1, &line));
        mw_table_line_eval(&line, (mw_table_quantity)q, s, 5, out);
        assert_true(out[0] == 0 && out[1] == 0 && out[2] == 0 && isnan(out[3]) && out[4] > 0);
        mw_table_line_eval(&line, (mw_table_quantity)q, s, 0, out); /* nothing to do is no error */
    }
}

/* A value does not depend on its neighbours or on its place in the block. */
static void every_value_stands_alone(void **state)
{
    (void)state;
    enum { N = 203 };
    static mw_table_line line;
    double s[N], together[N], alone;
    for (int i = 0; i < N; i++)
        s[i] = 0.8 * pow(3000, (i * 89 % N) / (double)N); /* in no order */
    for (int q = 0; q < MW_TABLE_QUANTITIES; q++)
        for (double peclet = 0.01; peclet < 100; peclet *= 3) {
            assert_true(mw_table_line_make((mw_table_quantity)q, peclet, &line));
            mw_table_line_eval(&line, (mw_table_quantity)q, s, N, together);
            for (int i = 0; i < N; i++) {
                mw_table_line_eval(&line, (mw_table_quantity)q, &s[i], 1, &alone);
                assert_memory_equal(&alone, &together[i], sizeof alone);
            }
        }
}

static void curves_follow_their_functions(void **state)
{
    (void)state;
    for (int i = 0; i <= 4000; i++) {
        const double peclet = between(MW_TABLE_LEAST_PECLET / 10 * 1.000001, MW_TABLE_MOST_PECLET * 2 / 1.000001, i / 4000.0);
        CHECK_REL(mw_table_peak(peclet), mw_gaussian_peak(peclet, NULL), 1e-11);
        CHECK_REL(mw_table_cylinder(peclet), mw_cylinder_heat(peclet), 1e-11);
    }
    assert_true(isnan(mw_table_peak(1e-6)) && isnan(mw_table_peak(1e4)) && isnan(mw_table_peak(NAN)) && isnan(mw_table_cylinder(-1)));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(within_the_stated_error_over_the_whole_range),
        cmocka_unit_test(within_it_around_the_switch_of_the_widest_place),
        cmocka_unit_test(corners_are_covered_and_beyond_them_nothing_is),
        cmocka_unit_test(every_value_stands_alone),
        cmocka_unit_test(curves_follow_their_functions),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
