/* SPDX-License-Identifier: GPL-3.0-or-later
 * Plan, evaluate, margins, sweep: consistency of the whole with its parts, and order of published porosity. */
#include "check.h"

#include <gsl/gsl_qrng.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/gaussian.h"
#include "meltwright/rosenthal.h"
#include "meltwright/study.h"

static mw_alloy *steel;

static int load(void **state)
{
    (void)state;
    mw_error err;
    const int failed = mw_alloy_load("alloys/316L.json", &steel, &err) != MW_OK;
    if (failed)
        fprintf(stderr, "%s\n", err.text);
    return failed;
}

static int unload(void **state)
{
    (void)state;
    mw_alloy_free(steel);
    return 0;
}

static mw_plan plan_for(mw_model model)
{
    mw_plan plan;
    mw_error err;
    if (mw_plan_make(steel, model, NULL, 293.15, &plan, &err) != MW_OK)
        fail_msg("%s", err.text);
    return plan;
}

static const mw_overrides constants = {0.35, 26.9, 6881, 790, 1730};

/* With all constants given nothing of the card may enter: the pool is the bare model's, to the last bit. */
static void a_check_case_uses_its_constants_as_they_stand(void **state)
{
    (void)state;
    mw_error err;
    const mw_medium medium = {26.9, 6881.0 * 790.0, 300, 1730};
    const mw_source source = {0.35 * 200, 0.8, 20e-6};
    const mw_setting s = {200, 0.8, NAN, 0, 80e-6, 300};
    for (int with_card = 0; with_card < 2; with_card++) {
        mw_plan plan;
        mw_result r;
        mw_pool want;
        assert_int_equal(mw_plan_make(with_card ? steel : NULL, MW_MODEL_GAUSSIAN, &constants, 300, &plan, &err), MW_OK);
        assert_true(plan.check_case);
        assert_int_equal(mw_evaluate(&plan, &s, true, &r, &err), MW_OK);
        assert_int_equal(mw_gaussian_pool(&source, &medium, &want), MW_OK);
        assert_memory_equal(&r.pool, &want, sizeof want);
        assert_true(isnan(r.width_lo_m) && !r.judged);
        assert_int_equal(mw_plan_make(with_card ? steel : NULL, MW_MODEL_ROSENTHAL, &constants, 300, &plan, &err), MW_OK);
        assert_int_equal(mw_evaluate(&plan, &s, true, &r, &err), MW_OK);
        assert_int_equal(mw_rosenthal_pool(&source, &medium, &want), MW_OK);
        assert_true(r.pool.width_m == want.width_m && r.pool.length_m == want.length_m);
    }
}

static void an_override_replaces_its_part_alone(void **state)
{
    (void)state;
    mw_error err;
    const mw_plan base = plan_for(MW_MODEL_DEFAULT);
    mw_overrides o = mw_no_overrides;
    mw_plan plan;
    o.absorptivity = 0.5;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293.15, &plan, &err), MW_OK);
    assert_true(plan.absorptivity == 0.5 && plan.melt.volumetric_heat_J_per_m3K == base.melt.volumetric_heat_J_per_m3K);
    o = mw_no_overrides;
    o.conductivity_W_per_mK = 20;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293.15, &plan, &err), MW_OK);
    assert_true(plan.melt.conductivity_W_per_mK == 20 && plan.melt.volumetric_heat_J_per_m3K == base.melt.volumetric_heat_J_per_m3K);
    o = mw_no_overrides;
    o.density_kg_per_m3 = 2 * base.density_cold_kg_per_m3;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293.15, &plan, &err), MW_OK);
    CHECK_REL(plan.melt.volumetric_heat_J_per_m3K, 2 * base.melt.volumetric_heat_J_per_m3K, 1e-14);
    /* A heat capacity leaves the latent heat in place: rho (c dT + Lf) / dT. */
    o = mw_no_overrides;
    o.heat_capacity_J_per_kgK = 600;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293.15, &plan, &err), MW_OK);
    const double rise = base.melt.isotherm_K - 293.15, latent = mw_property_at(&steel->property[MW_PROP_LATENT_FUSION], 0);
    CHECK_REL(plan.melt.volumetric_heat_J_per_m3K, base.density_cold_kg_per_m3 * (600 + latent / rise), 1e-13);
    o = mw_no_overrides;
    o.melting_point_K = 1800;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293.15, &plan, &err), MW_OK);
    assert_true(plan.melt.isotherm_K == 1800);
}

