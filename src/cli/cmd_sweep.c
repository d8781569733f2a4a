/* SPDX-License-Identifier: GPL-3.0-or-later
 * sweep: the full table over power x speed x hatch x layer. */
#include <errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "cli/common.h"
#include "cli/grid.h"

mw_status read_grid(const arguments *args, grid_axes *a, mw_error *err)
{
    *a = (grid_axes){0};
    double preheat_K = 293.15, d4sigma_m;
    mw_status status = need(args, OPT_POWER, err);
    if (status == MW_OK)
        status = need(args, OPT_SPEED, err);
    if (status == MW_OK)
        status = read_axis(args, OPT_POWER, MW_POWER, &a->power, &a->grid.n_power, err);
    if (status == MW_OK)
        status = read_axis(args, OPT_SPEED, MW_SPEED, &a->speed, &a->grid.n_speed, err);
    if (status == MW_OK)
        status = read_axis(args, OPT_HATCH, MW_LENGTH, &a->hatch, &a->grid.n_hatch, err);
    if (status == MW_OK)
        status = read_axis(args, OPT_LAYER, MW_LENGTH, &a->layer, &a->grid.n_layer, err);
    if (status == MW_OK)
        status = read_beam(args, true, &d4sigma_m, err);
    if (status == MW_OK)
        status = read_quantity(args, OPT_PREHEAT, MW_TEMPERATURE, &preheat_K, err);
    if (status != MW_OK) {
        free_grid(a);
        return status;
    }
    a->grid.power_W = a->power;
    a->grid.speed_m_per_s = a->speed;
    a->grid.hatch_m = a->hatch;
    a->grid.layer_m = a->layer;
    a->grid.d4sigma_m = d4sigma_m;
    a->grid.preheat_K = preheat_K;
    return MW_OK;
}

void free_grid(grid_axes *a)
{
    free(a->power);
    free(a->speed);
    free(a->hatch);
    free(a->layer);
    *a = (grid_axes){0};
}

typedef struct sink {
    FILE *to;
    output_format format;
    size_t n, by_verdict[3], warned;
    const char *path;
    bool headless; /* a later part of the whole */
    const mw_provenance *provenance;
    mw_error *err;
} sink;

static const char text_head[] = "   power    speed   hatch   layer   width   depth    VED   overlap  keyhole   p nom  verdict\n"
                                "       W     mm/s      um      um      um      um  J/mm3     index    index\n";

static void put_text_row(FILE *to, const mw_result *r)
{
    (void)fprintf(to, "%8.4g %8.5g", r->setting.power_W, 1e3 * r->setting.speed_m_per_s);
    const double value[] = {1e6 * r->setting.hatch_m, 1e6 * r->setting.layer_m, 1e6 * r->pool.width_m, 1e6 * r->pool.depth_m,
                            r->volumetric_energy_J_per_m3 / 1e9, r->overlap_index, r->judgement.keyhole_index, r->judgement.p_nominal};
    static const int width[] = {8, 8, 8, 8, 7, 10, 9, 8};
    for (size_t i = 0; i < sizeof value / sizeof *value; i++) {
        if (isnan(value[i]))
            (void)fprintf(to, "%*s", width[i], "-");
        else
            (void)fprintf(to, i >= 5 ? "%*.2f" : "%*.4g", width[i], value[i]);
    }
    (void)fprintf(to, "  %s\n", r->status == MW_NO_MELT ? "no track" : r->judged ? mw_verdict_word(r->judgement.verdict) : "-");
}

/* Written with the first row: a grid that is refused leaves standard output empty. */
static void put_head(const sink *s)
{
    if (s->format == FORMAT_CSV) {
        mw_csv_header(s->to, NULL);
        (void)fputc('\n', s->to);
    } else if (s->format == FORMAT_JSON) {
        (void)fputs("{\"made_by\": ", s->to);
        mw_json_provenance(s->to, s->provenance);
        (void)fputs(",\n\"results\": [\n", s->to);
    } else {
        (void)fputs(text_head, s->to);
    }
}

