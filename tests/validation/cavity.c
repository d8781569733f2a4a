/* SPDX-License-Identifier: GPL-3.0-or-later
 * Published evidence on the vapour cavity itself, none of it used in a fit: where it opens, how deep it is, how much light it takes. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "../csv_cells.h"
#include "stats.h"
#include "validate.h"

enum { MOST_POINTS = 200 };

typedef struct cavity_point {
    char alloy[24], condition[16];
    char mode[40];
    double power_W, speed_m_per_s, d4sigma_m, depth_m, absorptivity;
} cavity_point;

/* Reads a file of points; depth from the note ("keyhole_depth_um=33.0"), where these files keep what is not a melt pool. */
static size_t load_points(const char *file, cavity_point *out)
{
    static const char key[] = "keyhole_depth_um=";
    char path[256];
    mw_csv_reader *r;
    mw_error err;
    bool end = false;
    size_t n = 0;
    (void)snprintf(path, sizeof path, "tests/data/measured/%s.csv", file);
    stop_on(mw_csv_open(path, &r, &err), &err);
    while (n < MOST_POINTS) {
        stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        const char *depth = strstr(cell_text(r, "note"), key);
        cavity_point p = {.power_W = cell_number(r, "power_W"), .speed_m_per_s = cell_number(r, "speed_mm_s") / 1e3, .d4sigma_m = cell_number(r, "spot_um") / 1e6,
                          .depth_m = depth == NULL ? NAN : text_number(depth + sizeof key - 1, strspn(depth + sizeof key - 1, "0123456789.")) / 1e6,
                          .absorptivity = cell_number(r, "absorptivity")};
        (void)snprintf(p.alloy, sizeof p.alloy, "%s", cell_text(r, "alloy"));
        (void)snprintf(p.condition, sizeof p.condition, "%s", cell_text(r, "condition"));
        (void)snprintf(p.mode, sizeof p.mode, "%s", cell_text(r, "mode"));
        if (p.power_W > 0 && p.speed_m_per_s > 0 && p.d4sigma_m > 0)
            out[n++] = p;
    }
    mw_csv_close(r);
    return n;
}

static mw_track track_of(const mw_plan *plan, const cavity_point *p)
{
    mw_track t;
    mw_error err = {MW_OK, "no pool at a published point"};
    stop_on(mw_track_at(plan, p->power_W, p->speed_m_per_s, p->d4sigma_m, &t), &err);
    return t;
}

static void plan_for(const char *card, mw_alloy **alloy, mw_plan *plan)
{
    mw_error err;
    *alloy = find_card(card);
    stop_on(mw_plan_make(*alloy, MW_MODEL_DEFAULT, NULL, 298.15, plan, &err), &err);
}

/* Power at which a depression shows (R. Cunningham et al., Science 363 (2019) 849, read by a third party) against the onset index, which is linear in power. */
static void depression_line(void)
{
    static cavity_point p[MOST_POINTS];
    mw_alloy *alloy;
    mw_plan plan;
    const size_t n = load_points("cunningham2019_Ti64_boundaries_digitised", p);
    plan_for("Ti-6Al-4V", &alloy, &plan);
    static const char *const line[2] = {"depression", "transition | keyhole"};
    for (int which = 0; which < 2; which++) {
        double index[MOST_POINTS];
        int count = 0;
        for (size_t i = 0; i < n; i++) {
            const bool here = strstr(p[i].mode, line[which]) != NULL;
            index[i] = here ? track_of(&plan, &p[i]).onset_index : NAN;
            count += here;
        }
        (void)printf("  Ti-6Al-4V, line of %s, %d points: onset index %.2f there in the median (1: a cavity opens)\n",
                     which == 0 ? "the first depression" : "the keyhole", count, stat_median(index, n));
    }
    mw_alloy_free(alloy);
}

/* Depth of the cavity by X-ray imaging (Z. Gan et al., Nat. Commun. 12 (2021) 2379). */
static void imaged_depth(void)
{
    static cavity_point p[MOST_POINTS];
    mw_alloy *alloy;
    mw_plan plan;
    const size_t n = load_points("gan2021_Ti64_keyhole", p);
    plan_for("Ti-6Al-4V", &alloy, &plan);
    double error[2][MOST_POINTS], bias[2][MOST_POINTS];
    int count[2] = {0, 0};
    for (size_t i = 0; i < n; i++) {
        const int deep = p[i].depth_m > 40e-6;
        const double e = 100 * (track_of(&plan, &p[i]).cavity_depth_m / p[i].depth_m - 1);
        for (int k = 0; k < 2; k++) {
            error[k][i] = k == deep ? fabs(e) : NAN;
            bias[k][i] = k == deep ? e : NAN;
        }
        count[deep] += !isnan(e);
    }
    for (int deep = 1; deep >= 0; deep--)
        (void)printf("  Ti-6Al-4V, cavity %s 40 um deep, %d points: median error %.1f %%, bias %+.1f %%\n", deep ? "more than" : "up to", count[deep],
                     stat_median(error[deep], n), stat_median(bias[deep], n));
    mw_alloy_free(alloy);
}

/* Absorptivity of bare discs by calorimetry (J. Trapp et al., Appl. Mater. Today 9 (2017) 341, read by a third party). The coupling is higher by
 * intent; what is checked is where the light begins to be trapped, and how much of it. */
static void disc_absorptivity(const char *in_file, const char *card)
{
    static cavity_point p[MOST_POINTS];
    mw_alloy *alloy;
    mw_plan plan;
    const size_t n = load_points("trapp2017_absorptivity_digitised", p);
    plan_for(card, &alloy, &plan);
    double below[MOST_POINTS], above[MOST_POINTS];
    int n_below = 0, n_above = 0;
    for (size_t i = 0; i < n; i++) {
        below[i] = above[i] = NAN;
        if (strcmp(p[i].alloy, in_file) != 0 || strcmp(p[i].condition, "bare") != 0 || isnan(p[i].absorptivity))
            continue;
        const mw_track t = track_of(&plan, &p[i]);
        const double difference = t.absorptivity - p[i].absorptivity;
        if (t.onset_index < 1) {
            below[i] = difference;
            n_below++;
        } else {
            above[i] = difference;
            n_above++;
        }
    }
    (void)printf("  %s, bare disc: coupling less measured absorptivity %+.2f without cavity (%d points), %+.2f with one (%d points), medians\n", card,
                 stat_median(below, n), n_below, stat_median(above, n), n_above);
    mw_alloy_free(alloy);
}

void validate_cavity(void)
{
    (void)printf("\nThe cavity itself. Where it opens was used to choose the onset ratios (316L, Ti-6Al-4V, W); its depth was used for nothing\n");
    depression_line();
    imaged_depth();
    disc_absorptivity("316L", "316L");
    if (find_card_if_any("W") != NULL)
        disc_absorptivity("W", "W");
}
