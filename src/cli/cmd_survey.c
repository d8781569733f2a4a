/* SPDX-License-Identifier: GPL-3.0-or-later
 * sweep --samples: how often each verdict comes up under doubt, for every cell of the grid. */
#include <errno.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "cli/common.h"
#include "cli/grid.h"
#include "meltwright/survey.h"
#include "meltwright/text.h"

/* Columns in output order; all are numbers. */
static const char *const column[] = {"power_W", "speed_mm_per_s", "hatch_um", "layer_um", "d4sigma_um", "preheat_C", "volumetric_energy_J_per_mm3",
                                     "build_rate_cm3_per_h", "samples", "share_nominal", "share_lack_of_fusion", "share_keyhole", "share_balling"};
enum { COLUMNS = sizeof column / sizeof *column };

typedef struct survey_sink {
    FILE *to;
    output_format format;
    const mw_grid *grid;
    const char *path;
    bool headless;
    const mw_provenance *provenance;
    size_t n;
    double nominal, keyhole, balling;
    mw_error *err;
} survey_sink;

/* Six decimals of a um or W hide the last bit of unit conversion, as the tables of single settings do. */
static void values_of(const survey_sink *s, const mw_survey_cell *c, double value[COLUMNS])
{
    const double n = c->samples;
    const double all[COLUMNS] = {c->power_W,
                                 1e3 * c->speed_m_per_s,
                                 1e6 * c->hatch_m,
                                 1e6 * c->layer_m,
                                 1e6 * s->grid->d4sigma_m,
                                 s->grid->preheat_K - 273.15,
                                 mw_volumetric_energy(c->power_W, c->speed_m_per_s, c->hatch_m, c->layer_m) / 1e9,
                                 mw_build_rate(c->speed_m_per_s, c->hatch_m, c->layer_m) * 3.6e9,
                                 n,
                                 c->nominal / n,
                                 (n - c->nominal - c->keyhole) / n,
                                 c->keyhole / n,
                                 c->balling / n};
    for (size_t i = 0; i < COLUMNS; i++)
        value[i] = i < 6 ? round(all[i] * 1e6) / 1e6 : all[i];
}

static void put_survey_head(const survey_sink *s)
{
    if (s->format == FORMAT_JSON) {
        (void)fputs("{\"made_by\": ", s->to);
        mw_json_provenance(s->to, s->provenance);
        (void)fputs(",\n\"results\": [\n", s->to);
    } else if (s->format == FORMAT_CSV) {
        for (size_t i = 0; i < COLUMNS; i++)
            (void)fprintf(s->to, "%s%s", i > 0 ? "," : "", column[i]);
        (void)fputc('\n', s->to);
    } else {
        (void)fputs("   power    speed   hatch   layer     VED   nominal  lack of  keyhole  balling\n"
                    "       W     mm/s      um      um   J/mm3             fusion                     share of the samples\n",
                    s->to);
    }
}

static mw_status put_survey_cell(void *to, const mw_survey_cell *cell)
{
    survey_sink *s = to;
    double v[COLUMNS];
    if (s->n == 0 && !s->headless)
        put_survey_head(s);
    values_of(s, cell, v);
    if (s->format == FORMAT_TEXT) {
        (void)fprintf(s->to, "%8.4g %8.5g%8.4g%8.4g%8.4g%10.3f%9.3f%9.3f%9.3f\n", v[0], v[1], v[2], v[3], v[6], v[9], v[10], v[11], v[12]);
    } else {
        (void)fputs(s->format == FORMAT_JSON ? (s->n > 0 ? ",\n{" : "{") : "", s->to);
        for (size_t i = 0; i < COLUMNS; i++) {
            char text[MW_NUMBER_SIZE];
            (void)mw_print_number(text, v[i]);
            if (s->format == FORMAT_JSON)
                (void)fprintf(s->to, "%s\"%s\": %s", i > 0 ? ", " : "", column[i], text);
            else
                (void)fprintf(s->to, "%s%s", i > 0 ? "," : "", text);
        }
        (void)fputs(s->format == FORMAT_JSON ? "}" : "\n", s->to);
    }
    s->n++;
    s->nominal += v[9];
    s->keyhole += v[11];
    s->balling += v[12];
    return ferror(s->to) ? mw_fail(s->err, MW_CANNOT_WRITE, s->path, 0, "writing failed: %s", strerror(errno)) : MW_OK;
}

static mw_status read_whole(const arguments *args, option_id id, double least, double most, double *value, mw_error *err)
{
    const mw_status status = read_quantity(args, id, MW_PLAIN, value, err);
    if (status == MW_OK && !(*value >= least && *value <= most && *value == floor(*value)))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--%s must be a whole number from %.0f to %.0f", option_name(id), least, most);
    return status;
}

mw_status write_survey(const arguments *args, const mw_plan *plan, const mw_grid *grid, int threads, output_format format, const shard *part, mw_error *err)
{
    double n = 0, seed = 1;
    mw_plan doubtful = *plan;
    if (!given(args, OPT_BEAM_DOUBT))
        doubtful.beam_uncertainty_pct = MW_BEAM_UNCERTAINTY_USUAL_PCT;
    output out;
    mw_status status = read_whole(args, OPT_SAMPLES, 1, MW_MOST_SAMPLES, &n, err);
    if (status == MW_OK)
        status = read_whole(args, OPT_SEED, 0, 4294967295.0, &seed, err);
    mw_sample *sample = status == MW_OK ? malloc((size_t)n * sizeof *sample) : NULL;
    if (status == MW_OK && sample == NULL)
        status = mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    if (status == MW_OK)
        status = mw_samples_draw(&doubtful, (size_t)n, (unsigned long)seed, sample, err);
    if (status == MW_OK)
        status = open_output(args, &out, err);
    if (status != MW_OK) {
        free(sample);
        return status;
    }
    provenance_store store;
    mw_provenance provenance;
    fill_provenance(args, plan, &store, &provenance);
    survey_sink s = {.to = out.to, .format = format, .grid = grid, .path = out.path, .headless = part->part > 1, .provenance = &provenance, .err = err};
    status = mw_survey(plan, grid, sample, (size_t)n, threads, put_survey_cell, &s, err);
    if (status == MW_OK && format == FORMAT_JSON)
        (void)fputs("\n]}\n", out.to);
    if (status == MW_OK)
        status = close_output(&out, &provenance, err);
    if (status == MW_OK)
        remark(args, "%zu settings x %.0f samples: %.1f %% nominal, %.1f %% lack of fusion, %.1f %% keyhole; %.1f %% balling beside them", s.n, n,
               100 * s.nominal / (double)s.n, 100 * (1 - (s.nominal + s.keyhole) / (double)s.n), 100 * s.keyhole / (double)s.n, 100 * s.balling / (double)s.n);
    drop_output(&out);
    free(sample);
    return status;
}
