/* SPDX-License-Identifier: GPL-3.0-or-later
 * A grid over power, speed, hatch and layer, in blocks that are handed on as they are done, so that memory does not grow with the grid. Tracks are
 * computed once a (power, speed), on all cores; edges of the window once a line of them; each cell is then a handful of closed forms. */
#include <math.h>
#include <stdlib.h>

#ifdef _OPENMP
#include <omp.h>
#endif

#include "study/internal.h"

/* Everything a running sweep holds. hatch and layer are never empty here: a missing axis is one NaN or one 0. */
typedef struct sweep {
    const mw_plan *plan;
    mw_grid grid;
    int threads;
    bool margins, by_table;
    size_t first_power, n_power, first_speed, n_speed; /* the present block */
    size_t most_power, most_speed;                     /* of any block */
    mw_track *track;       /* of the block, speed fastest */
    mw_edges *along_power; /* [speed][hatch][layer] of the whole grid; NULL: too many, each margin is searched on its own */
    mw_edges *along_speed; /* [power of the block][hatch][layer] */
} sweep;

/* (power, speed) in a block: some 10 MB of tracks. And the most edges along power that are kept: some 80 MB. */
enum { MOST_BLOCK_TRACKS = 1 << 15, MOST_KEPT_EDGES = 1 << 20 };

static int thread_number(void)
{
#ifdef _OPENMP
    return omp_get_thread_num();
#else
    return 0;
#endif
}

int mw_threads(int asked)
{
#ifdef _OPENMP
    return asked > 0 ? asked : omp_get_num_procs();
#else
    (void)asked;
    return 1;
#endif
}

static mw_status check_axis(const char *name, const double *value, size_t n, mw_error *err)
{
    for (size_t i = 1; i < n; i++)
        if (!(value[i] > value[i - 1]))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "the values of %s do not rise", name);
    return MW_OK;
}

/* Both ends of every axis through the check of a setting; between them nothing worse can stand. */
mw_status mw_grid_check(const mw_grid *g, mw_error *err)
{
    mw_status status = check_axis("power", g->power_W, g->n_power, err);
    if (status == MW_OK)
        status = check_axis("speed", g->speed_m_per_s, g->n_speed, err);
    if (status == MW_OK)
        status = check_axis("hatch", g->hatch_m, g->n_hatch, err);
    if (status == MW_OK)
        status = check_axis("layer", g->layer_m, g->n_layer, err);
    if (status == MW_OK && (g->n_power == 0 || g->n_speed == 0 || g->n_hatch == 0 || g->n_layer == 0))
        status = mw_fail(err, MW_BAD_VALUE, NULL, 0, "a grid needs at least one value of each factor");
    for (int end = 0; end < 2 && status == MW_OK; end++) {
        const mw_setting s = {g->power_W[end ? g->n_power - 1 : 0], g->speed_m_per_s[end ? g->n_speed - 1 : 0],
                              g->hatch_m[end ? g->n_hatch - 1 : 0], g->layer_m[end ? g->n_layer - 1 : 0], g->d4sigma_m, g->preheat_K};
        status = mw_setting_check(&s, err);
    }
    if (status != MW_OK)
        return status;
    const double tracks = (double)g->n_power * (double)g->n_speed, cells = tracks * (double)g->n_hatch * (double)g->n_layer;
    if (g->n_cell == 0 ? cells > MW_MOST_CELLS : g->n_cell > MW_MOST_CELLS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0,
                       "a grid of %zu x %zu x %zu x %zu = %.4g cells (about %.3g GB of table) is more than the %d allowed; "
                       "use fewer values or split the ranges",
                       g->n_power, g->n_speed, g->n_hatch, g->n_layer, cells, cells * 600e-9, MW_MOST_CELLS);
    if (tracks > MW_MOST_TRACKS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%zu powers x %zu speeds = %.4g pools is more than the %d allowed; use fewer values",
                       g->n_power, g->n_speed, tracks, MW_MOST_TRACKS);
    return MW_OK;
}

