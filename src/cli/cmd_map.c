/* SPDX-License-Identifier: GPL-3.0-or-later
 * map: the process map as a picture, its summary, or its grid. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "cli/grid.h"
#include "cli/rows.h"
#include "meltwright/mapplot.h"
#include "meltwright/text.h"
#include "meltwright/version.h"

enum { FEW = 17, CONTOUR_KINDS = 3, MOST_ENERGY_LINES = 12, MOST_MARKS = 200 };

static const struct {
    const char *word, *name, *unit;
} contour_kind[CONTOUR_KINDS] = {{"width", "width", "\xC2\xB5m"}, {"depth", "depth", "\xC2\xB5m"}, {"build-rate", "build rate", "cm\xC2\xB3/h"}};

/* Fields of one panel, and the best place in it. */
typedef struct panel_fields {
    double *lof, *over, *melt, *balling, *contour[CONTOUR_KINDS];
    mw_setting best;
    double best_distance;
} panel_fields;

typedef struct map_run {
    const arguments *args;
    mw_alloy *alloy;
    mw_plan plan;
    grid_axes axes;
    size_t n_panel, n_cell;
    panel_fields *panel;
    double *store;
    double *speed_mm_per_s;
    size_t n_seen;
    bool contour[CONTOUR_KINDS];
    double *energy;  /* J/mm3 */
    size_t n_energy;
    mw_map_mark mark[MOST_MARKS];
    char *label[MOST_MARKS];
    size_t n_mark;
} map_run;

/* ---- reading ---- */

/* A range without COUNT means 129 values on power and speed. */
static char *with_count(const char *text)
{
    const size_t room = strlen(text) + 16;
    char *out = malloc(room);
    if (out == NULL)
        return NULL;
    const char *colon = strchr(text, ':');
    const bool short_range = colon != NULL && strchr(colon + 1, ':') == NULL && strchr(text, ',') == NULL;
    (void)snprintf(out, room, short_range ? "%s:129" : "%s", text);
    return out;
}

static mw_status read_axes(map_run *m, mw_error *err)
{
    arguments filled = *m->args;
    char *power = given(&filled, OPT_POWER) ? with_count(filled.value[OPT_POWER]) : NULL;
    char *speed = given(&filled, OPT_SPEED) ? with_count(filled.value[OPT_SPEED]) : NULL;
    if (power != NULL)
        filled.value[OPT_POWER] = power;
    if (speed != NULL)
        filled.value[OPT_SPEED] = speed;
    mw_status status = need(&filled, OPT_HATCH, err);
    if (status == MW_OK)
        status = need(&filled, OPT_LAYER, err);
    if (status == MW_OK)
        status = read_grid(&filled, &m->axes, err);
    free(power);
    free(speed);
    const mw_grid *g = &m->axes.grid;
    if (status == MW_OK && (g->n_power < 2 || g->n_speed < 2))
        return mw_fail(err, MW_BAD_USAGE, NULL, 0, "a map needs at least two powers and two speeds, e.g. --power 60:400 --speed 200:2000");
    if (status == MW_OK && g->layer_m[0] <= 0)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--layer: a map needs layers above 0");
    if (status == MW_OK && g->n_hatch * g->n_layer > MW_MAP_MOST_PANELS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%zu hatches x %zu layers is more than the %d panels allowed", g->n_hatch, g->n_layer,
                       MW_MAP_MOST_PANELS);
    return status;
}

static mw_status read_contours(map_run *m, mw_error *err)
{
    const char *names[CONTOUR_KINDS];
    for (int k = 0; k < CONTOUR_KINDS; k++)
        names[k] = contour_kind[k].word;
    for (const char *item = m->args->value[OPT_CONTOURS]; item != NULL && *item != '\0';) {
        char word[24];
        const size_t n = strcspn(item, ",");
        (void)snprintf(word, sizeof word, "%.*s", n < 23 ? (int)n : 23, item);
        int found = -1;
        for (int k = 0; k < CONTOUR_KINDS; k++)
            if (strcmp(word, names[k]) == 0)
                found = k;
        if (found < 0) {
            const char *near = mw_nearest_name(word, names, CONTOUR_KINDS);
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--contours: '%s' is not width, depth or build-rate%s%s%s", word,
                           near != NULL ? "; did you mean " : "", near != NULL ? near : "", near != NULL ? "?" : "");
        }
        m->contour[found] = true;
        item += n + (item[n] == ',');
    }
    return MW_OK;
}

