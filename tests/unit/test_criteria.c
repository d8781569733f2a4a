/* SPDX-License-Identifier: GPL-3.0-or-later
 * Criteria against published values, independent quadrature (GSL) and limits. */
#include "check.h"

#include <gsl/gsl_integration.h>
#include <gsl/gsl_qrng.h>
#include <string.h>

#include "meltwright/criteria.h"

static const double pi = 3.14159265358979323846;

/* Keyhole numbers and depressions published with Gan et al. 2021 / Xie et al. 2022 (data tables of Nat. Commun. 12:2379). The column
 * of absorbed power is rounded to 0.01 W there, so the number is good to 0.005/31 = 1.6e-4; 2e-4 allowed. */
static void keyhole_number_reproduces_the_published_column(void **state)
{
    (void)state;
    static const struct { double absorbed, speed, r0_um, alpha, rho, c, rise, ke; } row[] = {
        {45.62, 0.4, 47.5, 1.02656e-5, 3920, 830, 1630, 4.127513106}, {142.17, 0.4, 47.5, 1.02656e-5, 3920, 830, 1630, 12.86357718},
        {31.40, 0.7, 47.5, 1.02656e-5, 3920, 830, 1630, 2.147941128}, {326.51, 0.9, 47.5, 1.02656e-5, 3920, 830, 1630, 19.69491279},
        {123.90, 0.4, 70, 1.02656e-5, 3920, 830, 1630, 6.266301099},  {128.49, 0.3, 44, 3.18522e-5, 2415, 1170, 622, 25.79446765},
        {73.53, 0.6, 44, 3.18522e-5, 2415, 1170, 622, 10.43743519},   {188.15, 0.3, 44, 3.18522e-5, 2415, 1170, 622, 37.7722864},
        {74.71, 0.6, 55, 4.9485e-6, 6881, 790, 1430, 4.352926239},    {274.84, 0.3, 55, 4.9485e-6, 6881, 790, 1430, 22.64557338}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        const double heat = row[i].rho * row[i].c;
        const mw_medium liquid = {row[i].alpha * heat, heat, 300, 300 + row[i].rise};
        CHECK_REL(mw_keyhole_number(row[i].absorbed, row[i].speed, 2e-6 * row[i].r0_um, &liquid), row[i].ke, 2e-4);
    }
}

/* The factors between the forms follow from their definitions: sqrt(pi), 2^0.75 and so on. */
static void every_enthalpy_form_keeps_its_factor_over_the_anchor(void **state)
{
    (void)state;
    static const double listed[] = {
#define X(name, word, definition, factor) factor,
        MW_ENTHALPY_LIST(X)
#undef X
    };
    const mw_medium m = {26.9, 6881.0 * 790.0, 293.15, 1700};
    const double anchor = mw_normalised_enthalpy(MW_ENTHALPY_ANCHOR, 77.3, 0.83, 83e-6, &m);
    const double exact[] = {1, sqrt(pi) / pow(2, 0.75), sqrt(pi), pi / pow(2, 0.75), sqrt(pi) * pow(2, 0.75), pi * pow(2, 0.75)};
    for (int f = 0; f < MW_ENTHALPY_COUNT; f++) {
        CHECK_REL(mw_normalised_enthalpy((mw_enthalpy_form)f, 77.3, 0.83, 83e-6, &m) / anchor, exact[f], 1e-13);
        CHECK_REL(listed[f], exact[f], 1e-7); /* the list prints seven decimals */
        assert_non_null(strstr(mw_enthalpy_definition((mw_enthalpy_form)f), "alpha v"));
    }
}

