/* SPDX-License-Identifier: GPL-3.0-or-later
 * The survey of a grid: pools in lanes against the exact pool, counts against one verdict at a time, the draws against their distributions. */
#include <gsl/gsl_qrng.h>
#include <gsl/gsl_sort.h>
#include <gsl/gsl_statistics.h>
#include <stdlib.h>
#include <string.h>

#include "check.h"
#include "meltwright/alloy.h"
#include "meltwright/survey.h"
#include "model/keyhole_line.h"

static mw_alloy *steel;
static mw_plan plan;

static int make_plan(void **state)
{
    (void)state;
    mw_error err;
    return mw_alloy_load("alloys/316L.json", &steel, &err) != MW_OK || mw_plan_make(steel, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err) != MW_OK;
}

static int free_plan(void **state)
{
    (void)state;
    mw_alloy_free(steel);
    return 0;
}

/* Stated in keyhole_line.h: 3e-5. Titanium- to copper-like media, slow to fast, small to large beams, and beyond the tables, where it is exact. */
static void lanes_follow_the_exact_pool(void **state)
{
    (void)state;
    enum { N = 37 };
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 5);
    double power[N], width[N], depth[N], conduction[N], onset[N];
    const mw_pool_lanes lanes = {width, depth, conduction, onset, NULL, NULL, NULL};
    for (int i = 0; i < N; i++)
        power[i] = 15 * pow(100, i / (double)(N - 1));
    for (int k = 0; k < 300; k++) {
        double u[5];
        gsl_qrng_get(sequence, u);
        const double conductivity = 12 * pow(25, u[0]);
        mw_keyhole_input in = {1, 0.05 + 0.6 * u[1], 0.003 * pow(3000, u[2]), 30e-6 * pow(15, u[3]), 0, {conductivity, 4e6, 300, 1500 + 300 * u[4]},
                               {1.2 * conductivity, 4.2e6, 300, 3000}};
        assert_int_equal(mw_keyhole_line(&in, &mw_keyhole_defaults, power, N, &lanes), MW_OK);
        for (int i = 0; i < N; i++) {
            mw_keyhole_pool p;
            in.power_W = power[i];
            assert_true(mw_keyhole_pool_compute(&in, &mw_keyhole_defaults, &p) >= 0);
            if (p.pool.width_m == 0) {
                assert_true(width[i] == 0 && depth[i] == 0 && conduction[i] == 0);
                continue;
            }
            CHECK_REL(onset[i], p.onset_index, 1e-10);
            CHECK_REL(conduction[i], p.conduction.width_m, 1e-5);
            CHECK_REL(width[i], p.pool.width_m, 3e-5);
            CHECK_REL(depth[i], p.pool.depth_m, 3e-5);
        }
    }
    gsl_qrng_free(sequence);
}

/* Constants that the lanes have no form for go the exact way. */
static void unusual_constants_are_exact(void **state)
{
    (void)state;
    double width, depth, conduction, onset;
    const mw_pool_lanes lanes = {&width, &depth, &conduction, &onset, NULL, NULL, NULL};
    const double power = 250;
    mw_keyhole_constants c = mw_keyhole_defaults;
    c.blend_exponent = 2.5;
    mw_keyhole_input in = {power, 0.4, 0.8, 80e-6, 0, plan.melt, plan.boil};
    mw_keyhole_pool p;
    assert_int_equal(mw_keyhole_line(&in, &c, &power, 1, &lanes), MW_OK);
    assert_int_equal(mw_keyhole_pool_compute(&in, &c, &p), MW_OK);
    assert_true(width == p.pool.width_m && depth == p.pool.depth_m);
    in.absorptivity = -1;
    assert_int_equal(mw_keyhole_line(&in, &mw_keyhole_defaults, &power, 1, &lanes), MW_BAD_VALUE);
}

/* ---- counts ---- */

enum { POWERS = 9, SPEEDS = 7, HATCHES = 3, LAYERS = 4, CELLS = POWERS * SPEEDS * HATCHES * LAYERS };
static const double hatches[] = {70e-6, 100e-6, 140e-6}, layers[] = {20e-6, 35e-6, 50e-6, 80e-6};
static double powers[POWERS], speeds[SPEEDS];

static mw_grid small_grid(void)
{
    for (int i = 0; i < POWERS; i++)
        powers[i] = 40 * pow(12, i / (double)(POWERS - 1));
    for (int i = 0; i < SPEEDS; i++)
        speeds[i] = 0.15 * pow(20, i / (double)(SPEEDS - 1));
    return (mw_grid){.power_W = powers, .speed_m_per_s = speeds, .hatch_m = hatches, .layer_m = layers, .n_power = POWERS, .n_speed = SPEEDS, .n_hatch = HATCHES,
                     .n_layer = LAYERS, .d4sigma_m = 80e-6, .preheat_K = 293.15};
}

