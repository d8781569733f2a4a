/* SPDX-License-Identifier: GPL-3.0-or-later
 * The table pool against the exact pool in a sweep, the whole window under doubt, and whether both ways give the same verdicts. */
#define _POSIX_C_SOURCE 200809L
#include "bench.h"

#include <gsl/gsl_qrng.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <sys/resource.h>

#include "kernels.h"
#include "meltwright/gaussian.h"
#include "meltwright/rosenthal.h"
#include "meltwright/survey.h"
#include "model/gaussian_table.h"
#include "model/keyhole_line.h"
#include "model/rosenthal_line.h"

enum { ROW = 128, TABLE_ROWS = 400, EXACT_ROWS = 1, ROUNDS = 9 };

/* ---- one pool of a sweep ---- */

typedef struct row_work {
    const mw_plan *plan;
    int rows;
    double sink;
} row_work;

static double speed_of(int row)
{
    return 0.2 + 2.8 * (row * 37 % 128) / 127.0;
}

static double power_of(int i)
{
    return 50 + 450.0 * i / (ROW - 1);
}

static mw_keyhole_input input_at(const mw_plan *plan, double power_W, double speed)
{
    return (mw_keyhole_input){power_W, plan->absorptivity, speed, 80e-6, 0, plan->melt, plan->boil};
}

static double gaussian_by_table(void *v)
{
    row_work *w = v;
    static mw_table_line line[MW_TABLE_QUANTITIES];
    double s[ROW], out[ROW];
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++) {
        const mw_source one = {w->plan->absorptivity, speed_of(r), 20e-6};
        double peclet, strength;
        bench_stop_on(mw_gaussian_numbers(&one, &w->plan->melt, &peclet, &strength), NULL);
        const double per_W = strength * mw_table_peak(peclet);
        for (int i = 0; i < ROW; i++)
            s[i] = per_W * power_of(i);
        for (int q = 0; q < MW_TABLE_QUANTITIES; q++) {
            if (!mw_table_line_make((mw_table_quantity)q, peclet, &line[q]))
                return NAN;
            mw_table_line_eval(&line[q], (mw_table_quantity)q, s, ROW, out);
            w->sink += out[ROW - 1];
        }
    }
    return (bench_now() - start) / (w->rows * ROW);
}

static double gaussian_exact(void *v)
{
    row_work *w = v;
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++)
        for (int i = 0; i < ROW; i++) {
            const mw_source source = {w->plan->absorptivity * power_of(i), speed_of(r), 20e-6};
            mw_pool p;
            bench_stop_on(mw_gaussian_pool(&source, &w->plan->melt, &p), NULL);
            w->sink += p.width_m;
        }
    return (bench_now() - start) / (w->rows * ROW);
}

static double default_by_table(void *v)
{
    row_work *w = v;
    double power[ROW], width[ROW], depth[ROW], conduction[ROW], onset[ROW];
    const mw_pool_lanes lanes = {width, depth, conduction, onset, NULL, NULL, NULL};
    for (int i = 0; i < ROW; i++)
        power[i] = power_of(i);
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++) {
        const mw_keyhole_input in = input_at(w->plan, 1, speed_of(r));
        bench_stop_on(mw_keyhole_line(&in, &mw_keyhole_defaults, power, ROW, &lanes), NULL);
        w->sink += width[ROW - 1];
    }
    return (bench_now() - start) / (w->rows * ROW);
}

static double default_exact(void *v)
{
    row_work *w = v;
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++)
        for (int i = 0; i < ROW; i++) {
            const mw_keyhole_input in = input_at(w->plan, power_of(i), speed_of(r));
            mw_keyhole_pool p;
            bench_stop_on(mw_keyhole_pool_compute(&in, &mw_keyhole_defaults, &p), NULL);
            w->sink += p.pool.width_m;
        }
    return (bench_now() - start) / (w->rows * ROW);
}

static double rosenthal_by_series(void *v)
{
    row_work *w = v;
    double n[ROW], out[ROW];
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++) {
        for (int i = 0; i < ROW; i++)
            n[i] = 0.01 * speed_of(r) * power_of(i);
        mw_rosenthal_half_widths(n, ROW, out);
        w->sink += out[ROW - 1];
    }
    return (bench_now() - start) / (w->rows * ROW);
}

static double rosenthal_by_root(void *v)
{
    row_work *w = v;
    const double start = bench_now();
    for (int r = 0; r < w->rows; r++)
        for (int i = 0; i < ROW; i++)
            w->sink += mw_rosenthal_half_width(0.01 * speed_of(r) * power_of(i));
    return (bench_now() - start) / (w->rows * ROW);
}