static void plans_that_make_no_sense_are_refused(void **state)
{
    (void)state;
    mw_plan plan;
    mw_error err;
    assert_int_equal(mw_plan_make(NULL, MW_MODEL_GAUSSIAN, NULL, 293, &plan, &err), MW_BAD_USAGE);
    assert_non_null(strstr(err.text, "all five"));
    assert_int_equal(mw_plan_make(NULL, MW_MODEL_DEFAULT, &constants, 293, &plan, &err), MW_BAD_USAGE);
    assert_non_null(strstr(err.text, "boiling"));
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, NULL, 1700, &plan, &err), MW_BAD_VALUE);
    assert_non_null(strstr(err.text, "preheat 1427 C"));
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, NULL, NAN, &plan, &err), MW_BAD_VALUE);
    assert_int_equal(mw_plan_make(NULL, MW_MODEL_GAUSSIAN, &constants, 1800, &plan, &err), MW_BAD_VALUE);
    mw_overrides o = mw_no_overrides;
    o.melting_point_K = 3500;
    assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &o, 293, &plan, &err), MW_BAD_VALUE);
    assert_non_null(strstr(err.text, "below the boiling"));
    const double bad[] = {-1, 0, 1e9, INFINITY};
    for (size_t i = 0; i < 4; i++)
        for (int k = 0; k < 5; k++) {
            mw_overrides b = mw_no_overrides;
            double *const field[] = {&b.absorptivity, &b.conductivity_W_per_mK, &b.density_kg_per_m3, &b.heat_capacity_J_per_kgK, &b.melting_point_K};
            *field[k] = bad[i];
            assert_int_equal(mw_plan_make(steel, MW_MODEL_DEFAULT, &b, 293, &plan, &err), MW_BAD_VALUE);
            assert_non_null(strstr(err.text, "is outside"));
        }
    for (int m = 0; m < MW_MODEL_COUNT; m++)
        assert_true(strlen(mw_model_word((mw_model)m)) > 3 && strlen(mw_model_description((mw_model)m)) > 10);
}

static void settings_outside_reason_are_refused_by_name(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    static const struct { mw_setting s; const char *part; } row[] = {
        {{0, 0.8, 1e-4, 3e-5, 8e-5, 293.15}, "power 0 W is outside what can be right: 1 to 5000 W"},
        {{NAN, 0.8, 1e-4, 3e-5, 8e-5, 293.15}, "power"},
        {{200, -0.8, 1e-4, 3e-5, 8e-5, 293.15}, "speed -800 mm/s is outside what can be right: 1 to 30000 mm/s"},
        {{200, 800, 1e-4, 3e-5, 8e-5, 293.15}, "speed 800000 mm/s"},
        {{200, 0.8, 1e-4, 3e-5, 80, 293.15}, "beam diameter D4sigma 8e+07 um"},
        {{200, 0.8, 0.1, 3e-5, 8e-5, 293.15}, "hatch 100000 um"},
        {{200, 0.8, 0, 3e-5, 8e-5, 293.15}, "hatch 0 um"},
        {{200, 0.8, 1e-4, -3e-5, 8e-5, 293.15}, "or 0 for bare plate"},
        {{200, 0.8, 1e-4, 3e-5, 8e-5, INFINITY}, "preheat"},
        {{200, 0.8, 1e-4, 3e-5, 8e-5, 400}, "preheat is not the plan's"}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        mw_result r;
        mw_error err = {MW_OK, ""};
        assert_true(mw_evaluate(&plan, &row[i].s, false, &r, &err) < 0);
        if (strstr(err.text, row[i].part) == NULL)
            fail_msg("row %zu: %s", i, err.text);
    }
}