typedef struct counts {
    mw_survey_cell cell[CELLS];
    size_t n;
} counts;

static mw_status keep(void *to, const mw_survey_cell *cell)
{
    counts *c = to;
    assert_true(c->n < CELLS);
    c->cell[c->n++] = *cell;
    return MW_OK;
}

/* The plan that a sample stands for, so that the exact path can be asked. */
static mw_plan plan_of(const mw_sample *s)
{
    mw_plan p = plan;
    p.absorptivity *= s->coupling;
    p.constants.onset_ratio *= s->onset;
    mw_medium *const both[] = {&p.melt, &p.boil};
    for (int i = 0; i < 2; i++) {
        both[i]->conductivity_W_per_mK *= s->conductivity;
        both[i]->volumetric_heat_J_per_m3K *= s->heat;
    }
    p.melt.isotherm_K *= s->solidus;
    p.boil.isotherm_K *= s->boiling;
    return p;
}

/* Every verdict of the survey is the exact path's, but for settings within 1e-4 of a limit (the pool's 3e-5 twice, squared, and single precision). */
static void counts_are_the_exact_verdicts(void **state)
{
    (void)state;
    enum { N = 70 };
    static counts got;
    mw_sample sample[N];
    mw_error err;
    const mw_grid grid = small_grid();
    mw_plan doubtful = plan;
    doubtful.beam_uncertainty_pct = 15;
    got.n = 0;
    assert_int_equal(mw_samples_draw(&doubtful, N, 3, sample, &err), MW_OK);
    assert_int_equal(mw_survey(&doubtful, &grid, sample, N, 2, keep, &got, &err), MW_OK);
    assert_int_equal(got.n, CELLS);
    static uint32_t nominal[CELLS], keyhole[CELLS], balling[CELLS], close[CELLS], close_balling[CELLS];
    for (int k = 0; k < N; k++) {
        const mw_plan p = plan_of(&sample[k]);
        for (size_t i = 0; i < CELLS; i++) {
            const mw_survey_cell *c = &got.cell[i];
            mw_track t;
            mw_result r;
            if (i % (HATCHES * LAYERS) == 0) /* hatch and layer share the pool */
                assert_true(mw_track_at(&p, c->power_W, c->speed_m_per_s, grid.d4sigma_m * sample[k].beam, &t) >= 0);
            mw_result_at(&p, &t, c->hatch_m, c->layer_m, &r);
            nominal[i] += r.judgement.verdict == MW_NOMINAL;
            keyhole[i] += r.judgement.verdict == MW_KEYHOLE;
            balling[i] += r.balling_index > 1;
            const double a = log(r.judgement.overlap_odds), b = log(r.judgement.energy_odds);
            close[i] += fabs(a) < 5e-4 || fabs(b) < 5e-4 || fabs(a - b) < 5e-4; /* logarithms of odds: slopes up to 4 */
            close_balling[i] += fabs(r.balling_index - 1) < 1e-4;
        }
    }
    size_t differing = 0;
    for (size_t i = 0; i < CELLS; i++) {
        const mw_survey_cell *c = &got.cell[i];
        assert_int_equal(c->samples, N);
        differing += c->nominal != nominal[i] || c->keyhole != keyhole[i];
        if (abs((int)c->nominal - (int)nominal[i]) > (int)close[i] || abs((int)c->keyhole - (int)keyhole[i]) > (int)close[i] ||
            abs((int)c->balling - (int)balling[i]) > (int)close_balling[i])
            fail_msg("%g W, %g m/s, %g m, %g m: nominal %u keyhole %u balling %u, exact %u %u %u, %u near a limit", c->power_W, c->speed_m_per_s, c->hatch_m,
                     c->layer_m, c->nominal, c->keyhole, c->balling, nominal[i], keyhole[i], balling[i], close[i]);
    }
    assert_true(differing < CELLS / 20);
}

static void any_thread_count_and_any_part_gives_the_same(void **state)
{
    (void)state;
    enum { N = 1500 }; /* more than a chunk */
    static counts one, three, part;
    mw_sample *sample = malloc(N * sizeof *sample);
    mw_error err;
    mw_grid grid = small_grid();
    assert_non_null(sample);
    assert_int_equal(mw_samples_draw(&plan, N, 1, sample, &err), MW_OK);
    one.n = three.n = part.n = 0;
    assert_int_equal(mw_survey(&plan, &grid, sample, N, 1, keep, &one, &err), MW_OK);
    assert_int_equal(mw_survey(&plan, &grid, sample, N, 3, keep, &three, &err), MW_OK);
    assert_memory_equal(one.cell, three.cell, sizeof one.cell);
    for (size_t first = 0; first < CELLS; first += 101) {
        grid.first_cell = first;
        grid.n_cell = CELLS - first < 101 ? CELLS - first : 101;
        assert_int_equal(mw_survey(&plan, &grid, sample, N, 2, keep, &part, &err), MW_OK);
    }
    assert_int_equal(part.n, CELLS);
    assert_memory_equal(one.cell, part.cell, sizeof one.cell);
    free(sample);
}

