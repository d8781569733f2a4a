/* SPDX-License-Identifier: GPL-3.0-or-later
 * How the time of a sweep grows with the grid and shrinks with threads: the default model over power and speed. */
#include "bench.h"

#include <math.h>
#include <stdio.h>

enum { MOST = 128, ROUNDS = 3 };

static mw_status count(void *to, const mw_result *r)
{
    *(size_t *)to += r->status >= 0;
    return MW_OK;
}

typedef struct sweep_work {
    const mw_plan *plan;
    size_t n; /* powers, and as many speeds */
    int threads, repeats;
    bool margins;
} sweep_work;

/* Seconds a pool. All grids span the same ranges, so that the mix of pools is alike. */
static double time_sweep(void *v)
{
    static const double hatch_m = 110e-6, layer_m = 40e-6;
    const sweep_work *w = v;
    double power_W[MOST], speed_m_per_s[MOST];
    for (size_t i = 0; i < w->n; i++) {
        power_W[i] = 60 + 340 * (double)i / (double)(w->n - 1);
        speed_m_per_s[i] = 0.2 + 1.8 * (double)i / (double)(w->n - 1);
    }
    const mw_grid grid = {power_W, speed_m_per_s, &hatch_m, &layer_m, w->n, w->n, 1, 1, 80e-6, 293.15, 0, 0};
    size_t cells = 0;
    mw_error err;
    const double start = bench_now();
    for (int k = 0; k < w->repeats; k++)
        bench_stop_on(mw_sweep(w->plan, &grid, w->margins, w->threads, count, &cells, &err), &err);
    const double seconds = bench_now() - start;
    return cells == w->n * w->n * (size_t)w->repeats ? seconds / (double)cells : NAN;
}

static void compare(const char *what, sweep_work ours, sweep_work other, const char *note)
{
    const bench_pair p = bench_in_turns(time_sweep, &ours, time_sweep, &other, ROUNDS);
    bench_line(what, p.ours, p.other, p.ratio, note);
}

void bench_growth(bench *b)
{
    static const char *const folder[] = {"alloys"};
    mw_alloy *alloy;
    mw_plan plan;
    mw_error err;
    bench_stop_on(mw_alloy_find("316L", folder, 1, &alloy, &err), &err);
    bench_stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), &err);
    (void)b;
    /* Small work is repeated so that each turn lasts long enough. */
    const sweep_work small = {&plan, 32, 0, 4, false}, middle = {&plan, 64, 0, 1, false},
                     large = {&plan, 128, 0, 1, false};
    bench_heading("Growth of a sweep with the default model, one pool", "small", "large", "times");
    compare("32 x 32 against 64 x 64, all cores", small, middle, "1 = time grows as the grid");
    compare("32 x 32 against 128 x 128, all cores", small, large, NULL);
    sweep_work one = middle, two = middle, one_margins = {&plan, 32, 1, 1, true},
               two_margins = {&plan, 32, 2, 1, true};
    one.threads = 1;
    two.threads = 2;
    bench_heading("Threads in a sweep, one pool", "2 threads", "1 thread", "times");
    compare("64 x 64", two, one, "2 = nothing lost");
    compare("32 x 32 with margins", two_margins, one_margins, NULL);
    mw_alloy_free(alloy);
}