/* Round densities that cross the first panel. */
static void automatic_energies(map_run *m)
{
    static const double round_value[] = {10, 15, 20, 30, 40, 60, 80, 120, 160, 240, 320, 480};
    const mw_grid *g = &m->axes.grid;
    const double area = g->hatch_m[0] * g->layer_m[0] * 1e9;
    const double low = g->power_W[0] / (g->speed_m_per_s[g->n_speed - 1] * area), high = g->power_W[g->n_power - 1] / (g->speed_m_per_s[0] * area);
    /* Lines in the outer thirds (in ln E) only graze the corners. */
    const double from = low * pow(high / low, 0.30), to = low * pow(high / low, 0.75);
    for (size_t i = 0; i < sizeof round_value / sizeof *round_value && m->n_energy < 4; i++)
        if (round_value[i] >= from && round_value[i] <= to)
            m->energy[m->n_energy++] = round_value[i];
}

static mw_status read_energies(map_run *m, mw_error *err)
{
    const char *text = m->args->value[OPT_ENERGY_LINES];
    if (text == NULL)
        return MW_OK;
    if (strcmp(text, "auto") == 0) {
        m->energy = malloc(4 * sizeof *m->energy);
        if (m->energy == NULL)
            return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
        automatic_energies(m);
        return MW_OK;
    }
    const mw_status status = mw_parse_axis(MW_ENERGY_DENSITY, "--energy-lines", text, MOST_ENERGY_LINES, &m->energy, &m->n_energy, err);
    for (size_t i = 0; status == MW_OK && i < m->n_energy; i++) {
        m->energy[i] /= 1e9;
        if (!(m->energy[i] > 0))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "--energy-lines: %g J/mm3 is not above 0", m->energy[i]);
    }
    return status;
}

static bool close_to(double a, double b)
{
    return isnan(a) || fabs(a - b) <= 1e-9 * b;
}

/* Panel that a row with this hatch and layer belongs on: -1 every panel, -2 none. */
static int panel_of(const mw_grid *g, const mw_setting *s)
{
    const bool any_hatch = isnan(s->hatch_m), any_layer = s->layer_m == 0;
    if (any_hatch && any_layer)
        return -1;
    for (size_t p = 0; p < g->n_hatch * g->n_layer; p++)
        if ((any_hatch || close_to(s->hatch_m, g->hatch_m[p / g->n_layer])) && (any_layer || close_to(s->layer_m, g->layer_m[p % g->n_layer])))
            return (int)p;
    return -2;
}

/* The text of a column called label, name or id, where there is one. */
static char *label_of(mw_csv_reader *reader)
{
    static const char *const names[] = {"label", "name", "id"};
    for (size_t k = 0; k < 3; k++)
        for (size_t i = 0; i < mw_csv_columns(reader); i++)
            if (strcmp(mw_csv_column_name(reader, i), names[k]) == 0 && mw_csv_get(reader, i).n > 0) {
                const mw_csv_field_view f = mw_csv_get(reader, i);
                char *copy = malloc(f.n + 1);
                if (copy != NULL)
                    memcpy(copy, f.text, f.n + 1);
                return copy;
            }
    return NULL;
}