typedef struct both {
    mw_result by_table[CELLS];
    size_t n, compared;
} both;

static mw_status keep_result(void *to, const mw_result *r)
{
    both *b = to;
    b->by_table[b->n++] = *r;
    return MW_OK;
}

static mw_status compare_result(void *to, const mw_result *exact)
{
    both *b = to;
    const mw_result *r = &b->by_table[b->compared++];
    assert_memory_equal(&r->setting, &exact->setting, sizeof r->setting);
    assert_int_equal(r->status, exact->status);
    CHECK_REL(r->pool.width_m, exact->pool.width_m, 3e-5);
    CHECK_REL(r->pool.depth_m, exact->pool.depth_m, 3e-5);
    CHECK_REL(r->absorptivity, exact->absorptivity, 3e-5);
    if (isnan(exact->onset_index)) { /* a conduction model: Rosenthal's has no peak */
        assert_true(isnan(r->onset_index) && isnan(r->conduction.peak_temperature_K) == isnan(exact->conduction.peak_temperature_K));
        CHECK_NEAR(r->judgement.p_nominal, exact->judgement.p_nominal, 2e-4);
        return MW_OK;
    }
    CHECK_NEAR(r->cavity_depth_m, exact->cavity_depth_m, 3e-5 * exact->cavity_depth_m);
    CHECK_REL(r->balling_index, exact->balling_index, 3e-5);
    CHECK_REL(r->conduction.peak_temperature_K, exact->conduction.peak_temperature_K, 1e-9);
    CHECK_NEAR(r->judgement.p_nominal, exact->judgement.p_nominal, 2e-4);
    assert_true(isnan(r->pool.length_m) && isnan(r->unmelted_scattered));
    return MW_OK;
}

static void a_sweep_by_table_is_the_sweep(void **state)
{
    (void)state;
    static both b;
    mw_error err;
    const mw_grid grid = small_grid();
    for (int model = 0; model < MW_MODEL_COUNT; model++) {
        mw_plan p;
        assert_int_equal(mw_plan_make(steel, (mw_model)model, NULL, 293.15, &p, &err), MW_OK);
        b.n = b.compared = 0;
        assert_int_equal(mw_sweep_by_table(&p, &grid, 2, keep_result, &b, &err), MW_OK);
        assert_int_equal(mw_sweep(&p, &grid, false, 2, compare_result, &b, &err), MW_OK);
        assert_int_equal(b.compared, CELLS);
    }
}

/* Grids of more than one block: cells come in order, and those of a part of it, computed alone, are the same to the last bit. */
typedef struct order {
    const mw_grid *grid;
    size_t n;
    mw_result kept; /* of cell `keep` */
    size_t keep;
} order;

static mw_status check_order(void *to, const mw_result *r)
{
    order *o = to;
    const mw_grid *g = o->grid;
    const size_t n_pairs = g->n_hatch * g->n_layer, track = o->n / n_pairs, pair = o->n % n_pairs;
    if (r->setting.power_W != g->power_W[track / g->n_speed] || r->setting.speed_m_per_s != g->speed_m_per_s[track % g->n_speed] ||
        r->setting.hatch_m != g->hatch_m[pair / g->n_layer] || r->setting.layer_m != g->layer_m[pair % g->n_layer] || !(r->pool.width_m > 0))
        fail_msg("cell %zu is out of order or empty", o->n);
    if (o->n == o->keep)
        o->kept = *r;
    o->n++;
    return MW_OK;
}

static mw_status take_one(void *to, const mw_result *r)
{
    *(mw_result *)to = *r;
    return MW_OK;
}