static void compare_rows(const char *what, bench_run ours, bench_run other, const mw_plan *plan, const char *note)
{
    row_work table = {plan, TABLE_ROWS, 0}, exact = {plan, EXACT_ROWS, 0};
    const bench_pair p = bench_in_turns(ours, &table, other, &exact, ROUNDS);
    bench_line(what, p.ours, p.other, p.ratio, note);
}

/* ---- the window under doubt ---- */

typedef struct window_work {
    const mw_plan *plan;
    size_t side, pairs, samples; /* side x side pools, pairs x pairs hatches and layers */
    int threads;
    unsigned long long counted;
} window_work;

static mw_status add_counts(void *to, const mw_survey_cell *c)
{
    *(unsigned long long *)to += c->nominal + 3ULL * c->keyhole + 7ULL * c->balling;
    return MW_OK;
}

/* Seconds for the whole window. */
static double time_window(void *v)
{
    enum { MOST = 256, MOST_PAIRS = 16 };
    window_work *w = v;
    double power[MOST], speed[MOST], hatch[MOST_PAIRS], layer[MOST_PAIRS];
    for (size_t i = 0; i < w->side; i++) {
        power[i] = 50 + 450 * (double)i / (double)(w->side - 1);
        speed[i] = 0.2 + 2.8 * (double)i / (double)(w->side - 1);
    }
    for (size_t i = 0; i < w->pairs; i++) {
        hatch[i] = (60 + 6 * (double)i) * 1e-6;
        layer[i] = (20 + 3 * (double)i) * 1e-6;
    }
    const mw_grid grid = {power, speed, hatch, layer, w->side, w->side, w->pairs, w->pairs, 80e-6, 293.15, 0, 0};
    mw_sample *sample = malloc(w->samples * sizeof *sample);
    mw_error err = {MW_OK, "out of memory"};
    if (sample == NULL)
        bench_stop_on(MW_NO_MEMORY, &err);
    bench_stop_on(mw_samples_draw(w->plan, w->samples, 1, sample, &err), &err);
    w->counted = 0;
    const double start = bench_now();
    bench_stop_on(mw_survey(w->plan, &grid, sample, w->samples, w->threads, add_counts, &w->counted, &err), &err);
    const double seconds = bench_now() - start;
    free(sample);
    return seconds;
}

static double compare_limit(void)
{
    enum { N = 2048, REPEATS = 4000 };
    static float values[N];
    kernel_slice slice = {.n = N, .f = values};
    double t[5];
    for (int k = 0; k < 5; k++) {
        const double start = bench_now();
        for (int i = 0; i < REPEATS; i++)
            kernel_compare(&slice);
        t[k] = (bench_now() - start) / REPEATS / N;
    }
    return bench_median(t, 5);
}

static void window(bench *b, const mw_plan *plan)
{
    char note[160];
    window_work two = {plan, 128, 16, 1000, 2, 0}, one = two, pools = two;
    one.threads = 1;
    pools.pairs = 1;
    const bench_pair threads = bench_in_turns(time_window, &two, time_window, &one, 3);
    b->wrong += one.counted != two.counted;
    struct rusage use;
    (void)getrusage(RUSAGE_SELF, &use);
    (void)snprintf(note, sizeof note, "same counts: %s; this process so far at most %ld MB", one.counted == two.counted ? "yes" : "NO", use.ru_maxrss / 1024);
    bench_heading("Whole window under doubt, 4.2e9 verdicts", "2 threads", "1 thread", "times");
    bench_line("128 x 128 x 16 x 16 settings x 1000 samples", threads.ours, threads.other, threads.ratio, note);
    pools.threads = 1;
    const bench_pair share = bench_in_turns(time_window, &pools, time_window, &one, 3);
    const double verdicts = 128.0 * 128 * 255 * 1000, each = (share.other - share.ours) / verdicts, limit = compare_limit();
    (void)snprintf(note, sizeof note, "one verdict %.3g ns, one compare %.3g ns: two compares a verdict are %.0f %% of it", 1e9 * each, 1e9 * limit,
                   200 * limit / each);
    bench_heading("The same, one thread", "pools alone", "all", "times");
    bench_line("share of the pools", share.ours, share.other, share.ratio, note);
    bench_heading("Growth of the window, 2 threads", "128, 1000", "other", "times");
    const struct { const char *what; size_t side, samples; } sizes[] = {
        {"64 x 64, 1000 samples", 64, 1000}, {"256 x 256, 1000 samples", 256, 1000}, {"128 x 128, 250 samples", 128, 250}, {"128 x 128, 4000 samples", 128, 4000}};
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; i++) {
        window_work other = two;
        other.side = sizes[i].side;
        other.samples = sizes[i].samples;
        const bench_pair p = bench_in_turns(time_window, &two, time_window, &other, 1);
        const double expected = (double)(other.side * other.side * other.samples) / (128.0 * 128 * 1000);
        (void)snprintf(note, sizeof note, "%.4g = grows as the work", expected);
        bench_line(sizes[i].what, p.ours, p.other, 1 / p.ratio > 0 ? p.ratio : NAN, note);
    }
}