static void outside_the_record_is_named_and_flagged(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    char text[400];
    const mw_setting inside = {200, 0.8, 1e-4, 3e-5, 8e-5, 293.15}, out = {900, 0.05, 3e-5, 9e-5, 2e-4, 293.15};
    assert_int_equal(mw_setting_outside(&plan, &inside, text, sizeof text), 0);
    assert_true(mw_setting_outside(&plan, &out, text, sizeof text) == strlen(text));
    assert_string_equal(text, "power 900 W is above 600 W, speed 50 mm/s is below 100 mm/s, beam diameter D4sigma 200 um is above 140 um, "
                              "hatch 30 um is below 40 um, layer 90 um is above 60 um");
    char shorter[20];
    assert_true(mw_setting_outside(&plan, &out, shorter, sizeof shorter) > sizeof shorter && strlen(shorter) == 19);
    mw_result a, b;
    assert_int_equal(mw_evaluate(&plan, &inside, false, &a, NULL), MW_OK);
    assert_int_equal(mw_evaluate(&plan, &out, false, &b, NULL), MW_OUTSIDE_CHECKED);
    assert_true(b.pool.width_m > 0);
    /* Less sure, but of the same verdict. */
    mw_judgement sure = b.judgement;
    mw_judge_with_doubt(&sure, 1);
    assert_int_equal(sure.verdict, b.judgement.verdict);
    CHECK_NEAR(b.judgement.p_nominal + b.judgement.p_lack_of_fusion + b.judgement.p_keyhole, 1, 1e-15);
    assert_true(fmax(b.judgement.p_nominal, fmax(b.judgement.p_lack_of_fusion, b.judgement.p_keyhole)) <
                fmax(sure.p_nominal, fmax(sure.p_lack_of_fusion, sure.p_keyhole)));
    /* Wider where there is no record: by the ratio of the ends. */
    assert_true(b.width_hi_m / b.width_lo_m > a.width_hi_m / a.width_lo_m);
}

static void intervals_hold_the_prediction_and_keep_their_order(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 3);
    for (int i = 0; i < 2000; i++) {
        double u[3];
        gsl_qrng_get(q, u);
        const mw_setting s = {50 + 550 * u[0], 0.1 + 2.4 * u[1], 1e-4, 3e-5, (40 + 100 * u[2]) * 1e-6, 293.15};
        mw_result r;
        const mw_status status = mw_evaluate(&plan, &s, false, &r, NULL);
        assert_true(status == MW_OK || status == MW_NO_MELT);
        assert_true(r.width_lo_m <= r.pool.width_m && r.pool.width_m <= r.width_hi_m);
        assert_true(r.depth_lo_m <= r.pool.depth_m && r.pool.depth_m <= r.depth_hi_m);
        assert_true(r.length_lo_m <= r.pool.length_m && r.pool.length_m <= r.length_hi_m);
        CHECK_NEAR(r.judgement.p_nominal + r.judgement.p_lack_of_fusion + r.judgement.p_keyhole, 1, 1e-15);
        assert_true(r.p_balling >= 0 && r.p_balling <= 1);
    }
    gsl_qrng_free(q);
}

static double spread(const mw_plan *plan, const mw_setting *s, bool of_depth)
{
    mw_result r;
    assert_true(mw_evaluate(plan, s, false, &r, NULL) >= 0);
    return of_depth ? log(r.depth_hi_m / r.depth_lo_m) : log(r.width_hi_m / r.width_lo_m);
}

