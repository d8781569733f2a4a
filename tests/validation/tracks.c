/* SPDX-License-Identifier: GPL-3.0-or-later
 * Published single tracks against the default model: as shipped, and with the coupling fitted to the other papers only. */
#include "validate.h"

#include <math.h>
#include <stdlib.h>

#include "meltwright/parityplot.h"

#include "stats.h"
#include "track_sets.h"

/* coupling NaN: the card's own. Every published plate is taken at room temperature: none states another. */
static void predict(const mw_alloy *alloy, double coupling, const track_rows *set, predicted *out)
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
    double column[7][TRACK_SETS];
    for (size_t i = 0; i < TRACK_SETS; i++) {
        print_row(&track_sets[i], &s[i], coupling[i]);
        /* A median of one or two rows says nothing about a set. */
        const double value[7] = {s[i].width, s[i].n_conduction >= 3 ? s[i].depth_c : NAN, s[i].n_keyhole >= 3 ? s[i].depth_k : NAN, s[i].length,
                                 s[i].in_width, s[i].in_depth, s[i].mode};
        for (int c = 0; c < 7; c++)
            column[c][i] = value[c];
    }
    for (int mean = 0; mean < 2; mean++) {
        (void)printf("%-26s %4s%7s", mean ? "mean of the sets" : "median of the sets", "", "");
        for (int c = 0; c < 7; c++) {
            number((mean ? stat_mean : stat_median)(column[c], TRACK_SETS), c < 4 ? "%.1f" : "%.2f");
            if (c < 3)
                (void)printf("%7s", "");
        }
        (void)putchar('\n');
    }
}

/* The shipped predictions as a picture: width, and depth with conduction tracks as outlines. */
static void draw_parity(const track_rows rows[], predicted shipped[][MOST_ROWS], const summary s[], const char *path)
{
    enum { WIDTH, DEPTH, PANELS };
    static double measured[PANELS][TRACK_SETS][MOST_ROWS], computed[PANELS][TRACK_SETS][MOST_ROWS];
    static bool conduction[TRACK_SETS][MOST_ROWS];
    static char note[TRACK_SETS][48];
    mw_parity_points points[PANELS][TRACK_SETS];
    const char *name[TRACK_SETS], *notes[TRACK_SETS];
    for (size_t k = 0; k < TRACK_SETS; k++) {
        for (size_t i = 0; i < rows[k].n; i++) {
            const track_row *t = &rows[k].row[i];
            measured[WIDTH][k][i] = 1e6 * t->width_m;
            measured[DEPTH][k][i] = 1e6 * t->depth_m;
            computed[WIDTH][k][i] = 1e6 * shipped[k][i].width_m;
            computed[DEPTH][k][i] = 1e6 * shipped[k][i].depth_m;
            conduction[k][i] = t->depth_m < 0.5 * t->width_m;
        }
        points[WIDTH][k] = (mw_parity_points){rows[k].n, measured[WIDTH][k], computed[WIDTH][k], NULL};
        points[DEPTH][k] = (mw_parity_points){rows[k].n, measured[DEPTH][k], computed[DEPTH][k], conduction[k]};
        (void)snprintf(note[k], sizeof note[k], "%zu, width %.0f %%", rows[k].n, s[k].width);
        name[k] = track_sets[k].name;
        notes[k] = note[k];
    }
    const mw_parity_panel panel[PANELS] = {{"melt width (\xc2\xb5m)", points[WIDTH]}, {"melt depth (\xc2\xb5m); outlines: in conduction", points[DEPTH]}};
    const mw_parity_picture picture = {.title = "Published single tracks, predicted with one coupling and no calibration",
                                       .subtitle = "each set: number of tracks, median absolute error of width; offsets of whole sets in depth follow the stated beam",
                                       .footer = "sources and doubts: tests/data/measured/SOURCES.md",
                                       .n_group = TRACK_SETS, .group = name, .note = notes, .n_panel = PANELS, .panel = panel};
    mw_error err;
    stop_on(mw_parity_draw(&picture, path, true, &err), &err);
}

void validate_tracks(const char *picture)
{
    static track_rows rows[TRACK_SETS];
    static coupling_scan scan[TRACK_SETS];
    static summary shipped[TRACK_SETS], left_out[TRACK_SETS];
    static predicted as_shipped[TRACK_SETS][MOST_ROWS];
    double card_coupling[TRACK_SETS], fitted[TRACK_SETS];
    predicted *all = malloc(TRACK_SETS * COUPLINGS * MOST_ROWS * sizeof *all);
    for (size_t s = 0; s < TRACK_SETS; s++) {
        mw_alloy *alloy = find_card(track_sets[s].card);
        load_track_set(&track_sets[s], &rows[s]);
        predict(alloy, NAN, &rows[s], as_shipped[s]);
        shipped[s] = summarise_tracks(&rows[s], as_shipped[s]);
        predicted *const here = &all[s * COUPLINGS * MOST_ROWS];
        for (size_t c = 0; c < COUPLINGS; c++)
            predict(alloy, coupling_at(c), &rows[s], &here[c * MOST_ROWS]);
        scan[s] = (coupling_scan){&rows[s], here};
        card_coupling[s] = mw_property_at(&alloy->property[MW_PROP_COUPLING], 0);
        mw_alloy_free(alloy);
    }
    for (size_t s = 0; s < TRACK_SETS; s++) {
        const size_t c = fit_coupling_without(scan, track_sets[s].paper);
        fitted[s] = coupling_at(c);
        left_out[s] = summarise_tracks(&rows[s], &scan[s].at[c * MOST_ROWS]);
    }
    (void)printf("Single tracks. W, Dc, Dk, L: median absolute error in percent of width, depth in conduction (measured D/W < 0.5), depth in keyhole mode,\n"
                 "length; bias: median signed error. W in, D in: share inside the 90 %% interval. mode: predicted D/W >= 0.5 agrees with measured.\n");
    print_table("As shipped (coupling of the card)", shipped, card_coupling);
    print_table("Coupling A0 fitted to the other papers (paper left out as a whole)", left_out, fitted);
    free(all);
    if (picture != NULL)
        draw_parity(rows, as_shipped, shipped, picture);
}
