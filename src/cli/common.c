/* SPDX-License-Identifier: GPL-3.0-or-later
 * Values from options, messages, outputs. */
#define _POSIX_C_SOURCE 200809L
#include "cli/common.h"

#include <math.h>
#include <stdarg.h>
#include <stdlib.h>
#include <string.h>

#ifdef _OPENMP
#include <omp.h>
#endif

#include "meltwright/text.h"

static int exit_code(mw_status status)
{
    switch (status) {
    case MW_BAD_USAGE:
        return EXIT_MISUSE;
    case MW_CANNOT_WRITE:
        return EXIT_NOT_WRITTEN;
    default:
        return status >= 0 ? EXIT_DONE : EXIT_BAD_INPUT;
    }
}

int complain(const char *command, const mw_error *err)
{
    (void)fprintf(stderr, "meltwright%s%s: %s", command != NULL ? " " : "", command != NULL ? command : "", err->text);
    if (err->status == MW_BAD_USAGE)
        (void)fprintf(stderr, " (see meltwright%s%s --help)", command != NULL ? " " : "", command != NULL ? command : "");
    (void)fputc('\n', stderr);
    return exit_code(err->status);
}

void remark(const arguments *args, const char *format, ...)
{
    if (given(args, OPT_QUIET))
        return;
    char text[1024];
    va_list list;
    va_start(list, format);
    (void)vsnprintf(text, sizeof text, format, list);
    va_end(list);
    mw_error clean; /* through mw_fail, so that a file's own bytes cannot steer the terminal */
    (void)mw_fail(&clean, MW_OK, NULL, 0, "%s", text);
    (void)fprintf(stderr, "meltwright %s: %s\n", args->command, clean.text);
}

bool given(const arguments *args, option_id id)
{
    return args->value[id] != NULL;
}

static const char *dashed(option_id id, char out[32])
{
    (void)snprintf(out, 32, "--%s", option_name(id));
    return out;
}

mw_status need(const arguments *args, option_id id, mw_error *err)
{
    return given(args, id) ? MW_OK : mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s is missing", option_name(id));
}

mw_status refuse_words(const arguments *args, mw_error *err)
{
    return args->n_word == 0 ? MW_OK : mw_fail(err, MW_BAD_USAGE, NULL, 0, "'%.60s' is no option; options begin with --", args->word[0]);
}

mw_status read_quantity(const arguments *args, option_id id, mw_quantity quantity, double *si, mw_error *err)
{
    char name[32];
    return given(args, id) ? mw_parse_quantity(quantity, dashed(id, name), args->value[id], si, err) : MW_OK;
}

enum { MOST_ON_AXIS = 1 << 20 };

mw_status read_axis(const arguments *args, option_id id, mw_quantity quantity, double **value, size_t *n, mw_error *err)
{
    char name[32];
    return given(args, id) ? mw_parse_axis(quantity, dashed(id, name), args->value[id], MOST_ON_AXIS, value, n, err) : MW_OK;
}

mw_status read_model(const arguments *args, mw_model *out, mw_error *err)
{
    *out = MW_MODEL_DEFAULT;
    if (!given(args, OPT_MODEL))
        return MW_OK;
    const char *names[MW_MODEL_COUNT];
    for (int m = 0; m < MW_MODEL_COUNT; m++) {
        names[m] = mw_model_word((mw_model)m);
        if (strcmp(args->value[OPT_MODEL], names[m]) == 0) {
            *out = (mw_model)m;
            return MW_OK;
        }
    }
    const char *near = mw_nearest_name(args->value[OPT_MODEL], names, MW_MODEL_COUNT);
    return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--model: '%.40s' is not default, gaussian or rosenthal%s%s%s", args->value[OPT_MODEL],
                   near != NULL ? "; did you mean " : "", near != NULL ? near : "", near != NULL ? "?" : "");
}

/* An option and where its value goes. */
typedef struct destination {
    option_id id;
    mw_quantity quantity;
    double *to;
} destination;

static mw_status read_all(const arguments *args, const destination *d, size_t n, mw_error *err)
{
    mw_status status = MW_OK;
    for (size_t i = 0; i < n && status == MW_OK; i++)
        status = read_quantity(args, d[i].id, d[i].quantity, d[i].to, err);
    return status;
}

mw_status read_overrides(const arguments *args, mw_overrides *out, mw_error *err)
{
    *out = mw_no_overrides;
    const destination d[] = {{OPT_ABSORPTIVITY, MW_PLAIN, &out->absorptivity},
                             {OPT_CONDUCTIVITY, MW_CONDUCTIVITY, &out->conductivity_W_per_mK},
                             {OPT_DENSITY, MW_DENSITY, &out->density_kg_per_m3},
                             {OPT_HEAT_CAPACITY, MW_HEAT_CAPACITY, &out->heat_capacity_J_per_kgK},
                             {OPT_MELTING, MW_KELVIN, &out->melting_point_K}};
    return read_all(args, d, sizeof d / sizeof *d, err);
}