static void doubt_about_the_beam_widens_the_intervals(void **state)
{
    (void)state;
    mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const mw_setting s = {200, 0.8, 1e-4, 3e-5, 8e-5, 293.15};
    const double width = spread(&plan, &s, false), depth = spread(&plan, &s, true);
    plan.beam_uncertainty_pct = 20; /* as published beams: nothing is added */
    assert_true(spread(&plan, &s, false) == width && spread(&plan, &s, true) == depth);
    double before_w = width, before_d = depth;
    for (double pct = 25; pct <= 100; pct += 25) {
        plan.beam_uncertainty_pct = pct;
        assert_true(spread(&plan, &s, false) > before_w && spread(&plan, &s, true) > before_d);
        before_w = spread(&plan, &s, false);
        before_d = spread(&plan, &s, true);
    }
    assert_true(before_d / depth > before_w / width); /* depth goes as one over the beam, width hardly */
}

/* What a card estimates with a large uncertainty shows in the intervals: the same pool under a doubtful conductivity or heat capacity. */
static void doubt_in_the_card_widens_the_intervals(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const mw_setting s = {120, 0.8, 1e-4, 3e-5, 8e-5, 293.15};
    static const mw_property_id doubtful[] = {MW_PROP_COUPLING, MW_PROP_CONDUCTIVITY_SOLID, MW_PROP_HEAT_SOLID};
    for (size_t i = 0; i < 3; i++) {
        mw_alloy other = *plan.alloy;
        mw_plan unsure = plan;
        other.property[doubtful[i]].uncertainty_pct = 30;
        unsure.alloy = &other;
        assert_true(spread(&unsure, &s, true) > 1.001 * spread(&plan, &s, true) && spread(&unsure, &s, false) > 1.0001 * spread(&plan, &s, false));
    }
}

/* Every alloy that is shipped gives pools at every preheat its card allows, hotter plates larger ones. */
static void every_shipped_alloy_gives_pools(void **state)
{
    (void)state;
    static const char *const folder[] = {"alloys"};
    char **name;
    size_t n;
    assert_int_equal(mw_alloy_names(folder, 1, &name, &n, NULL), MW_OK);
    assert_true(n >= 16);
    for (size_t i = 0; i < n; i++) {
        mw_alloy *alloy;
        mw_error err = {MW_OK, ""};
        if (mw_alloy_find(name[i], folder, 1, &alloy, &err) != MW_OK)
            fail_msg("%s: %s", name[i], err.text);
        double before = 0;
        for (double preheat_K = 293.15; preheat_K < 700; preheat_K += 200) {
            mw_plan plan;
            mw_result r;
            const mw_setting s = {900, 0.3, 1e-4, 3e-5, 8e-5, preheat_K}; /* melts even copper */
            if (mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, preheat_K, &plan, &err) != MW_OK || mw_evaluate(&plan, &s, false, &r, &err) < 0)
                fail_msg("%s at %.0f K: %s", name[i], preheat_K, err.text);
            if (!(r.pool.width_m > before && r.pool.depth_m > 0 && r.pool.length_m >= r.pool.width_m / 2))
                fail_msg("%s at %.0f K: width %.6g m after %.6g, depth %.6g, length %.6g", name[i], preheat_K, r.pool.width_m, before, r.pool.depth_m,
                         r.pool.length_m);
            before = r.pool.width_m;
        }
        mw_alloy_free(alloy);
    }
    mw_names_free(name, n);
}

static mw_verdict verdict_at(const mw_plan *plan, mw_setting s)
{
    mw_result r;
    assert_true(mw_evaluate(plan, &s, false, &r, NULL) >= 0);
    return r.judgement.verdict;
}