/* Speed by speed, since a line of powers is what the tables do at once. */
static mw_status compute_by_table(sweep *s)
{
    const mw_grid *g = &s->grid;
    mw_track *line = malloc((size_t)s->threads * s->n_power * sizeof *line);
    if (line == NULL)
        return MW_NO_MEMORY;
    int failed = 0;
#pragma omp parallel for schedule(dynamic, 1) num_threads(s->threads) reduction(| : failed)
    for (long iv = 0; iv < (long)s->n_speed; iv++) {
        mw_track *mine = line + (size_t)thread_number() * s->n_power;
        failed |= mw_quick_tracks(s->plan, g->speed_m_per_s[s->first_speed + (size_t)iv], g->d4sigma_m, g->power_W + s->first_power, s->n_power, mine) != MW_OK;
        for (size_t i = 0; i < s->n_power; i++)
            s->track[i * s->n_speed + (size_t)iv] = mine[i];
    }
    free(line);
    return failed ? MW_NO_CONVERGENCE : MW_OK;
}

static mw_status compute_tracks(sweep *s)
{
    const mw_grid *g = &s->grid;
    const long n = (long)(s->n_power * s->n_speed);
    if (s->by_table)
        return compute_by_table(s);
#pragma omp parallel for schedule(dynamic, 16) num_threads(s->threads)
    for (long i = 0; i < n; i++)
        (void)mw_track_at(s->plan, g->power_W[s->first_power + (size_t)i / s->n_speed], g->speed_m_per_s[s->first_speed + (size_t)i % s->n_speed], g->d4sigma_m,
                          &s->track[i]);
    return MW_OK;
}

/* Edges of lines along one factor, for every hatch and layer: along power at all speeds, along speed at the powers of the block. The places of a line
 * span the whole axis, whatever the block. */
static mw_status compute_edges(sweep *s, mw_factor factor, mw_edges *edges, mw_error *err)
{
    const mw_grid *g = &s->grid;
    const bool power = factor == MW_ALONG_POWER;
    const double *own = power ? g->power_W : g->speed_m_per_s, *other = power ? g->speed_m_per_s : g->power_W + s->first_power;
    const size_t n_own = power ? g->n_power : g->n_speed, n_pairs = g->n_hatch * g->n_layer;
    const long n_line = (long)(power ? g->n_speed : s->n_power);
    const size_t n = mw_line_values(own, n_own, NULL);
    double *at = malloc(n * sizeof *at);
    mw_track *track = malloc(n * (size_t)s->threads * sizeof *track);
    mw_status status = MW_OK;
    if (at == NULL || track == NULL) {
        status = mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
        goto done;
    }
    (void)mw_line_values(own, n_own, at);
    int failed = 0;
#pragma omp parallel for schedule(dynamic, 1) num_threads(s->threads) reduction(| : failed)
    for (long l = 0; l < n_line; l++) {
        mw_track *mine = track + n * (size_t)thread_number();
        if (power)
            failed |= mw_quick_tracks(s->plan, other[l], g->d4sigma_m, at, n, mine) != MW_OK;
        for (size_t i = 0; i < n && !power; i++)
            failed |= mw_quick_tracks(s->plan, at[i], g->d4sigma_m, &other[l], 1, &mine[i]) != MW_OK;
        const mw_line line = {s->plan, factor, mine, n};
        for (size_t p = 0; p < n_pairs; p++)
            failed |= mw_edges_on(&line, g->hatch_m[p / g->n_layer], g->layer_m[p % g->n_layer],
                                  &edges[(size_t)l * n_pairs + p]) != MW_OK;
    }
    if (failed)
        status = mw_fail(err, MW_NO_CONVERGENCE, NULL, 0, "an edge of the window could not be found");
done:
    free(track);
    free(at);
    return status;
}