/* ---- the same verdicts ---- */

/* A million settings: 4000 quasi-random pools in rows of one, each at 250 hatches and layers, by both ways. A difference is a fault unless an index
 * lies within its stated error of a limit: 3e-5 of width and depth, twice that in the squares. */
static void agreement(bench *b, const mw_plan *plan)
{
    enum { POOLS = 4000, PER_POOL = 250 };
    gsl_qrng *sequence = gsl_qrng_alloc(gsl_qrng_sobol, 4);
    const mw_limits *limits = mw_verdict_limits(plan->kind);
    int differ = 0, faults = 0;
    double farthest = 0;
    for (int i = 0; i < POOLS; i++) {
        double u[4], width, depth, conduction, onset;
        const mw_pool_lanes lane = {&width, &depth, &conduction, &onset, NULL, NULL, NULL};
        gsl_qrng_get(sequence, u);
        const double power = 40 * pow(15, u[0]), speed = 0.1 * pow(30, u[1]), d = 35e-6 * pow(5, u[2]);
        mw_track t;
        mw_error err = {MW_OK, "no pool"};
        bench_stop_on(mw_track_at(plan, power, speed, d, &t), &err);
        mw_keyhole_input in = input_at(plan, power, speed);
        in.d4sigma_m = d;
        bench_stop_on(mw_keyhole_line(&in, &plan->constants, &power, 1, &lane), &err);
        for (int k = 0; k < PER_POOL; k++) {
            const double hatch = (40 + 8 * (k % 25)) * 1e-6, layer = (15 + 8 * (k / 25)) * 1e-6;
            mw_judgement exact, table;
            const double ratio = mw_melt_energy_ratio(plan->absorptivity * power, speed, hatch, layer,
                                                      plan->melt.volumetric_heat_J_per_m3K * (plan->melt.isotherm_K - plan->melt.ambient_K));
            mw_judge(mw_overlap_index(t.pool.width_m, mw_keyhole_layer_depth(t.pool.depth_m, layer, &plan->constants), hatch, layer), ratio, limits, &exact);
            mw_judge(mw_overlap_index(width, mw_keyhole_layer_depth(depth, layer, &plan->constants), hatch, layer), ratio, limits, &table);
            if (exact.verdict == table.verdict)
                continue;
            differ++;
            const double a = fabs(log(exact.overlap_odds)), c = fabs(log(exact.overlap_odds / exact.energy_odds)), distance = a < c ? a : c;
            farthest = fmax(farthest, distance);
            faults += distance > 2.2 * 4 * 3e-5;
        }
    }
    gsl_qrng_free(sequence);
    (void)printf("\nVerdicts by table and by the exact pool, %d settings: %d differ, the farthest at %.1e of a limit's odds; %d beyond the stated error\n", POOLS * PER_POOL,
                 differ, farthest, faults);
    b->wrong += faults;
}

void bench_tables(bench *b)
{
    static const char *const folder[] = {"alloys"};
    mw_alloy *alloy;
    mw_plan plan;
    mw_error err;
    bench_stop_on(mw_alloy_find("316L", folder, 1, &alloy, &err), &err);
    bench_stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), &err);
    plan.beam_uncertainty_pct = 10;
    bench_heading("Pools of a sweep, rows of 128 powers, one thread", "table", "exact", "times");
    compare_rows("Gaussian pool: width, depth, length", gaussian_by_table, gaussian_exact, &plan, "within 1e-5 (unit tests)");
    compare_rows("default pool: width, depth, conduction width", default_by_table, default_exact, &plan, "within 3e-5 (unit tests)");
    compare_rows("Rosenthal: half width", rosenthal_by_series, rosenthal_by_root, &plan, "within 5e-8 (unit tests)");
    window(b, &plan);
    agreement(b, &plan);
    mw_alloy_free(alloy);
}