/* Going a hair beyond a margin must change the verdict, staying a hair inside must not: every margin of 60 nominal settings. */
static void margins_are_where_the_verdict_flips(void **state)
{
    (void)state;
    int tested = 0;
    for (int model = 0; model < MW_MODEL_COUNT; model++) {
        const mw_plan plan = plan_for((mw_model)model);
        gsl_qrng *q = gsl_qrng_alloc(gsl_qrng_sobol, 4);
        for (int i = 0, found = 0; i < 2000 && found < 20; i++) {
            double u[4];
            gsl_qrng_get(q, u);
            const mw_setting s = {80 + 400 * u[0], 0.2 + 2 * u[1], (60 + 80 * u[2]) * 1e-6, (20 + 40 * u[3]) * 1e-6, 80e-6, 293.15};
            if (verdict_at(&plan, s) != MW_NOMINAL)
                continue;
            found++;
            mw_result r;
            assert_true(mw_evaluate(&plan, &s, true, &r, NULL) >= 0);
            const double hair = 1e-4; /* as stated of an edge */
            const struct { double pct; int power, up; } m[] = {{r.margins.power_down_pct, 1, 0}, {r.margins.power_up_pct, 1, 1},
                                                               {r.margins.speed_down_pct, 0, 0}, {r.margins.speed_up_pct, 0, 1}};
            for (int k = 0; k < 4; k++) {
                if (isnan(m[k].pct))
                    continue;
                const double factor = m[k].up ? 1 + m[k].pct / 100 : 1 - m[k].pct / 100, beyond = m[k].up ? 1 + hair : 1 - hair;
                mw_setting in = s, out = s;
                *(m[k].power ? &in.power_W : &in.speed_m_per_s) *= factor / beyond;
                *(m[k].power ? &out.power_W : &out.speed_m_per_s) *= factor * beyond;
                if (verdict_at(&plan, in) != MW_NOMINAL || verdict_at(&plan, out) == MW_NOMINAL)
                    fail_msg("model %d, %g W %g m/s: margin %d of %g %% does not flip", model, s.power_W, s.speed_m_per_s, k, m[k].pct);
                tested++;
            }
        }
        gsl_qrng_free(q);
    }
    assert_true(tested > 100);
}

static void margins_of_what_is_not_nominal_are_zero(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const mw_setting s = {100, 2.4, 140e-6, 60e-6, 80e-6, 293.15};
    mw_result r;
    assert_int_equal(mw_evaluate(&plan, &s, true, &r, NULL), MW_OK);
    assert_int_equal(r.judgement.verdict, MW_LACK_OF_FUSION);
    assert_true(r.margins.power_up_pct == 0 && r.margins.power_down_pct == 0 && r.margins.speed_up_pct == 0 && r.margins.speed_down_pct == 0);
}

/* Every turn of an outlook, for nominal and other settings: just before it the verdict is the old one, just past it the one it names, and in
 * power and speed it agrees with the margins. */
static void an_outlook_names_the_verdict_beyond_each_turn(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const mw_setting settings[] = {{200, 0.8, 110e-6, 40e-6, 80e-6, 293.15}, {120, 1.5, 120e-6, 50e-6, 80e-6, 293.15}, {380, 0.3, 80e-6, 30e-6, 80e-6, 293.15}};
    const size_t offset[4] = {offsetof(mw_setting, power_W), offsetof(mw_setting, speed_m_per_s), offsetof(mw_setting, hatch_m), offsetof(mw_setting, layer_m)};
    for (size_t i = 0; i < 3; i++) {
        mw_result r;
        mw_outlook o;
        assert_true(mw_evaluate(&plan, &settings[i], true, &r, NULL) >= 0);
        assert_int_equal(mw_outlook_at(&plan, &r, &o), MW_OK);
        const mw_turn *const turn[4] = {o.power, o.speed, o.hatch, o.layer};
        int found = 0;
        for (int k = 0; k < 4; k++)
            for (int up = 0; up < 2; up++) {
                const mw_turn *t = &turn[k][up];
                if (isnan(t->at))
                    continue;
                found++;
                const double here = *(const double *)((const char *)&settings[i] + offset[k]), hair = up ? 1e-4 : -1e-4;
                mw_setting before = settings[i], past = settings[i];
                *(double *)((char *)&before + offset[k]) = t->at * (1 - hair);
                *(double *)((char *)&past + offset[k]) = t->at * (1 + hair);
                assert_true(up ? t->at > here : t->at < here);
                CHECK_REL(t->change_pct, 100 * (t->at / here - 1), 1e-9);
                assert_int_equal(verdict_at(&plan, past), t->beyond);
                assert_int_equal(verdict_at(&plan, before) == MW_NOMINAL, r.judgement.verdict == MW_NOMINAL);
                assert_true((t->beyond == MW_NOMINAL) != (r.judgement.verdict == MW_NOMINAL));
            }
        assert_true(found >= (r.judgement.verdict == MW_NOMINAL ? 6 : 2));
        if (r.judgement.verdict == MW_NOMINAL) {
            CHECK_NEAR(-o.power[0].change_pct, r.margins.power_down_pct, 1e-6);
            CHECK_NEAR(o.speed[1].change_pct, r.margins.speed_up_pct, 1e-6);
        }
    }
    mw_result alone;
    mw_outlook o;
    const mw_setting track = {200, 0.8, NAN, 0, 80e-6, 293.15};
    assert_true(mw_evaluate(&plan, &track, true, &alone, NULL) >= 0);
    assert_int_equal(mw_outlook_at(&plan, &alone, &o), MW_BAD_USAGE);
}