/* The Gaussian source's strength in its 1/e radius form is this anchor; checked against the definition written out. */
static void the_anchor_is_the_definition(void **state)
{
    (void)state;
    const double q = 70, v = 0.8, k = 26.9, rc = 6881.0 * 790.0, rise = 1430, a = 80e-6 / (2 * sqrt(2));
    const mw_medium m = {k, rc, 300, 300 + rise};
    /* Row E1 of the computed reference table: B = 5.40330204. */
    CHECK_REL(mw_normalised_enthalpy(MW_ENTHALPY_ANCHOR, q, v, 80e-6, &m), 5.40330204, 1e-8);
    CHECK_REL(mw_normalised_enthalpy(MW_ENTHALPY_ANCHOR, q, v, 80e-6, &m),
              q / (pow(pi, 1.5) * rc * rise * sqrt(k / rc * v * a * a * a)), 1e-13);
}

/* Half-ellipse values computed elsewhere to eight digits (W, D, h, L in um -> index, aligned, scattered). */
static void overlap_meets_the_reference_rows(void **state)
{
    (void)state;
    static const struct { double w, d, h, l, index, aligned, scattered; } row[] = {
        {100, 60, 100, 30, 1.25, 0.043388523, 0.024549741},
        {100, 50, 110, 40, 1.85, 0.20040044, 0.19156168},
        {120, 60, 100, 30, 0.94444444, 0, 0},
        {80, 30, 100, 40, 3.3402778, 0.5287611, 0.5287611}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        const double w = row[i].w * 1e-6, d = row[i].d * 1e-6, h = row[i].h * 1e-6, l = row[i].l * 1e-6;
        CHECK_REL(mw_overlap_index(w, d, h, l), row[i].index, 1e-8);
        CHECK_NEAR(mw_unmelted_aligned(w, d, h, l), row[i].aligned, 6e-9);
        CHECK_NEAR(mw_unmelted_scattered(w, d, h, l), row[i].scattered, 6e-9);
    }
}

typedef struct ellipse { double w, d, h, l; } ellipse;

static double bare_height(double y, void *p)
{
    const ellipse *e = p;
    const double s = 2 * y / e->w;
    return fmax(0, 1 - (s < 1 ? e->d * sqrt(1 - s * s) : 0) / e->l);
}

static double product_of_layers(double z, void *p)
{
    const ellipse *e = p;
    double f = 1;
    for (double d = z; d < e->d; d += e->l)
        f *= fmax(0, 1 - e->w / e->h * sqrt(1 - d / e->d * (d / e->d)));
    return f;
}

static double integrate(double (*f)(double, void *), ellipse *e, double lo, double hi, gsl_integration_workspace *ws)
{
    gsl_function fn = {f, e};
    double value = 0, error = 0;
    if (hi > lo)
        (void)gsl_integration_qags(&fn, lo, hi, 1e-13, 1e-11, 1000, ws, &value, &error);
    return value;
}

/* Both fractions against GSL's adaptive quadrature of their definitions, at quasi-random sections. */
static void unmelted_fractions_match_adaptive_quadrature(void **state)
{
    (void)state;
    gsl_integration_workspace *ws = gsl_integration_workspace_alloc(1000);
    gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 4);
    for (int i = 0; i < 300; i++) {
        double u[4];
        gsl_qrng_get(q, u);
        ellipse e = {60e-6 + 140e-6 * u[0], 15e-6 + 150e-6 * u[1], 50e-6 + 150e-6 * u[2], 15e-6 + 60e-6 * u[3]};
        const double edge = fmin(e.h, e.w) / 2;
        const double y1 = e.l < e.d ? fmin(edge, e.w / 2 * sqrt(1 - e.l * e.l / (e.d * e.d))) : 0;
        const double aligned = (integrate(bare_height, &e, y1, edge, ws) + fmax(0, (e.h - e.w) / 2)) * 2 / e.h;
        CHECK_NEAR(mw_unmelted_aligned(e.w, e.d, e.h, e.l), aligned, 1e-9);
        /* Panels end where a layer runs out, and where the first pool covers the hatch. */
        const double covered = e.w > e.h ? e.d * sqrt(1 - e.h / e.w * (e.h / e.w)) : 0;
        const double kink = e.d - e.l * floor(e.d / e.l), from = fmin(covered, e.l);
        const double mid = fmin(fmax(kink, from), e.l);
        const double scattered = (integrate(product_of_layers, &e, from, mid, ws) + integrate(product_of_layers, &e, mid, e.l, ws)) / e.l;
        CHECK_NEAR(mw_unmelted_scattered(e.w, e.d, e.h, e.l), scattered, 1e-9);
    }
    gsl_qrng_free(q);
    gsl_integration_workspace_free(ws);
}