mw_status read_setting(const arguments *args, bool beam_required, mw_setting *out, mw_error *err)
{
    *out = (mw_setting){NAN, NAN, NAN, 0, NAN, 293.15};
    const destination d[] = {{OPT_POWER, MW_POWER, &out->power_W},
                             {OPT_SPEED, MW_SPEED, &out->speed_m_per_s},
                             {OPT_HATCH, MW_LENGTH, &out->hatch_m},
                             {OPT_LAYER, MW_LENGTH, &out->layer_m},
                             {OPT_PREHEAT, MW_TEMPERATURE, &out->preheat_K}};
    const mw_status status = read_all(args, d, sizeof d / sizeof *d, err);
    return status == MW_OK ? read_beam(args, beam_required, &out->d4sigma_m, err) : status;
}

mw_status read_beam_doubt(const arguments *args, double *out_pct, mw_error *err)
{
    const mw_status status = read_quantity(args, OPT_BEAM_DOUBT, MW_PLAIN, out_pct, err);
    if (status == MW_OK && !(*out_pct >= 0 && *out_pct <= 100))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--beam-uncertainty %.6g is outside 0 to 100 percent", *out_pct);
    return status;
}

mw_status read_beam(const arguments *args, bool required, double *d4sigma_m, mw_error *err)
{
    /* Of a Gaussian: FWHM = 2 sqrt(2 ln 2) sigma, 1/e2 radius = 2 sigma, D4sigma = 4 sigma. */
    const struct { option_id id; double to_d4sigma; } form[] = {
        {OPT_D4SIGMA, 1}, {OPT_FWHM, 4 / (2 * sqrt(2 * log(2)))}, {OPT_RADIUS, 2}, {OPT_DIAMETER, 1}};
    *d4sigma_m = NAN;
    const char *first = NULL;
    for (size_t i = 0; i < sizeof form / sizeof *form; i++) {
        if (!given(args, form[i].id))
            continue;
        if (first != NULL)
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--%s and --%s both give the beam; use one", first, option_name(form[i].id));
        first = option_name(form[i].id);
        double size = 0;
        const mw_status status = read_quantity(args, form[i].id, MW_LENGTH, &size, err);
        if (status != MW_OK)
            return status;
        *d4sigma_m = size * form[i].to_d4sigma;
    }
    if (first == NULL && required)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "the beam is missing: exactly one of --d4sigma, --fwhm, --radius-1e2, --diameter-1e2");
    return MW_OK;
}

mw_status read_threads(const arguments *args, int *out, mw_error *err)
{
    double n = 0;
#ifdef _OPENMP
    *out = omp_get_num_procs();
#else
    *out = 1;
#endif
    const mw_status status = read_quantity(args, OPT_THREADS, MW_PLAIN, &n, err);
    if (status != MW_OK || !given(args, OPT_THREADS))
        return status;
    if (!(n >= 1 && n <= 1024 && n == floor(n)))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--threads: '%.20s' is not a whole number from 1 to 1024", args->value[OPT_THREADS]);
    *out = (int)n;
    return MW_OK;
}

mw_status read_shard(const arguments *args, shard *out, mw_error *err)
{
    *out = (shard){1, 1};
    const char *text = args->value[OPT_SHARD];
    if (text == NULL)
        return MW_OK;
    const char *slash = strchr(text, '/');
    double part = 0, parts = 0;
    const bool good = slash != NULL && mw_read_number(text, (size_t)(slash - text), &part) && mw_read_number(slash + 1, strlen(slash + 1), &parts) &&
                      part >= 1 && part <= parts && parts <= 1e6 && part == floor(part) && parts == floor(parts);
    if (!good)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--shard: '%.40s' is not I/N with whole numbers, 1 <= I <= N, e.g. 2/8", text);
    *out = (shard){(size_t)part, (size_t)parts};
    return MW_OK;
}

void shard_range(const shard *s, size_t n, size_t *first, size_t *count)
{
    *first = n / s->parts * (s->part - 1) + (n % s->parts < s->part - 1 ? n % s->parts : s->part - 1);
    *count = n / s->parts + (s->part - 1 < n % s->parts);
}

static bool ends_in(const char *text, const char *tail)
{
    const size_t n = strlen(text), m = strlen(tail);
    return n > m && mw_same_word(text + n - m, tail);
}