/* Published porosity of 316L against speed, minimum between two rising ends: 0.139 m/s 3.2 %, 0.174 2.15 %, 0.277 0.167 %, 0.350 0.74 %,
 * 0.413 3.75 %, 0.699 9.3 %; beam 70 um, hatch 124, layer 50; least absorbed power 34.2 W (tables published with Xie et al. 2022).
 * An order, not values: odds of lack of fusion rise with speed, of too much energy fall, and the best speed lies between the ends. */
static void the_order_of_published_porosity_is_kept(void **state)
{
    (void)state;
    mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const double speed[] = {0.139, 0.174, 0.277, 0.350, 0.413, 0.699};
    double p[6], lof_before = -1, energy_before = INFINITY;
    for (int i = 0; i < 6; i++) {
        const mw_setting s = {34.2 / 0.35, speed[i], 124e-6, 50e-6, 70e-6, 293.15};
        mw_result r;
        assert_true(mw_evaluate(&plan, &s, false, &r, NULL) >= 0);
        assert_true(r.judgement.overlap_odds > lof_before && r.judgement.energy_odds < energy_before);
        lof_before = r.judgement.overlap_odds;
        energy_before = r.judgement.energy_odds;
        p[i] = r.judgement.p_nominal;
    }
    const double best = fmax(fmax(p[1], p[2]), fmax(p[3], p[4]));
    assert_true(best > p[0] && best > p[5]);
    assert_true(p[2] > p[5] && p[3] > p[5]);
}

typedef struct rows { mw_result *row; size_t n; } rows;

static mw_status keep(void *to, const mw_result *r)
{
    rows *all = to;
    all->row[all->n++] = *r;
    return MW_OK;
}

static const double powers[] = {120, 180, 240, 300}, speeds[] = {0.5, 0.8, 1.2}, hatches[] = {80e-6, 110e-6}, layers[] = {30e-6, 50e-6};

static rows swept(const mw_plan *plan, int threads)
{
    const mw_grid g = {powers, speeds, hatches, layers, 4, 3, 2, 2, 80e-6, 293.15, 0, 0};
    rows all = {calloc(48, sizeof(mw_result)), 0};
    mw_error err;
    if (mw_sweep(plan, &g, true, threads, keep, &all, &err) != MW_OK)
        fail_msg("%s", err.text);
    assert_int_equal(all.n, 48);
    return all;
}

static void same_margin(double a, double b)
{
    if (isnan(a) || isnan(b))
        assert_true(isnan(a) && isnan(b));
    else
        CHECK_NEAR(a, b, 1e-4 * (1 + fabs(b)));
}