static mw_status read_marks(map_run *m, mw_error *err)
{
    if (!given(m->args, OPT_FROM))
        return MW_OK;
    /* Only the file's own values count here: the axes of the map are no settings. */
    arguments alone = *m->args;
    alone.value[OPT_POWER] = alone.value[OPT_SPEED] = alone.value[OPT_HATCH] = alone.value[OPT_LAYER] = NULL;
    row_source *rows;
    mw_status status = rows_open(&alone, &rows, err);
    bool end = false;
    size_t elsewhere = 0, bad_rows = 0;
    mw_setting lost = {0};
    while (status == MW_OK && !end) {
        row_values v;
        mw_error bad;
        status = rows_next(rows, &end, &v, &bad, err);
        if (status != MW_OK || end)
            break;
        if (bad.status != MW_OK || !(v.setting.power_W > 0) || !(v.setting.speed_m_per_s > 0)) {
            bad_rows++;
            continue;
        }
        const int panel = panel_of(&m->axes.grid, &v.setting);
        if (panel == -2) {
            if (elsewhere == 0)
                lost = v.setting;
            elsewhere++;
            continue;
        }
        if (m->n_mark == MOST_MARKS) {
            status = mw_fail(err, MW_TOO_LARGE, NULL, 0, "--from: more than %d settings to mark", MOST_MARKS);
            break;
        }
        m->label[m->n_mark] = label_of(rows_reader(rows));
        m->mark[m->n_mark] = (mw_map_mark){v.setting.power_W, 1e3 * v.setting.speed_m_per_s, m->label[m->n_mark], panel};
        m->n_mark++;
    }
    rows_close(rows);
    if (status == MW_OK && elsewhere > 0)
        remark(m->args, "%zu settings of --from have a hatch and layer that no panel shows, the first %.4g and %.4g um", elsewhere, 1e6 * lost.hatch_m,
               1e6 * lost.layer_m);
    if (status == MW_OK && bad_rows > 0)
        remark(m->args, "%zu rows of --from have no usable power and speed", bad_rows);
    return status;
}

/* ---- computing ---- */

static mw_status make_panels(map_run *m, mw_error *err)
{
    const mw_grid *g = &m->axes.grid;
    m->n_panel = g->n_hatch * g->n_layer;
    m->n_cell = g->n_power * g->n_speed;
    const size_t per_panel = 4 + CONTOUR_KINDS;
    m->panel = calloc(m->n_panel, sizeof *m->panel);
    m->store = m->n_cell <= MW_MOST_TRACKS ? malloc(m->n_panel * per_panel * m->n_cell * sizeof *m->store) : NULL;
    m->speed_mm_per_s = malloc(g->n_speed * sizeof *m->speed_mm_per_s);
    if (m->n_cell > MW_MOST_TRACKS)
        return mw_fail(err, MW_TOO_LARGE, NULL, 0, "%zu powers x %zu speeds is more than the %d points allowed on a map", g->n_power, g->n_speed,
                       MW_MOST_TRACKS);
    if (m->panel == NULL || m->store == NULL || m->speed_mm_per_s == NULL)
        return mw_fail(err, MW_NO_MEMORY, NULL, 0, "out of memory");
    for (size_t i = 0; i < g->n_speed; i++)
        m->speed_mm_per_s[i] = 1e3 * g->speed_m_per_s[i];
    double *next = m->store;
    for (size_t p = 0; p < m->n_panel; p++) {
        panel_fields *f = &m->panel[p];
        double **const field[] = {&f->lof, &f->over, &f->melt, &f->balling, &f->contour[0], &f->contour[1], &f->contour[2]};
        for (size_t k = 0; k < per_panel; k++, next += m->n_cell)
            *field[k] = next;
        f->best_distance = -INFINITY;
    }
    return MW_OK;
}

static double none_if_no_track(const mw_result *r, double value)
{
    return r->status == MW_NO_MELT ? NAN : value;
}