/* Margin from the edges of a line. Where a window narrower than the line's steps hides between two of them, the edges do not explain the
 * setting's own verdict: then it is searched from the setting itself. */
static mw_status margin_on(const sweep *s, const mw_edges *edges, const mw_result *r, mw_factor factor, double *down_pct, double *up_pct)
{
    const double value = factor == MW_ALONG_POWER ? r->setting.power_W : r->setting.speed_m_per_s;
    bool nominal = edges->nominal_before;
    for (size_t i = 0; i < edges->n && edges->at[i] <= value; i++)
        nominal = !nominal;
    if (nominal) {
        mw_margin_from(edges, value, down_pct, up_pct);
        return MW_OK;
    }
    double down, up;
    mw_status status = mw_nearest_edge(s->plan, r, factor, false, &down);
    if (status == MW_OK)
        status = mw_nearest_edge(s->plan, r, factor, true, &up);
    if (status == MW_OK) {
        *down_pct = 100 * (1 - down / value);
        *up_pct = 100 * (up / value - 1);
    }
    return status;
}

/* ip counts from the block's first power, iv from the grid's first speed. */
static mw_status add_margins(const sweep *s, size_t ip, size_t iv, size_t pair, mw_result *r)
{
    const size_t n_pairs = s->grid.n_hatch * s->grid.n_layer;
    if (!s->margins || !r->judged)
        return MW_OK;
    r->margins = (mw_margins){0, 0, 0, 0};
    if (r->judgement.verdict != MW_NOMINAL)
        return MW_OK;
    if (s->along_power == NULL)
        return mw_margins_at(s->plan, r, &r->margins);
    const mw_status status = margin_on(s, &s->along_power[iv * n_pairs + pair], r, MW_ALONG_POWER, &r->margins.power_down_pct, &r->margins.power_up_pct);
    return status != MW_OK ? status
                           : margin_on(s, &s->along_speed[ip * n_pairs + pair], r, MW_ALONG_SPEED, &r->margins.speed_down_pct, &r->margins.speed_up_pct);
}

static mw_status write_cells(const sweep *s, mw_result_sink sink, void *to)
{
    const mw_grid *g = &s->grid;
    const size_t n_pairs = g->n_hatch * g->n_layer;
    for (size_t i = 0; i < s->n_power * s->n_speed; i++) {
        const size_t ip = i / s->n_speed, iv = s->first_speed + i % s->n_speed, first = ((s->first_power + ip) * g->n_speed + iv) * n_pairs;
        for (size_t pair = 0; pair < n_pairs; pair++) {
            if (first + pair < g->first_cell || first + pair >= g->first_cell + g->n_cell)
                continue;
            mw_result r;
            mw_result_at(s->plan, &s->track[i], g->hatch_m[pair / g->n_layer], g->layer_m[pair % g->n_layer], &r);
            mw_status status = add_margins(s, ip, iv, pair, &r);
            if (status == MW_OK)
                status = sink(to, &r);
            if (status != MW_OK)
                return status;
        }
    }
    return MW_OK;
}

mw_status mw_grid_cut(mw_grid *g, mw_error *err)
{
    const size_t per_power = g->n_speed * g->n_hatch * g->n_layer, all = g->n_power * per_power;
    if (g->n_cell == 0) {
        g->first_cell = 0;
        g->n_cell = all;
        return MW_OK;
    }
    if (g->first_cell >= all || g->n_cell > all - g->first_cell)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "cells %zu to %zu are not all in a grid of %zu", g->first_cell, g->first_cell + g->n_cell, all);
    const size_t first = g->first_cell / per_power, last = (g->first_cell + g->n_cell - 1) / per_power;
    g->power_W += first;
    g->n_power = last - first + 1;
    g->first_cell -= first * per_power;
    return MW_OK;
}

