/* SPDX-License-Identifier: GPL-3.0-or-later
 * Published single tracks against the default model: as shipped, and with the coupling fitted to the other papers only. */
#include "validate.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/csv.h"
#include "meltwright/text.h"
#include "stats.h"

typedef struct track_row {
    double power_W, speed_m_per_s, d4sigma_m, layer_m;
    double width_m, depth_m, length_m; /* measured; NaN where not */
} track_row;

/* A data set is a part of a paper that is measured in one way. `paper` is what is left out together; empty: never fitted.
 * `need` and `avoid` are texts that the row's note must or must not hold. */
typedef struct data_set {
    const char *name, *paper, *file, *card, *condition, *need, *avoid;
    double layer_um;  /* rows with this layer only; NaN: any */
    double beam_um;   /* where the row has none */
    const char *beam; /* how well it is known */
} data_set;

static const data_set sets[] = {
    {"Lane 2020, 625, bare", "Lane", "lane2020_IN625", "625", "bare", NULL, NULL, NAN, NAN, "measured D4sigma"},
    {"Weaver 2023, 718, bare", "Weaver", "weaver2023_IN718", "718", "bare", NULL, NULL, NAN, NAN, "measured (5 of 6)"},
    {"Hofmann 2026, 316L, bare", "Hofmann", "hofmann2026_316L", "316L", NULL, NULL, "FLAG", 0, NAN, "not defined"},
    {"Hofmann 30 um, series A", "", "hofmann2026_316L", "316L", NULL, "series=A", "FLAG", 30, NAN, "not defined"},
    {"Hofmann 30 um, series B", "", "hofmann2026_316L", "316L", NULL, "series=B", "FLAG", 30, NAN, "not defined"},
    {"Hofmann 60 um, series A", "", "hofmann2026_316L", "316L", NULL, "series=A", "FLAG", 60, NAN, "not defined"},
    {"Hofmann 60 um, series B", "", "hofmann2026_316L", "316L", NULL, "series=B", "FLAG", 60, NAN, "not defined"},
    {"Coen 2021, 316L", "Coen", "coen2021_316L_Ti64", "316L", NULL, NULL, NULL, NAN, 37.5, "37.5 um quoted"},
    {"Coen 2021, 718", "Coen", "coen2021_IN718", "718", NULL, NULL, NULL, NAN, 37.5, "37.5 um quoted"},
    {"Totis 2021, Ti-6Al-4V", "Totis", "totis2021_Ti64", "Ti-6Al-4V", NULL, NULL, "FLAG", NAN, NAN, "1/e2"},
    {"Dilip 2017, Ti-6Al-4V", "Dilip", "dilip2017_Ti64", "Ti-6Al-4V", NULL, NULL, NULL, NAN, NAN, "not defined"},
    {"Trapp 2017, 316L, bare", "Trapp", "trapp2017_absorptivity_digitised", "316L", "bare", NULL, NULL, NAN, NAN, "1/e2"},
    {"Ghosh 2018, 625, bare", "", "ghosh2018_IN625", "625", "bare", NULL, NULL, NAN, 100, "not stated: 100 um"},
};
enum { SETS = sizeof sets / sizeof *sets, MOST_ROWS = 400, COUPLINGS = 31 };
static const double first_coupling = 0.28, coupling_step = 0.01;

typedef struct predicted {
    double width_m, depth_m, length_m, width_lo, width_hi, depth_lo, depth_hi, length_lo, length_hi;
} predicted;

typedef struct loaded {
    track_row row[MOST_ROWS];
    size_t n;
    predicted shipped[MOST_ROWS], *by_coupling; /* [coupling][row] */
} loaded;

static double cell(const mw_csv_reader *r, const char *column)
{
    for (size_t i = 0; i < mw_csv_columns(r); i++)
        if (strcmp(mw_csv_column_name(r, i), column) == 0) {
            double value;
            const mw_csv_field_view f = mw_csv_get(r, i);
            return mw_read_number(f.text, f.n, &value) ? value : NAN;
        }
    return NAN;
}

static const char *text(const mw_csv_reader *r, const char *column)
{
    for (size_t i = 0; i < mw_csv_columns(r); i++)
        if (strcmp(mw_csv_column_name(r, i), column) == 0)
            return mw_csv_get(r, i).text;
    return "";
}

static bool wanted(const data_set *s, const mw_csv_reader *r, double layer_um)
{
    const char *note = text(r, "note");
    return (s->condition == NULL || strcmp(text(r, "condition"), s->condition) == 0) && (s->need == NULL || strstr(note, s->need) != NULL) &&
           (s->avoid == NULL || strstr(note, s->avoid) == NULL) && (isnan(s->layer_um) || layer_um == s->layer_um);
}