/* Zero exactly where the index says the layer melts whole; scattered never above aligned; both within 0..1 and falling with the pool. */
static void unmelted_fractions_keep_their_order(void **state)
{
    (void)state;
    gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 4);
    for (int i = 0; i < 20000; i++) {
        double u[4];
        gsl_qrng_get(q, u);
        const double w = 20e-6 + 300e-6 * u[0], d = 2e-6 + 300e-6 * u[1], h = 20e-6 + 300e-6 * u[2], l = 5e-6 + 150e-6 * u[3];
        const double aligned = mw_unmelted_aligned(w, d, h, l), scattered = mw_unmelted_scattered(w, d, h, l);
        const bool whole = mw_overlap_index(w, d, h, l) <= 1;
        if (whole ? aligned > 1e-15 : !(aligned > 0))
            fail_msg("w %g d %g h %g l %g: index %g, aligned %g", w, d, h, l, mw_overlap_index(w, d, h, l), aligned);
        if (!(scattered <= aligned + 1e-12 && scattered >= 0 && aligned <= 1))
            fail_msg("w %g d %g h %g l %g: aligned %.15g scattered %.15g", w, d, h, l, aligned, scattered);
        if (d <= l)
            CHECK_NEAR(scattered, aligned, 1e-10);
        if (mw_unmelted_aligned(w * 1.1, d, h, l) > aligned + 1e-12 || mw_unmelted_aligned(w, d * 1.1, h, l) > aligned + 1e-12)
            fail_msg("w %g d %g h %g l %g: a larger pool leaves more", w, d, h, l);
    }
    gsl_qrng_free(q);
}

static void no_pool_and_missing_inputs(void **state)
{
    (void)state;
    assert_true(isinf(mw_overlap_index(0, 0, 100e-6, 30e-6)));
    assert_true(isnan(mw_overlap_index(0, 0, NAN, 30e-6)));
    assert_true(mw_unmelted_aligned(0, 0, 100e-6, 30e-6) == 1 && mw_unmelted_scattered(0, 0, 100e-6, 30e-6) == 1);
    assert_true(isnan(mw_unmelted_aligned(1e-4, 5e-5, NAN, 3e-5)) && isnan(mw_unmelted_scattered(1e-4, 5e-5, 1e-4, 0)));
    CHECK_REL(mw_effective_layer(30e-6, 0.6), 50e-6, 1e-15);
}

/* 200 W, 800 mm/s, 100 um, 30 um: 0.25 J/mm, 2.5 J/mm2, 83.33 J/mm3, 8.64 cm3/h (arithmetic). */
static void energy_densities_are_arithmetic(void **state)
{
    (void)state;
    CHECK_REL(mw_linear_energy(200, 0.8), 250, 1e-15);
    CHECK_REL(mw_areal_energy(200, 0.8, 100e-6), 2.5e6, 1e-14);
    CHECK_REL(mw_volumetric_energy(200, 0.8, 100e-6, 30e-6), 250 / 3.0 * 1e9, 1e-14);
    CHECK_REL(mw_build_rate(0.8, 100e-6, 30e-6) * 3.6e9, 8.64, 1e-14);
    const mw_medium m = {27, 7300.0 * 660, 293, 1690};
    mw_normalised_energy n;
    mw_normalise_energy(0.35 * 200, 0.8, 100e-6, 30e-6, 80e-6, &m, &n);
    /* E0* = A P / (2 v t h rho c dT): Thomas, Baxter, Todd 2016. */
    CHECK_REL(n.volume, 70 / (2 * 0.8 * 30e-6 * 100e-6 * 7300.0 * 660 * (1690 - 293)), 1e-13);
    CHECK_REL(n.minimum, n.power / (n.speed * n.layer), 1e-15);
    CHECK_REL(n.hatch, 2.5, 1e-14);
    /* "Half the absorbed energy over the energy to heat the volume": twice E0* is the melt energy ratio without latent heat. */
    CHECK_REL(mw_melt_energy_ratio(70, 0.8, 100e-6, 30e-6, 7300.0 * 660 * (1690 - 293)), 2 * n.volume, 1e-13);
}