static void a_sweep_is_its_settings_in_order(void **state)
{
    (void)state;
    for (int model = 0; model < MW_MODEL_COUNT; model++) {
        const mw_plan plan = plan_for((mw_model)model);
        rows all = swept(&plan, 2);
        for (size_t i = 0; i < all.n; i++) {
            const mw_setting s = {powers[i / 12], speeds[i / 4 % 3], hatches[i / 2 % 2], layers[i % 2], 80e-6, 293.15};
            mw_result r;
            assert_true(mw_evaluate(&plan, &s, true, &r, NULL) >= 0);
            assert_true(r.setting.power_W == all.row[i].setting.power_W && r.setting.layer_m == all.row[i].setting.layer_m);
            assert_true(r.pool.width_m == all.row[i].pool.width_m && r.pool.depth_m == all.row[i].pool.depth_m);
            assert_true(r.judgement.p_nominal == all.row[i].judgement.p_nominal && r.mode == all.row[i].mode);
            same_margin(r.margins.power_down_pct, all.row[i].margins.power_down_pct);
            same_margin(r.margins.power_up_pct, all.row[i].margins.power_up_pct);
            same_margin(r.margins.speed_down_pct, all.row[i].margins.speed_down_pct);
            same_margin(r.margins.speed_up_pct, all.row[i].margins.speed_up_pct);
        }
        free(all.row);
    }
}

static void any_number_of_threads_gives_the_same_bytes(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    rows one = swept(&plan, 1);
    const int threads[] = {0, 2, 3, 8};
    for (int k = 0; k < 4; k++) {
        rows more = swept(&plan, threads[k]);
        for (size_t i = 0; i < one.n; i++) {
            assert_memory_equal(&one.row[i].pool, &more.row[i].pool, sizeof(mw_pool));
            assert_memory_equal(&one.row[i].margins, &more.row[i].margins, sizeof(mw_margins));
            assert_memory_equal(&one.row[i].judgement.p_nominal, &more.row[i].judgement.p_nominal, sizeof(double));
        }
        free(more.row);
    }
    free(one.row);
}

/* Any cut of the grid into parts gives the cells of the whole, to the last bit. */
static void parts_make_the_whole(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    rows whole = swept(&plan, 1);
    for (size_t size = 1; size <= 48; size += 5) {
        mw_result row[48];
        rows part = {row, 0};
        for (size_t first = 0; first < 48; first += size) {
            const mw_grid g = {powers, speeds, hatches, layers, 4, 3, 2, 2, 80e-6, 293.15, first, first + size <= 48 ? size : 48 - first};
            assert_int_equal(mw_sweep(&plan, &g, true, 2, keep, &part, NULL), MW_OK);
        }
        assert_int_equal(part.n, 48);
        for (size_t i = 0; i < 48; i++) {
            assert_memory_equal(&part.row[i].pool, &whole.row[i].pool, sizeof(mw_pool));
            assert_memory_equal(&part.row[i].margins, &whole.row[i].margins, sizeof(mw_margins));
            assert_true(part.row[i].setting.power_W == whole.row[i].setting.power_W && part.row[i].setting.layer_m == whole.row[i].setting.layer_m);
        }
    }
    mw_error err;
    const mw_grid beyond = {powers, speeds, hatches, layers, 4, 3, 2, 2, 80e-6, 293.15, 40, 9};
    assert_int_equal(mw_sweep(&plan, &beyond, false, 1, keep, NULL, &err), MW_BAD_USAGE);
    assert_non_null(strstr(err.text, "not all in a grid of 48"));
    free(whole.row);
}

static mw_status stop_at_three(void *to, const mw_result *r)
{
    (void)r;
    return ++*(int *)to == 3 ? MW_CANNOT_WRITE : MW_OK;
}