static mw_status put_row(void *to, const mw_result *r)
{
    sink *s = to;
    if (s->n == 0 && !s->headless)
        put_head(s);
    if (s->format == FORMAT_CSV) {
        mw_csv_row(s->to, r, NULL);
        (void)fputc('\n', s->to);
    } else if (s->format == FORMAT_JSON) {
        (void)fputs(s->n > 0 ? ",\n" : "", s->to);
        mw_json_result(s->to, r);
    } else {
        put_text_row(s->to, r);
    }
    s->n++;
    s->by_verdict[r->judgement.verdict] += r->judged;
    s->warned += r->status > 0;
    return ferror(s->to) ? mw_fail(s->err, MW_CANNOT_WRITE, s->path, 0, "writing failed: %s", strerror(errno)) : MW_OK;
}

static mw_status write_sweep(const arguments *args, const mw_plan *plan, const mw_grid *grid, int threads, output_format format, const shard *part,
                             mw_error *err)
{
    output out;
    mw_status status = open_output(args, &out, err);
    if (status != MW_OK)
        return status;
    provenance_store store;
    mw_provenance provenance;
    fill_provenance(args, plan, &store, &provenance);
    sink s = {.to = out.to, .format = format, .path = out.path, .headless = part->part > 1, .provenance = &provenance, .err = err};
    status = mw_sweep(plan, grid, true, threads, put_row, &s, err);
    if (status == MW_OK && format == FORMAT_JSON)
        (void)fputs("\n]}\n", out.to);
    if (status == MW_OK)
        status = close_output(&out, &provenance, err);
    if (status == MW_OK && grid->n_hatch > 0 && grid->n_layer > 0)
        remark(args, "%zu settings: %zu nominal, %zu lack of fusion, %zu keyhole; %zu with a warning in their status", s.n,
               s.by_verdict[MW_NOMINAL], s.by_verdict[MW_LACK_OF_FUSION], s.by_verdict[MW_KEYHOLE], s.warned);
    drop_output(&out);
    return status;
}

int run_sweep(const arguments *args)
{
    mw_error err = {MW_OK, ""};
    grid_axes axes = {0};
    mw_alloy *alloy = NULL;
    mw_plan plan;
    int threads = 0;
    output_format format;
    mw_status status = refuse_words(args, &err);
    if (status == MW_OK)
        status = read_format(args, FORMAT_CSV, &format, &err);
    if (status == MW_OK)
        status = read_threads(args, &threads, &err);
    if (status == MW_OK)
        status = read_grid(args, &axes, &err);
    if (status == MW_OK)
        status = make_plan(args, &alloy, &plan, &err);
    shard part;
    if (status == MW_OK)
        status = read_shard(args, &part, &err);
    if (status == MW_OK && part.parts > 1 && format != FORMAT_CSV)
        status = mw_fail(&err, MW_BAD_USAGE, NULL, 0, "--shard goes with csv alone: parts of other formats do not join");
    if (status == MW_OK && part.parts > 1) {
        mw_grid *g = &axes.grid;
        const size_t pairs = (g->n_hatch > 0 ? g->n_hatch : 1) * (g->n_layer > 0 ? g->n_layer : 1);
        shard_range(&part, g->n_power * g->n_speed * pairs, &g->first_cell, &g->n_cell);
        if (g->n_cell == 0)
            status = mw_fail(&err, MW_BAD_USAGE, NULL, 0, "--shard %s: the table has fewer rows than that", args->value[OPT_SHARD]);
    }
    if (status == MW_OK && given(args, OPT_SEED) && !given(args, OPT_SAMPLES))
        status = mw_fail(&err, MW_BAD_USAGE, NULL, 0, "--seed goes with --samples");
    if (status == MW_OK && given(args, OPT_SAMPLES))
        status = write_survey(args, &plan, &axes.grid, threads, format, &part, &err);
    else if (status == MW_OK)
        status = write_sweep(args, &plan, &axes.grid, threads, format, &part, &err);
    mw_alloy_free(alloy);
    free_grid(&axes);
    return status == MW_OK ? EXIT_DONE : complain(args->command, &err);
}