/* Cells come with power slowest and layer fastest; a field has one row a speed. */
static mw_status take_cell(void *to, const mw_result *r)
{
    map_run *m = to;
    const mw_grid *g = &m->axes.grid;
    const size_t track = m->n_seen / m->n_panel, ip = track / g->n_speed, iv = track % g->n_speed, at = iv * g->n_power + ip;
    panel_fields *f = &m->panel[m->n_seen++ % m->n_panel];
    f->lof[at] = log(r->judgement.overlap_odds);
    f->over[at] = log(r->judgement.energy_odds);
    f->melt[at] = r->status == MW_NO_MELT ? fmin(r->conduction.peak_temperature_K - m->plan.melt.isotherm_K, -1e-9)
                  : isnan(r->conduction.peak_temperature_K) ? 1
                                                            : r->conduction.peak_temperature_K - m->plan.melt.isotherm_K;
    f->balling[at] = r->balling_index > 0 ? log(r->balling_index) : -10;
    f->contour[0][at] = none_if_no_track(r, 1e6 * r->pool.width_m);
    f->contour[1][at] = none_if_no_track(r, 1e6 * r->pool.depth_m);
    f->contour[2][at] = r->build_rate_m3_per_s * 3.6e9;
    const double distance = r->status == MW_NO_MELT ? -INFINITY : mw_window_distance(&r->judgement);
    if (distance > f->best_distance) {
        f->best_distance = distance;
        f->best = r->setting;
    }
    return MW_OK;
}

/* ---- showing ---- */

/* What of the map lies beyond the published record, from its two outer corners; "" where nothing does. */
static void beyond_record(const map_run *m, char *text, size_t size)
{
    const mw_grid *g = &m->axes.grid;
    const mw_setting low = {g->power_W[0], g->speed_m_per_s[0], g->hatch_m[0], g->layer_m[0], g->d4sigma_m, g->preheat_K};
    const mw_setting high = {g->power_W[g->n_power - 1], g->speed_m_per_s[g->n_speed - 1], g->hatch_m[g->n_hatch - 1], g->layer_m[g->n_layer - 1],
                             NAN, NAN}; /* beam and preheat are said once */
    size_t used = mw_setting_outside(&m->plan, &low, text, size);
    if (used > 0 && used + 2 < size && mw_setting_outside(&m->plan, &high, NULL, 0) > 0) {
        memcpy(text + used, ", ", 3);
        used += 2;
    }
    if (used < size)
        (void)mw_setting_outside(&m->plan, &high, text + used, size - used);
}

static mw_status draw(map_run *m, mw_error *err)
{
    const mw_grid *g = &m->axes.grid;
    char title[128], beam[160], footer[160];
    (void)snprintf(title, sizeof title, "%s%s%s%s: process map", m->alloy->name, m->alloy->n_designation > 0 ? " (" : "",
                   m->alloy->n_designation > 0 ? m->alloy->designation[0] : "", m->alloy->n_designation > 0 ? ")" : "");
    (void)snprintf(beam, sizeof beam, "beam %.4g \xC2\xB5m (D4sigma), plate at %.4g \xC2\xB0" "C, model %s", 1e6 * g->d4sigma_m, g->preheat_K - 273.15,
                   mw_model_word(m->plan.model));
    (void)snprintf(footer, sizeof footer, "meltwright %s, card %s: an estimate, confirm with coupons", mw_version(), m->alloy->hash);
    char outside[400], beyond[440];
    beyond_record(m, outside, sizeof outside);
    (void)snprintf(beyond, sizeof beyond, "beyond the published record: %s", outside);
    const char *const subtitle[] = {beam, beyond};
    mw_map_panel panels[MW_MAP_MOST_PANELS];
    mw_map_contours sets[MW_MAP_MOST_PANELS][CONTOUR_KINDS];
    for (size_t p = 0; p < m->n_panel; p++) {
        const panel_fields *f = &m->panel[p];
        size_t n = 0;
        for (int k = 0; k < CONTOUR_KINDS; k++)
            if (m->contour[k])
                sets[p][n++] = (mw_map_contours){contour_kind[k].name, contour_kind[k].unit, f->contour[k], 0, NULL};
        panels[p] = (mw_map_panel){1e6 * g->hatch_m[p / g->n_layer], 1e6 * g->layer_m[p % g->n_layer], f->lof, f->over, f->melt, f->balling, n, sets[p]};
    }
    const mw_map_picture picture = {.title = title,
                                    .n_subtitle = outside[0] != '\0' ? 2 : 1,
                                    .subtitle = subtitle,
                                    .footer = footer,
                                    .n_power = g->n_power,
                                    .power_W = g->power_W,
                                    .n_speed = g->n_speed,
                                    .speed_mm_per_s = m->speed_mm_per_s,
                                    .n_panel = m->n_panel,
                                    .panels = panels,
                                    .n_energy = m->n_energy,
                                    .energy_J_per_mm3 = m->energy,
                                    .n_mark = m->n_mark,
                                    .marks = m->mark};
    return mw_map_draw(&picture, m->args->value[OPT_OUTPUT], given(m->args, OPT_FORCE), err);
}