static void load(const data_set *s, loaded *out)
{
    char path[256];
    mw_csv_reader *r;
    mw_error err;
    bool end = false;
    (void)snprintf(path, sizeof path, "tests/data/measured/%s.csv", s->file);
    stop_on(mw_csv_open(path, &r, &err), &err);
    out->n = 0;
    while (out->n < MOST_ROWS) {
        stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        const double layer_um = isnan(cell(r, "layer_um")) ? 0 : cell(r, "layer_um");
        const double beam_um = isnan(cell(r, "spot_um")) ? s->beam_um : cell(r, "spot_um");
        const track_row row = {cell(r, "power_W"), cell(r, "speed_mm_s") * 1e-3, beam_um * 1e-6, layer_um * 1e-6,
                               cell(r, "width_um") * 1e-6, cell(r, "depth_um") * 1e-6, cell(r, "length_um") * 1e-6};
        if (wanted(s, r, layer_um) && !(isnan(row.width_m) && isnan(row.depth_m)) && row.speed_m_per_s > 0)
            out->row[out->n++] = row;
    }
    mw_csv_close(r);
}

/* coupling NaN: the card's own. Every published plate is taken at room temperature: none states another. */
static void predict(const mw_alloy *alloy, double coupling, const loaded *set, predicted *out)
{
    mw_overrides o = mw_no_overrides;
    mw_plan plan;
    mw_error err;
    o.absorptivity = coupling;
    stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, &o, 298.15, &plan, &err), &err);
    for (size_t i = 0; i < set->n; i++) {
        const track_row *t = &set->row[i];
        const mw_setting s = {t->power_W, t->speed_m_per_s, NAN, t->layer_m, t->d4sigma_m, 298.15};
        mw_result r;
        if (mw_evaluate(&plan, &s, false, &r, &err) < 0)
            stop_on(err.status, &err);
        out[i] = (predicted){r.pool.width_m, r.pool.depth_m, r.pool.length_m, r.width_lo_m, r.width_hi_m, r.depth_lo_m, r.depth_hi_m, r.length_lo_m,
                             r.length_hi_m};
    }
}

static double soft(double predicted_m, double measured_m)
{
    if (isnan(measured_m))
        return 0;
    const double r = predicted_m > 0 ? log(predicted_m / measured_m) / 0.2 : 5;
    return 2 * (sqrt(1 + r * r) - 1);
}

/* Soft-L1 of ln width and ln depth over one set at one coupling, a mean over rows. */
static double loss(const loaded *set, size_t coupling)
{
    double sum = 0;
    for (size_t i = 0; i < set->n; i++) {
        const predicted *p = &set->by_coupling[coupling * MOST_ROWS + i];
        sum += soft(p->width_m, set->row[i].width_m) + soft(p->depth_m, set->row[i].depth_m);
    }
    return sum / (double)set->n;
}

/* The coupling that serves the fitted sets of all papers but one best; papers weigh alike. Index into the grid. */
static size_t fit_without(const loaded *set, const char *paper)
{
    size_t best = 0;
    double least = INFINITY;
    for (size_t c = 0; c < COUPLINGS; c++) {
        double sum = 0;
        for (size_t s = 0; s < SETS; s++)
            if (sets[s].paper[0] != '\0' && strcmp(sets[s].paper, paper) != 0)
                sum += loss(&set[s], c) * (strcmp(sets[s].paper, "Coen") == 0 ? 0.5 : 1);
        if (sum < least) {
            least = sum;
            best = c;
        }
    }
    return best;
}

typedef struct summary {
    size_t n;
    int n_conduction, n_keyhole;
    double width, width_bias, depth_c, depth_c_bias, depth_k, depth_k_bias, length, length_bias, in_width, in_depth, mode;
} summary;

static summary summarise(const loaded *set, const predicted *p)
{
    enum { W, C, K, L, QUANTITIES };
    double signed_error[QUANTITIES][MOST_ROWS], error[QUANTITIES][MOST_ROWS], in_width[MOST_ROWS], in_depth[MOST_ROWS], mode[MOST_ROWS];
    summary s = {.n = set->n};
    for (size_t i = 0; i < set->n; i++) {
        const track_row *m = &set->row[i];
        const bool keyhole = m->depth_m >= 0.5 * m->width_m;
        const double e[QUANTITIES] = {p[i].width_m / m->width_m - 1, keyhole ? NAN : p[i].depth_m / m->depth_m - 1,
                                      keyhole ? p[i].depth_m / m->depth_m - 1 : NAN, p[i].length_m / m->length_m - 1};
        for (int q = 0; q < QUANTITIES; q++) {
            signed_error[q][i] = 100 * e[q];
            error[q][i] = fabs(100 * e[q]);
        }
        s.n_conduction += !isnan(e[C]);
        s.n_keyhole += !isnan(e[K]);
        in_width[i] = isnan(m->width_m) ? NAN : m->width_m >= p[i].width_lo && m->width_m <= p[i].width_hi;
        in_depth[i] = isnan(m->depth_m) ? NAN : m->depth_m >= p[i].depth_lo && m->depth_m <= p[i].depth_hi;
        mode[i] = isnan(m->depth_m) || isnan(m->width_m) ? NAN : (p[i].depth_m >= 0.5 * p[i].width_m) == keyhole;
    }
    s.width = stat_median(error[W], s.n);
    s.width_bias = stat_median(signed_error[W], s.n);
    s.depth_c = stat_median(error[C], s.n);
    s.depth_c_bias = stat_median(signed_error[C], s.n);
    s.depth_k = stat_median(error[K], s.n);
    s.depth_k_bias = stat_median(signed_error[K], s.n);
    s.length = stat_median(error[L], s.n);
    s.length_bias = stat_median(signed_error[L], s.n);
    s.in_width = stat_mean(in_width, s.n);
    s.in_depth = stat_mean(in_depth, s.n);
    s.mode = stat_mean(mode, s.n);
    return s;
}