/* Contact-angle factors computed elsewhere: angle -> L/W. Half-turn limit pi/sqrt(2/3). */
static void stable_length_meets_its_reference(void **state)
{
    (void)state;
    CHECK_REL(mw_stable_length_ratio(100 * pi / 180), 7.22188, 1e-6);
    CHECK_REL(mw_stable_length_ratio(120 * pi / 180), 4.78618, 2e-6);
    CHECK_REL(mw_stable_length_ratio(150 * pi / 180), 4.01897, 2e-6);
    CHECK_REL(mw_stable_length_ratio(pi), pi / sqrt(2.0 / 3.0), 1e-12);
    assert_true(isinf(mw_stable_length_ratio(pi / 2)) && isnan(mw_stable_length_ratio(0)) && isnan(mw_stable_length_ratio(4)));
}

/* The index is a rewriting of a logit: slope ln(L/W / ratio) on bare plate, slope ln(We / We50) + layer t/30um on powder. */
static void balling_is_a_logit(void **state)
{
    (void)state;
    const mw_balling_limits *l = mw_balling_constants();
    const mw_pool p = {.width_m = 90e-6, .length_m = 480e-6};
    const double bare = l->bare_slope * log(480.0 / 90.0 / l->bare_ratio);
    CHECK_REL(mw_balling_probability(mw_balling_index(&p, 1.1, 0, 7904, 1.593), 0), 1 / (1 + exp(-bare)), 1e-12);
    const double weber = 7904 * 1.1 * 1.1 * 90e-6 / 1.593, powder = l->weber_slope * log(weber / l->weber) + l->layer_slope * 40e-6 / l->layer_reference_m;
    CHECK_REL(mw_balling_probability(mw_balling_index(&p, 1.1, 40e-6, 7904, 1.593), 40e-6), 1 / (1 + exp(-powder)), 1e-12);
    const mw_pool none = {0};
    assert_true(mw_balling_index(&none, 1, 0, 7904, 1.6) == 0 && mw_balling_probability(0, 0) == 0);
    CHECK_REL(mw_balling_probability(1, 30e-6), 0.5, 1e-15);
    CHECK_REL(mw_balling_probability(1, 0), 0.5, 1e-15);
}

/* Worked rows of a flat pool: index and ratio -> the three probabilities (three decimals). */
static void verdict_meets_worked_rows(void **state)
{
    (void)state;
    static const struct { double i, e, pn, pl, pk; mw_verdict verdict; } row[] = {
        {1.8666, 2.7471, 0.662, 0.311, 0.027, MW_NOMINAL},          {4.5177, 0.8453, 0.130, 0.869, 0.000, MW_LACK_OF_FUSION},
        {0.5907, 8.4662, 0.455, 0.007, 0.539, MW_KEYHOLE},          {1.0821, 4.2982, 0.802, 0.074, 0.124, MW_NOMINAL},
        {0.6284, 9.5816, 0.365, 0.007, 0.628, MW_KEYHOLE}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        mw_judgement j;
        mw_judge(row[i].i, row[i].e, mw_verdict_limits(MW_POOL_FLAT), &j);
        CHECK_NEAR(j.p_nominal, row[i].pn, 6e-4);
        CHECK_NEAR(j.p_lack_of_fusion, row[i].pl, 6e-4);
        CHECK_NEAR(j.p_keyhole, row[i].pk, 6e-4);
        assert_int_equal(j.verdict, row[i].verdict);
    }
}