static void large_grids_come_in_order_block_by_block(void **state)
{
    (void)state;
    enum { MANY = 40000 };
    const struct { size_t n_power, n_speed, keep; } shape[] = {{3, MANY, 3 * MANY * 2 - 1}, {400, 150, 2 * 250 * 150 + 77}, {3, MANY, 2 * MANY + 70001}};
    double *axis = malloc(MANY * sizeof *axis);
    assert_non_null(axis);
    for (size_t k = 0; k < sizeof shape / sizeof *shape; k++) {
        double power[400];
        for (size_t i = 0; i < shape[k].n_speed; i++)
            axis[i] = 0.3 + 0.5 * (double)i / (double)shape[k].n_speed;
        for (size_t i = 0; i < shape[k].n_power; i++)
            power[i] = 150 + 200 * (double)i / (double)shape[k].n_power;
        mw_grid grid = {.power_W = power, .speed_m_per_s = axis, .hatch_m = hatches, .layer_m = layers, .n_power = shape[k].n_power, .n_speed = shape[k].n_speed,
                        .n_hatch = 2, .n_layer = 1, .d4sigma_m = 80e-6, .preheat_K = 293.15};
        order o = {.grid = &grid, .keep = shape[k].keep};
        mw_result alone;
        mw_error err;
        assert_int_equal(mw_sweep_by_table(&plan, &grid, 2, check_order, &o, &err), MW_OK);
        assert_int_equal(o.n, 2 * shape[k].n_power * shape[k].n_speed);
        grid.first_cell = shape[k].keep;
        grid.n_cell = 1;
        assert_int_equal(mw_sweep_by_table(&plan, &grid, 1, take_one, &alone, &err), MW_OK);
        assert_memory_equal(&alone, &o.kept, sizeof alone);
    }
    free(axis);
}

static mw_status stop_at_five(void *to, const mw_survey_cell *cell)
{
    (void)cell;
    return ++*(int *)to == 5 ? MW_CANNOT_WRITE : MW_OK;
}

static void misuse_is_answered(void **state)
{
    (void)state;
    static counts c;
    const mw_sample s = {1, 1, 1, 1, 1, 1, 1};
    mw_error err;
    mw_grid grid = small_grid();
    int n = 0;
    assert_int_equal(mw_survey(&plan, &grid, &s, 1, 1, stop_at_five, &n, &err), MW_CANNOT_WRITE);
    assert_int_equal(n, 5);
    assert_int_equal(mw_survey(&plan, &grid, &s, 0, 1, keep, &c, &err), MW_BAD_VALUE);
    mw_plan other = plan;
    other.model = MW_MODEL_GAUSSIAN;
    assert_int_equal(mw_survey(&other, &grid, &s, 1, 1, keep, &c, &err), MW_BAD_USAGE);
    grid.n_hatch = 0;
    assert_int_equal(mw_survey(&plan, &grid, &s, 1, 1, keep, &c, &err), MW_BAD_USAGE);
    mw_sample out;
    assert_int_equal(mw_samples_draw(&plan, 0, 1, &out, &err), MW_BAD_VALUE);
    assert_int_equal(mw_samples_draw(&plan, MW_MOST_SAMPLES + 1, 1, &out, &err), MW_BAD_VALUE);
    other.alloy = NULL;
    assert_int_equal(mw_samples_draw(&other, 1, 1, &out, &err), MW_BAD_VALUE);
}

/* Medians 1 and standard deviations as the card states, to what 4096 points of the sequence resolve. */
static void draws_have_the_widths_of_the_card(void **state)
{
    (void)state;
    enum { N = 4096 };
    static mw_sample s[N], again[N];
    double x[N];
    mw_error err;
    mw_plan p = plan;
    p.beam_uncertainty_pct = 12;
    assert_int_equal(mw_samples_draw(&p, N, 7, s, &err), MW_OK);
    assert_int_equal(mw_samples_draw(&p, N, 7, again, &err), MW_OK);
    assert_memory_equal(s, again, sizeof s);
    assert_int_equal(mw_samples_draw(&p, N, 8, again, &err), MW_OK);
    assert_memory_not_equal(s, again, sizeof s);
    const double want[] = {steel->property[MW_PROP_COUPLING].uncertainty_pct / 100, steel->property[MW_PROP_SOLIDUS].uncertainty_pct / 100, 0.12};
    for (int which = 0; which < 3; which++) {
        for (int i = 0; i < N; i++)
            x[i] = which == 0 ? log(s[i].coupling) : which == 1 ? s[i].solidus - 1 : log(s[i].beam);
        CHECK_NEAR(gsl_stats_sd(x, 1, N), want[which], 0.01 * want[which]);
        gsl_sort(x, 1, N);
        CHECK_NEAR(gsl_stats_median_from_sorted_data(x, 1, N), 0, 0.01 * want[which]);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(lanes_follow_the_exact_pool),
        cmocka_unit_test(unusual_constants_are_exact),
        cmocka_unit_test(counts_are_the_exact_verdicts),
        cmocka_unit_test(any_thread_count_and_any_part_gives_the_same),
        cmocka_unit_test(a_sweep_by_table_is_the_sweep),
        cmocka_unit_test(large_grids_come_in_order_block_by_block),
        cmocka_unit_test(misuse_is_answered),
        cmocka_unit_test(draws_have_the_widths_of_the_card),
    };
    return cmocka_run_group_tests(tests, make_plan, free_plan);
}