static mw_status shares_of(const map_run *m, size_t p, mw_map_share *share, mw_error *err)
{
    const mw_grid *g = &m->axes.grid;
    const panel_fields *f = &m->panel[p];
    const mw_map_panel panel = {1e6 * g->hatch_m[p / g->n_layer], 1e6 * g->layer_m[p % g->n_layer], f->lof, f->over, f->melt, f->balling, 0, NULL};
    return mw_map_shares(&panel, g->n_power, g->power_W, g->n_speed, m->speed_mm_per_s, share, err);
}

static mw_status print_text(const map_run *m, FILE *to, mw_error *err)
{
    const mw_grid *g = &m->axes.grid;
    (void)fprintf(to, "%s, beam %.4g um (D4sigma), plate at %.4g C, model %s, %zu powers x %zu speeds\n\n", m->alloy->name, 1e6 * g->d4sigma_m,
                  g->preheat_K - 273.15, mw_model_word(m->plan.model), g->n_power, g->n_speed);
    (void)fputs("  hatch  layer   nominal  lack of  keyhole    no     most robust place on the grid\n"
                "     um     um             fusion            track\n", to);
    for (size_t p = 0; p < m->n_panel; p++) {
        mw_map_share share;
        mw_status status = shares_of(m, p, &share, err);
        if (status != MW_OK)
            return status;
        const double part[] = {share.nominal, share.lack_of_fusion, share.keyhole, share.no_track};
        static const int width[] = {7, 6, 6, 6};
        (void)fprintf(to, "%7.4g %6.4g", 1e6 * g->hatch_m[p / g->n_layer], 1e6 * g->layer_m[p % g->n_layer]);
        for (size_t k = 0; k < sizeof part / sizeof *part; k++) {
            if (part[k] > 0 && part[k] < 0.005) /* a sliver is not nothing */
                (void)fprintf(to, " %*s %%", width[k], "<0.5");
            else
                (void)fprintf(to, " %*.0f %%", width[k], 100 * part[k]);
        }
        const panel_fields *f = &m->panel[p];
        mw_result r;
        if (!(f->best_distance > 0)) {
            (void)fputs("   nothing is nominal here\n", to);
            continue;
        }
        status = mw_evaluate(&m->plan, &f->best, true, &r, err);
        if (status < 0)
            return status;
        (void)fprintf(to, "   %.4g W, %.4g mm/s: nominal %.2f, %.0f x %.0f um wide x deep, %.3g cm3/h\n", r.setting.power_W, 1e3 * r.setting.speed_m_per_s,
                      r.judgement.p_nominal, 1e6 * r.pool.width_m, 1e6 * r.pool.depth_m, r.build_rate_m3_per_s * 3.6e9);
    }
    char outside[400];
    beyond_record(m, outside, sizeof outside);
    if (outside[0] != '\0')
        (void)fprintf(to, "\nbeyond what published tracks and cubes cover, and a guess there: %s\n", outside);
    return MW_OK;
}