static void probabilities_sum_to_one_and_the_verdict_is_the_likeliest(void **state)
{
    (void)state;
    gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 2);
    for (int k = 0; k < MW_POOL_KIND_COUNT; k++)
        for (int n = 0; n < 20000; n++) {
            double u[2];
            gsl_qrng_get(q, u);
            mw_judgement j;
            mw_judge(exp(8 * u[0] - 3), exp(8 * u[1] - 3), mw_verdict_limits((mw_pool_kind)k), &j);
            CHECK_NEAR(j.p_nominal + j.p_lack_of_fusion + j.p_keyhole, 1, 4e-16 * 2);
            const double p[3] = {[MW_NOMINAL] = j.p_nominal, [MW_LACK_OF_FUSION] = j.p_lack_of_fusion, [MW_KEYHOLE] = j.p_keyhole};
            assert_true(p[j.verdict] >= fmax(p[0], fmax(p[1], p[2])));
            assert_int_equal(mw_window_distance(&j) > 0 || fmax(j.overlap_odds, j.energy_odds) == 1, j.verdict == MW_NOMINAL);
        }
    gsl_qrng_free(q);
    mw_judgement j;
    mw_judge(INFINITY, 1, mw_verdict_limits(MW_POOL_CAVITY), &j);
    assert_true(j.verdict == MW_LACK_OF_FUSION && j.p_lack_of_fusion > 0.99 && j.p_nominal > 0);
    mw_judge(1, INFINITY, mw_verdict_limits(MW_POOL_CAVITY), &j);
    assert_true(j.verdict == MW_KEYHOLE && j.p_keyhole == 1 && j.p_nominal == 0 && j.p_lack_of_fusion == 0);
}

static void every_threshold_says_what_it_rests_on(void **state)
{
    (void)state;
    for (int k = 0; k < MW_POOL_KIND_COUNT; k++) {
        const mw_limits *l = mw_verdict_limits((mw_pool_kind)k);
        assert_true(l->overlap_half > 0 && l->energy_half > 0 && strlen(l->definition) > 20 && strlen(l->data) > 20);
    }
    assert_true(strlen(mw_balling_constants()->definition) > 20 && strlen(mw_balling_constants()->data) > 20);
    assert_string_equal(mw_verdict_word(MW_NOMINAL), "nominal");
    assert_string_equal(mw_verdict_word(MW_LACK_OF_FUSION), "lack-of-fusion");
    assert_string_equal(mw_verdict_word(MW_KEYHOLE), "keyhole");
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(keyhole_number_reproduces_the_published_column),
        cmocka_unit_test(every_enthalpy_form_keeps_its_factor_over_the_anchor),
        cmocka_unit_test(the_anchor_is_the_definition),
        cmocka_unit_test(overlap_meets_the_reference_rows),
        cmocka_unit_test(unmelted_fractions_match_adaptive_quadrature),
        cmocka_unit_test(unmelted_fractions_keep_their_order),
        cmocka_unit_test(no_pool_and_missing_inputs),
        cmocka_unit_test(energy_densities_are_arithmetic),
        cmocka_unit_test(stable_length_meets_its_reference),
        cmocka_unit_test(balling_is_a_logit),
        cmocka_unit_test(verdict_meets_worked_rows),
        cmocka_unit_test(probabilities_sum_to_one_and_the_verdict_is_the_likeliest),
        cmocka_unit_test(every_threshold_says_what_it_rests_on),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