/* Memory of a block, and the edges along power for the whole grid where they are not too many. */
static mw_status prepare(sweep *s, mw_error *err)
{
    const mw_grid *g = &s->grid;
    const size_t n_pairs = g->n_hatch * g->n_layer;
    s->most_speed = g->n_speed < MOST_BLOCK_TRACKS ? g->n_speed : MOST_BLOCK_TRACKS;
    s->most_power = MOST_BLOCK_TRACKS / s->most_speed < g->n_power ? MOST_BLOCK_TRACKS / s->most_speed : g->n_power;
    if (s->most_power * n_pairs > MOST_KEPT_EDGES)
        s->most_power = MOST_KEPT_EDGES / n_pairs > 0 ? MOST_KEPT_EDGES / n_pairs : 1;
    const bool lines = s->margins && n_pairs <= MOST_KEPT_EDGES / g->n_speed;
    s->track = malloc(s->most_power * s->most_speed * sizeof *s->track);
    if (lines) {
        s->along_power = calloc(g->n_speed * n_pairs, sizeof *s->along_power);
        s->along_speed = calloc(s->most_power * n_pairs, sizeof *s->along_speed);
    }
    if (s->track == NULL || (lines && (s->along_power == NULL || s->along_speed == NULL)))
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    return lines ? compute_edges(s, MW_ALONG_POWER, s->along_power, err) : MW_OK;
}

static mw_status run_block(sweep *s, mw_result_sink sink, void *to, mw_error *err)
{
    mw_status status = compute_tracks(s);
    if (status != MW_OK)
        return mw_fail(err, status, NULL, 0, "%s", mw_status_sentence(status));
    if (s->along_speed != NULL && s->first_speed == 0) /* the same for every part of a row of speeds */
        status = compute_edges(s, MW_ALONG_SPEED, s->along_speed, err);
    return status == MW_OK ? write_cells(s, sink, to) : status;
}

static mw_status run(const mw_plan *plan, const mw_grid *grid, bool with_margins, bool by_table, int threads, mw_result_sink sink, void *to, mw_error *err)
{
    static const double single_track = NAN, bare_plate = 0;
    sweep s = {.plan = plan, .grid = *grid, .threads = mw_threads(threads), .margins = with_margins && grid->n_hatch > 0 && grid->n_layer > 0, .by_table = by_table};
    if (s.grid.n_hatch == 0) {
        s.grid.hatch_m = &single_track;
        s.grid.n_hatch = 1;
    }
    if (s.grid.n_layer == 0) {
        s.grid.layer_m = &bare_plate;
        s.grid.n_layer = 1;
    }
    mw_status status = mw_grid_check(&s.grid, err);
    if (status == MW_OK)
        status = mw_grid_cut(&s.grid, err);
    if (status == MW_OK)
        status = prepare(&s, err);
    for (s.first_power = 0; status == MW_OK && s.first_power < s.grid.n_power; s.first_power += s.most_power)
        for (s.first_speed = 0; status == MW_OK && s.first_speed < s.grid.n_speed; s.first_speed += s.most_speed) {
            s.n_power = s.grid.n_power - s.first_power < s.most_power ? s.grid.n_power - s.first_power : s.most_power;
            s.n_speed = s.grid.n_speed - s.first_speed < s.most_speed ? s.grid.n_speed - s.first_speed : s.most_speed;
            status = run_block(&s, sink, to, err);
        }
    free(s.along_speed);
    free(s.along_power);
    free(s.track);
    return status;
}

mw_status mw_sweep(const mw_plan *plan, const mw_grid *grid, bool with_margins, int threads, mw_result_sink sink, void *to, mw_error *err)
{
    return run(plan, grid, with_margins, false, threads, sink, to, err);
}

mw_status mw_sweep_by_table(const mw_plan *plan, const mw_grid *grid, int threads, mw_result_sink sink, void *to, mw_error *err)
{
    const bool bare = grid->n_layer == 0 || !(grid->layer_m[0] > 0); /* balling on bare plate asks for the length */
    return run(plan, grid, false, !bare, threads, sink, to, err);
}