mw_status read_format(const arguments *args, output_format standard, output_format *out, mw_error *err)
{
    static const char *const names[] = {"text", "csv", "json"};
    *out = standard;
    const char *word = args->value[OPT_FORMAT], *path = args->value[OPT_OUTPUT];
    if (path != NULL && path[0] == '\0')
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "-o needs the name of a file, or - for standard output");
    if (word != NULL && path != NULL && ends_in(path, ".csv") && strcmp(word, "csv") != 0)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "--format %.20s does not go with a file that ends in .csv", word);
    if (word == NULL && path != NULL)
        *out = ends_in(path, ".csv") ? FORMAT_CSV : ends_in(path, ".json") ? FORMAT_JSON : ends_in(path, ".txt") ? FORMAT_TEXT : standard;
    if (word == NULL)
        return MW_OK;
    for (int i = 0; i < 3; i++)
        if (strcmp(word, names[i]) == 0) {
            *out = (output_format)i;
            return MW_OK;
        }
    const char *near = mw_nearest_name(word, names, 3);
    return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--format: '%.40s' is not text, csv or json%s%s%s", word, near != NULL ? "; did you mean " : "",
                   near != NULL ? near : "", near != NULL ? "?" : "");
}

mw_status make_plan(const arguments *args, mw_alloy **alloy, mw_plan *plan, mw_error *err)
{
    *alloy = NULL;
    mw_model model;
    mw_overrides overrides;
    double preheat_K = 293.15;
    mw_status status = read_model(args, &model, err);
    if (status == MW_OK)
        status = read_overrides(args, &overrides, err);
    if (status == MW_OK)
        status = read_quantity(args, OPT_PREHEAT, MW_TEMPERATURE, &preheat_K, err);
    if (status == MW_OK && given(args, OPT_ALLOY))
        status = load_alloy(args->value[OPT_ALLOY], alloy, err);
    if (status == MW_OK)
        status = mw_plan_make(*alloy, model, &overrides, preheat_K, plan, err);
    if (status == MW_OK)
        status = read_beam_doubt(args, &plan->beam_uncertainty_pct, err);
    if (status != MW_OK) {
        mw_alloy_free(*alloy);
        *alloy = NULL;
    }
    return status;
}

/* ---- outputs ---- */

static char *beside(const char *path)
{
    char *name = malloc(strlen(path) + sizeof ".json");
    if (name != NULL)
        (void)sprintf(name, "%s.json", path);
    return name;
}

mw_status open_output(const arguments *args, output *out, mw_error *err)
{
    *out = (output){.args = args, .path = args->value[OPT_OUTPUT], .to = stdout};
    if (out->path != NULL && strcmp(out->path, "-") == 0)
        out->path = NULL;
    if (out->path == NULL)
        return MW_OK;
    static const char *const pictures[] = {".png", ".svg", ".pdf"};
    for (size_t i = 0; i < sizeof pictures / sizeof *pictures; i++)
        if (ends_in(out->path, pictures[i]))
            return mw_fail(err, MW_BAD_USAGE, NULL, 0, "-o %.80s: pictures come from 'map'; this writes text, csv or json", out->path);
    const mw_status status = mw_file_create(out->path, given(args, OPT_FORCE), &out->file, err);
    out->to = out->file.stream;
    return status;
}

static mw_status write_beside(const output *out, const mw_provenance *provenance, mw_error *err)
{
    char *name = beside(out->path);
    if (name == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    mw_file_out file;
    /* It describes the table of that name and is replaced with it. */
    mw_status status = mw_file_create(name, true, &file, err);
    free(name);
    if (status != MW_OK)
        return status;
    mw_json_provenance(file.stream, provenance);
    (void)fputc('\n', file.stream);
    return mw_file_commit(&file, err);
}

mw_status close_output(output *out, const mw_provenance *provenance, mw_error *err)
{
    if (out->path == NULL)
        return MW_OK;
    mw_status status = mw_file_commit(&out->file, err);
    if (status == MW_OK && provenance != NULL && ends_in(out->path, ".csv"))
        status = write_beside(out, provenance, err);
    return status;
}

void drop_output(output *out)
{
    if (out->path != NULL)
        mw_file_discard(&out->file);
}

void fill_provenance(const arguments *args, const mw_plan *plan, provenance_store *store, mw_provenance *out)
{
    *out = (mw_provenance){.command = args->command, .plan = plan};
    for (size_t i = 0; i < args->n_order; i++) {
        const option_id id = args->order[i];
        /* Where it went and how many threads it took change nothing in a result. */
        if (id == OPT_OUTPUT || id == OPT_FORCE || id == OPT_THREADS || id == OPT_QUIET || id == OPT_FORMAT)
            continue;
        store->option[out->n_option] = option_name(id);
        store->value[out->n_option++] = args->value[id];
    }
    out->option = store->option;
    out->option_value = store->value;
}