static mw_status print_json(const map_run *m, FILE *to, const mw_provenance *provenance, mw_error *err)
{
    const mw_grid *g = &m->axes.grid;
    (void)fputs("{\"made_by\": ", to);
    mw_json_provenance(to, provenance);
    (void)fputs(",\n\"panels\": [", to);
    for (size_t p = 0; p < m->n_panel; p++) {
        mw_map_share share;
        mw_status status = shares_of(m, p, &share, err);
        if (status != MW_OK)
            return status;
        const double value[] = {1e6 * g->hatch_m[p / g->n_layer], 1e6 * g->layer_m[p % g->n_layer], share.nominal, share.lack_of_fusion, share.keyhole,
                                share.no_track};
        static const char *const key[] = {"hatch_um", "layer_um", "share_nominal", "share_lack_of_fusion", "share_keyhole", "share_no_track"};
        (void)fputs(p > 0 ? ",\n{" : "\n{", to);
        for (size_t k = 0; k < sizeof value / sizeof *value; k++) {
            (void)fprintf(to, "\"%s\": ", key[k]);
            mw_json_number(to, value[k]);
            (void)fputs(", ", to);
        }
        (void)fputs("\"most_robust\": ", to);
        mw_result r;
        if (m->panel[p].best_distance > 0) {
            status = mw_evaluate(&m->plan, &m->panel[p].best, true, &r, err);
            if (status < 0)
                return status;
            mw_json_result(to, &r);
        } else {
            (void)fputs("null", to);
        }
        (void)fputc('}', to);
    }
    char outside[400];
    beyond_record(m, outside, sizeof outside);
    (void)fputs("\n],\n\"beyond_published_record\": ", to);
    mw_json_string(to, outside);
    (void)fputs("}\n", to);
    return MW_OK;
}

static mw_status put_csv_row(void *to, const mw_result *r)
{
    mw_csv_row(to, r, NULL);
    (void)fputc('\n', to);
    return MW_OK;
}

static mw_status print_map(map_run *m, output_format format, int threads, mw_error *err)
{
    provenance_store store;
    mw_provenance provenance;
    fill_provenance(m->args, &m->plan, &store, &provenance);
    if (format == FORMAT_JSON)
        return print_json(m, stdout, &provenance, err);
    if (format == FORMAT_TEXT)
        return print_text(m, stdout, err);
    mw_csv_header(stdout, NULL);
    (void)fputc('\n', stdout);
    return mw_sweep(&m->plan, &m->axes.grid, false, threads, put_csv_row, stdout, err);
}

static mw_status run(map_run *m, mw_error *err)
{
    output_format format;
    int threads = 0;
    mw_status status = refuse_words(m->args, err);
    if (status == MW_OK)
        status = need(m->args, OPT_ALLOY, err);
    if (status == MW_OK)
        status = read_format(m->args, FORMAT_TEXT, &format, err);
    if (status == MW_OK)
        status = read_threads(m->args, &threads, err);
    if (status == MW_OK)
        status = read_axes(m, err);
    if (status == MW_OK)
        status = read_contours(m, err);
    if (status == MW_OK)
        status = read_energies(m, err);
    if (status == MW_OK)
        status = make_plan(m->args, &m->alloy, &m->plan, err);
    if (status == MW_OK)
        status = read_marks(m, err);
    if (status == MW_OK)
        status = make_panels(m, err);
    if (status == MW_OK)
        status = mw_sweep_by_table(&m->plan, &m->axes.grid, threads, take_cell, m, err);
    if (status == MW_OK && given(m->args, OPT_OUTPUT))
        status = draw(m, err);
    if (status == MW_OK)
        status = print_map(m, format, threads, err);
    if (status == MW_OK && given(m->args, OPT_OUTPUT))
        remark(m->args, "picture in %s", m->args->value[OPT_OUTPUT]);
    if (status == MW_OK && given(m->args, OPT_OUTPUT) && (m->axes.grid.n_power < FEW || m->axes.grid.n_speed < FEW))
        remark(m->args, "few values make coarse outlines; a range without COUNT takes 129");
    return status;
}

int run_map(const arguments *args)
{
    mw_error err = {MW_OK, ""};
    map_run m = {.args = args};
    const mw_status status = run(&m, &err);
    for (size_t i = 0; i < m.n_mark; i++)
        free(m.label[i]);
    free(m.energy);
    free(m.speed_mm_per_s);
    free(m.store);
    free(m.panel);
    mw_alloy_free(m.alloy);
    free_grid(&m.axes);
    return status == MW_OK ? EXIT_DONE : complain(args->command, &err);
}
