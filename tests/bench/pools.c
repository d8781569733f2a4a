/* SPDX-License-Identifier: GPL-3.0-or-later
 * The exact pool against the same pool by general-purpose quadrature and search: C with GSL, Python with SciPy. */
#include "bench.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "kernels.h"
#include "meltwright/gaussian.h"
#include "pool_set.h"
#include "scipy.h"
#include "simple.h"

/* The other way counts as right up to here; it is asked for a hundredth of it. */
static const double right = 1e-6;

enum { OUR_REPEATS = 40, GSL_ROUNDS = 5, SCIPY_ROUNDS = 3 };

static double time_ours(void *v)
{
    const pool_set *set = v;
    volatile double kept = 0;
    const double start = bench_now();
    for (int k = 0; k < OUR_REPEATS; k++)
        for (size_t i = 0; i < set->n; i++) {
            mw_pool pool;
            (void)mw_gaussian_pool(&set->source[i], &set->medium[i], &pool);
            kept = pool.width_m;
        }
    const double end = bench_now();
    (void)kept;
    return (end - start) / OUR_REPEATS / (double)set->n;
}

typedef struct simple_work {
    const pool_set *set;
    simple_way way;
    simple_clock clock;
    gsl_integration_workspace *ws;
    double worst;     /* error over the set */
    double integrals; /* a pool, mean */
} simple_work;

static double time_simple(void *v)
{
    simple_work *w = v;
    w->worst = w->integrals = 0;
    const double start = bench_now();
    for (size_t i = 0; i < w->set->n; i++) {
        simple_pool p;
        const bool good = simple_pool_compute(&w->set->source[i], &w->set->medium[i], w->way, w->clock, w->ws, &p);
        w->worst = good ? fmax(w->worst, pool_set_error(w->set, i, p.width_m, p.depth_m, p.length_m)) : INFINITY;
        w->integrals += (double)p.integrals / (double)w->set->n;
    }
    return (bench_now() - start) / (double)w->set->n;
}

typedef struct scipy_work {
    const scipy *python;
    const pool_set *set;
    const char *clock;
    double worst;
} scipy_work;

static double time_scipy(void *v)
{
    scipy_work *w = v;
    return scipy_pools(w->python, w->clock, w->set, &w->worst);
}

static void say_error(bench *b, char note[96], double worst, double integrals)
{
    char count[32] = "";
    if (integrals > 0)
        (void)snprintf(count, sizeof count, ", %.0f integrals", integrals);
    (void)snprintf(note, 96, "error %.0e%s%s", worst, count, worst <= right ? "" : " WRONG");
    b->wrong += !(worst <= right);
}

/* Leaves the pools that the simple way gets right; a comparison of the others would be worthless. */
static size_t drop_what_is_wrong(pool_set *set, gsl_integration_workspace *ws)
{
    size_t dropped = 0;
    for (size_t i = set->n; i-- > 0;) {
        simple_pool p;
        const bool good =
            simple_pool_compute(&set->source[i], &set->medium[i], SIMPLE_BISECTION, SIMPLE_ROOT_TIME, ws, &p);
        if (!good || !(pool_set_error(set, i, p.width_m, p.depth_m, p.length_m) <= right)) {
            pool_set_drop(set, i);
            dropped++;
        }
    }
    return dropped;
}

static void check_ours(bench *b, const pool_set *set)
{
    char note[96];
    double worst = 0;
    for (size_t i = 0; i < set->n; i++) {
        mw_pool p;
        const mw_status status = mw_gaussian_pool(&set->source[i], &set->medium[i], &p);
        worst = status == MW_OK ? fmax(worst, pool_set_error(set, i, p.width_m, p.depth_m, p.length_m)) : INFINITY;
    }
    say_error(b, note, worst, 0);
    (void)printf("  meltwright on all %zu reference pools: %s\n", set->n, note);
}

static void against_gsl(bench *b, pool_set *set, gsl_integration_workspace *ws)
{
    static const struct {
        const char *what;
        simple_way way;
        simple_clock clock;
    } line[] = {{"GSL, golden section + bisection, scaled time", SIMPLE_BISECTION, SIMPLE_TIME},
                {"GSL, golden section + bisection, root of scaled time", SIMPLE_BISECTION, SIMPLE_ROOT_TIME},
                {"GSL, Brent in Brent, scaled time", SIMPLE_BRENT, SIMPLE_TIME},
                {"GSL, Brent in Brent, root of scaled time", SIMPLE_BRENT, SIMPLE_ROOT_TIME}};
    for (size_t i = 0; i < sizeof line / sizeof *line; i++) {
        char note[96];
        simple_work w = {.set = set, .way = line[i].way, .clock = line[i].clock, .ws = ws};
        const bench_pair p = bench_in_turns(time_ours, set, time_simple, &w, GSL_ROUNDS);
        say_error(b, note, w.worst, w.integrals);
        bench_line(line[i].what, p.ours, p.other, p.ratio, note);
    }
}

static void against_scipy(bench *b, pool_set *set)
{
    static const struct {
        const char *what, *clock;
    } line[] = {{"SciPy, brentq + bounded minimum, scaled time", "time"},
                {"SciPy, brentq + bounded minimum, root of scaled time", "root-time"}};
    scipy python;
    if (!scipy_find(&python)) {
        (void)printf("  SciPy is not there (package python3-scipy): not compared\n");
        return;
    }
    for (size_t i = 0; i < sizeof line / sizeof *line; i++) {
        char note[96];
        scipy_work w = {&python, set, line[i].clock, INFINITY};
        const bench_pair p = bench_in_turns(time_ours, set, time_scipy, &w, SCIPY_ROUNDS);
        say_error(b, note, w.worst, 0);
        bench_line(line[i].what, p.ours, p.other, p.ratio, note);
    }
}

static double time_exp(void *v)
{
    enum { REPEATS = 4000 };
    kernel_slice *s = v;
    const double start = bench_now();
    for (int i = 0; i < REPEATS; i++)
        kernel_exp_vector(s);
    return (bench_now() - start) / REPEATS / (double)s->n;
}

/* How far the pool is from its floor: it cannot take less than the exponentials in it. */
static void against_exp(pool_set *set)
{
    enum { N = 1024 };
    static double x[N], y[N];
    for (size_t i = 0; i < N; i++)
        x[i] = -8 * (double)i / N;
    kernel_slice s = {x, y, NULL, N, 0};
    const bench_pair p = bench_in_turns(time_exp, &s, time_ours, set, GSL_ROUNDS);
    (void)printf("  one pool takes as long as %.3g exp of a vector loop\n", p.ratio);
}

void bench_pools(bench *b)
{
    pool_set set;
    gsl_integration_workspace *ws = gsl_integration_workspace_alloc(SIMPLE_INTERVALS);
    pool_set_load(&set);
    const size_t all = set.n;
    bench_heading("Exact pool of a Gaussian source (width, depth, length)", "meltwright", "other", "times");
    check_ours(b, &set);
    const size_t dropped = drop_what_is_wrong(&set, ws);
    (void)printf("  timed on the %zu that golden section gets right (where a pool has two widest places it may find "
                 "the lesser)\n",
                 set.n);
    b->wrong += 10 * dropped > all;
    against_gsl(b, &set, ws);
    against_scipy(b, &set);
    against_exp(&set);
    gsl_integration_workspace_free(ws);
}