static void number(double value, const char *form)
{
    char out[32] = "";
    if (!isnan(value))
        (void)snprintf(out, sizeof out, form, value);
    (void)printf("%7s", isnan(value) ? "-" : out);
}

static void print_row(const data_set *set, const summary *s, double coupling)
{
    (void)printf("%-26s %4zu", set->name, s->n);
    number(coupling, "%.2f");
    number(s->width, "%.1f");
    number(s->width_bias, "%+.1f");
    number(s->depth_c, "%.1f");
    number(s->depth_c_bias, "%+.1f");
    number(s->depth_k, "%.1f");
    number(s->depth_k_bias, "%+.1f");
    number(s->length, "%.1f");
    number(s->in_width, "%.2f");
    number(s->in_depth, "%.2f");
    number(s->mode, "%.2f");
    (void)printf("  %s\n", set->beam);
}

static void print_table(const char *title, const summary *s, const double *coupling)
{
    (void)printf("\n%s\n%-26s %4s%7s%7s%7s%7s%7s%7s%7s%7s%7s%7s%7s  beam\n", title, "data set", "n", "A0", "W %", "bias", "Dc %", "bias", "Dk %", "bias",
                 "L %", "W in", "D in", "mode");
    double column[7][SETS];
    for (size_t i = 0; i < SETS; i++) {
        print_row(&sets[i], &s[i], coupling[i]);
        /* A median of one or two rows says nothing about a set. */
        const double value[7] = {s[i].width, s[i].n_conduction >= 3 ? s[i].depth_c : NAN, s[i].n_keyhole >= 3 ? s[i].depth_k : NAN, s[i].length,
                                 s[i].in_width, s[i].in_depth, s[i].mode};
        for (int c = 0; c < 7; c++)
            column[c][i] = value[c];
    }
    for (int mean = 0; mean < 2; mean++) {
        (void)printf("%-26s %4s%7s", mean ? "mean of the sets" : "median of the sets", "", "");
        for (int c = 0; c < 7; c++) {
            number((mean ? stat_mean : stat_median)(column[c], SETS), c < 4 ? "%.1f" : "%.2f");
            if (c < 3)
                (void)printf("%7s", "");
        }
        (void)putchar('\n');
    }
}

void validate_tracks(void)
{
    static loaded set[SETS];
    static summary shipped[SETS], left_out[SETS];
    double card_coupling[SETS], fitted[SETS];
    for (size_t s = 0; s < SETS; s++) {
        mw_alloy *alloy = find_card(sets[s].card);
        load(&sets[s], &set[s]);
        predict(alloy, NAN, &set[s], set[s].shipped);
        set[s].by_coupling = malloc(COUPLINGS * MOST_ROWS * sizeof *set[s].by_coupling);
        for (size_t c = 0; c < COUPLINGS; c++)
            predict(alloy, first_coupling + coupling_step * (double)c, &set[s], &set[s].by_coupling[c * MOST_ROWS]);
        card_coupling[s] = mw_property_at(&alloy->property[MW_PROP_COUPLING], 0);
        shipped[s] = summarise(&set[s], set[s].shipped);
        mw_alloy_free(alloy);
    }
    for (size_t s = 0; s < SETS; s++) {
        const size_t c = fit_without(set, sets[s].paper);
        fitted[s] = first_coupling + coupling_step * (double)c;
        left_out[s] = summarise(&set[s], &set[s].by_coupling[c * MOST_ROWS]);
    }
    (void)printf("Single tracks. W, Dc, Dk, L: median absolute error in percent of width, depth in conduction (measured D/W < 0.5), depth in keyhole mode,\n"
                 "length; bias: median signed error. W in, D in: share inside the 90 %% interval. mode: predicted D/W >= 0.5 agrees with measured.\n");
    print_table("As shipped (coupling of the card)", shipped, card_coupling);
    print_table("Coupling A0 fitted to the other papers (paper left out as a whole)", left_out, fitted);
    for (size_t s = 0; s < SETS; s++)
        free(set[s].by_coupling);
}