static void grids_are_checked_before_they_run(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    mw_error err;
    int calls = 0;
    mw_grid g = {powers, speeds, hatches, layers, 4, 3, 2, 2, 80e-6, 293.15, 0, 0};
    assert_int_equal(mw_sweep(&plan, &g, false, 1, stop_at_three, &calls, &err), MW_CANNOT_WRITE);
    assert_int_equal(calls, 3);
    const double falling[] = {300, 200};
    g.power_W = falling;
    g.n_power = 2;
    assert_int_equal(mw_sweep(&plan, &g, false, 1, keep, NULL, &err), MW_BAD_VALUE);
    assert_non_null(strstr(err.text, "power do not rise"));
    g.n_power = 0;
    assert_int_equal(mw_sweep(&plan, &g, false, 1, keep, NULL, &err), MW_BAD_VALUE);
    const double fast[] = {0.5, 900};
    g = (mw_grid){powers, fast, hatches, layers, 4, 2, 2, 2, 80e-6, 293.15, 0, 0};
    assert_int_equal(mw_sweep(&plan, &g, false, 1, keep, NULL, &err), MW_BAD_VALUE);
    assert_non_null(strstr(err.text, "speed 900000 mm/s"));
    double *long_axis = malloc(40000 * sizeof *long_axis);
    for (int i = 0; i < 40000; i++)
        long_axis[i] = 10e-6 + i * 1e-9;
    g = (mw_grid){powers, speeds, long_axis, long_axis, 4, 3, 40000, 40000, 80e-6, 293.15, 0, 0};
    assert_int_equal(mw_sweep(&plan, &g, false, 1, keep, NULL, &err), MW_TOO_LARGE);
    assert_non_null(strstr(err.text, "1.92e+10 cells"));
    for (int i = 0; i < 40000; i++)
        long_axis[i] = 50 + i * 1e-2;
    double *more = malloc(40000 * sizeof *more);
    for (int i = 0; i < 40000; i++)
        more[i] = 0.1 + i * 1e-5;
    g = (mw_grid){long_axis, more, NULL, NULL, 1100, 1000, 0, 0, 80e-6, 293.15, 0, 0};
    assert_int_equal(mw_sweep(&plan, &g, false, 1, keep, NULL, &err), MW_TOO_LARGE);
    assert_non_null(strstr(err.text, "pools"));
    free(more);
    free(long_axis);
}

static void a_grid_without_hatch_and_layer_gives_tracks_alone(void **state)
{
    (void)state;
    const mw_plan plan = plan_for(MW_MODEL_DEFAULT);
    const mw_grid g = {powers, speeds, NULL, NULL, 4, 3, 0, 0, 80e-6, 293.15, 0, 0};
    mw_result row[12];
    rows all = {row, 0};
    assert_int_equal(mw_sweep(&plan, &g, true, 1, keep, &all, NULL), MW_OK);
    assert_int_equal(all.n, 12);
    for (size_t i = 0; i < 12; i++)
        assert_true(!row[i].judged && isnan(row[i].overlap_index) && row[i].pool.width_m > 0 && isnan(row[i].margins.power_up_pct));
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(a_check_case_uses_its_constants_as_they_stand),
        cmocka_unit_test(an_override_replaces_its_part_alone),
        cmocka_unit_test(plans_that_make_no_sense_are_refused),
        cmocka_unit_test(settings_outside_reason_are_refused_by_name),
        cmocka_unit_test(outside_the_record_is_named_and_flagged),
        cmocka_unit_test(intervals_hold_the_prediction_and_keep_their_order),
        cmocka_unit_test(doubt_about_the_beam_widens_the_intervals),
        cmocka_unit_test(doubt_in_the_card_widens_the_intervals),
        cmocka_unit_test(every_shipped_alloy_gives_pools),
        cmocka_unit_test(margins_are_where_the_verdict_flips),
        cmocka_unit_test(margins_of_what_is_not_nominal_are_zero),
        cmocka_unit_test(an_outlook_names_the_verdict_beyond_each_turn),
        cmocka_unit_test(the_order_of_published_porosity_is_kept),
        cmocka_unit_test(a_sweep_is_its_settings_in_order),
        cmocka_unit_test(any_number_of_threads_gives_the_same_bytes),
        cmocka_unit_test(parts_make_the_whole),
        cmocka_unit_test(grids_are_checked_before_they_run),
        cmocka_unit_test(a_grid_without_hatch_and_layer_gives_tracks_alone),
    };
    return cmocka_run_group_tests(tests, load, unload);
}
