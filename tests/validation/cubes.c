/* SPDX-License-Identifier: GPL-3.0-or-later
 * Density of cubes within published studies: order, area under the ROC curve, and stated against observed probability; as shipped, and with the
 * verdict's four constants fitted to the other studies only. */
#include "validate.h"

#include <gsl/gsl_multimin.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "../csv_cells.h"
#include "stats.h"

enum { MOST_STUDIES = 40, MOST_SETTINGS = 120 };

typedef struct cube {
    char key[96]; /* the setting as written */
    double overlap, ratio, ved, density;
    double p_nominal; /* as the program prints it */
    int n, nominal, dense; /* replicates; within 1 point of the best; at least 99.5 % */
} cube;

/* Cubes of one DOI, alloy and method: only these may be compared with each other. */
typedef struct study {
    char doi[80], alloy[24], method[32];
    cube cube[MOST_SETTINGS];
    size_t n;
    bool evaluated;
} study;

static study studies[MOST_STUDIES];
static size_t n_study;

static study *study_of(const mw_csv_reader *r)
{
    const char *doi = cell_text(r, "doi"), *alloy = cell_text(r, "alloy"), *method = cell_text(r, "method");
    for (size_t i = 0; i < n_study; i++)
        if (strcmp(studies[i].doi, doi) == 0 && strcmp(studies[i].alloy, alloy) == 0 && strcmp(studies[i].method, method) == 0)
            return &studies[i];
    if (n_study == MOST_STUDIES)
        return NULL;
    study *s = &studies[n_study++];
    (void)snprintf(s->doi, sizeof s->doi, "%s", doi);
    (void)snprintf(s->alloy, sizeof s->alloy, "%s", alloy);
    (void)snprintf(s->method, sizeof s->method, "%s", method);
    return s;
}

static void add_cube(study *s, const mw_csv_reader *r)
{
    char key[96];
    (void)snprintf(key, sizeof key, "%.16s|%.16s|%.16s|%.16s|%.16s", cell_text(r, "power_W"), cell_text(r, "speed_mm_per_s"), cell_text(r, "d4sigma_um"),
                   cell_text(r, "layer_um"), cell_text(r, "hatch_um"));
    const double density = cell_number(r, "relative_density_pct");
    for (size_t i = 0; i < s->n; i++)
        if (strcmp(s->cube[i].key, key) == 0) {
            s->cube[i].density = (s->cube[i].density * s->cube[i].n + density) / (s->cube[i].n + 1);
            s->cube[i].n++;
            return;
        }
    if (s->n == MOST_SETTINGS)
        return;
    cube *c = &s->cube[s->n++];
    *c = (cube){.density = density, .n = 1};
    memcpy(c->key, key, sizeof key);
    mw_alloy *alloy = find_card_if_any(s->alloy);
    s->evaluated = alloy != NULL;
    if (alloy == NULL)
        return;
    mw_plan plan;
    mw_result result;
    mw_error err;
    stop_on(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), &err);
    const mw_setting setting = {cell_number(r, "power_W"), cell_number(r, "speed_mm_per_s") / 1e3, cell_number(r, "hatch_um") / 1e6, cell_number(r, "layer_um") / 1e6,
                                cell_number(r, "d4sigma_um") / 1e6, 293.15};
    if (mw_evaluate(&plan, &setting, false, &result, &err) < 0)
        stop_on(err.status, &err);
    c->overlap = fmin(result.overlap_index, MW_OVERLAP_NO_POOL);
    c->ratio = result.melt_energy_ratio;
    c->p_nominal = result.judgement.p_nominal;
    c->ved = result.volumetric_energy_J_per_m3 / 1e9;
    mw_alloy_free(alloy);
}

static int falling(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x < y) - (x > y);
}

/* "Nominal": within one point of the study's best, the median of its densest sixth. */
static void label(study *s)
{
    double d[MOST_SETTINGS];
    for (size_t i = 0; i < s->n; i++)
        d[i] = s->cube[i].density;
    qsort(d, s->n, sizeof *d, falling);
    const size_t sixth = s->n / 6 > 0 ? (s->n + 3) / 6 : 1;
    const double best = stat_median(d, sixth);
    for (size_t i = 0; i < s->n; i++) {
        s->cube[i].nominal = s->cube[i].density > best - 1;
        s->cube[i].dense = s->cube[i].density >= 99.5;
    }
}

static void load(void)
{
    mw_csv_reader *r;
    mw_error err;
    bool end = false;
    stop_on(mw_csv_open("tests/data/measured/density_cubes.csv", &r, &err), &err);
    for (;;) {
        stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        study *s = study_of(r);
        if (s != NULL)
            add_cube(s, r);
    }
    mw_csv_close(r);
    for (size_t i = 0; i < n_study; i++)
        label(&studies[i]);
}

/* ---- the rule, and its fit ---- */

/* Constants as logarithms, so that the search is free of bounds. */
typedef struct constants { double overlap_half, overlap_slope, energy_half, energy_slope; } constants;

static double p_nominal(const cube *c, const constants *k)
{
    return 1 / (1 + pow(c->overlap / k->overlap_half, k->overlap_slope) + pow(c->ratio / k->energy_half, k->energy_slope));
}

typedef struct fit_to {
    const char *without; /* DOI left out, or "" */
} fit_to;

static constants from_vector(const gsl_vector *x)
{
    return (constants){exp(gsl_vector_get(x, 0)), exp(gsl_vector_get(x, 1)), exp(gsl_vector_get(x, 2)), exp(gsl_vector_get(x, 3))};
}

/* Copper is left out of the fit: its absorptivity is uncertain by a factor, so its studies say nothing about the limits. */
static double minus_log_likelihood(const gsl_vector *x, void *v)
{
    const fit_to *f = v;
    const constants k = from_vector(x);
    double sum = 0;
    for (size_t s = 0; s < n_study; s++) {
        if (!studies[s].evaluated || strcmp(studies[s].doi, f->without) == 0 || strncmp(studies[s].alloy, "Cu", 2) == 0)
            continue;
        double here = 0;
        for (size_t i = 0; i < studies[s].n; i++) {
            const double p = fmin(fmax(p_nominal(&studies[s].cube[i], &k), 1e-6), 1 - 1e-6);
            here -= studies[s].cube[i].nominal ? log(p) : log(1 - p);
        }
        sum += here / (double)(studies[s].n > 8 ? studies[s].n : 8);
    }
    return sum;
}

static constants fitted_without(const char *doi, const constants *start)
{
    fit_to to = {doi};
    gsl_multimin_function f = {minus_log_likelihood, 4, &to};
    gsl_vector *x = gsl_vector_alloc(4), *step = gsl_vector_alloc(4);
    const double from[4] = {start->overlap_half, start->overlap_slope, start->energy_half, start->energy_slope};
    for (size_t i = 0; i < 4; i++)
        gsl_vector_set(x, i, log(from[i]));
    gsl_vector_set_all(step, 0.2);
    gsl_multimin_fminimizer *m = gsl_multimin_fminimizer_alloc(gsl_multimin_fminimizer_nmsimplex2, 4);
    gsl_multimin_fminimizer_set(m, &f, x, step);
    for (int i = 0; i < 2000 && gsl_multimin_fminimizer_size(m) > 1e-5; i++)
        (void)gsl_multimin_fminimizer_iterate(m);
    const constants k = from_vector(m->x);
    gsl_multimin_fminimizer_free(m);
    gsl_vector_free(step);
    gsl_vector_free(x);
    return k;
}

/* ---- tables ---- */

typedef struct score { double order, auc; } score;

static score score_of(const study *s, const double *x)
{
    double density[MOST_SETTINGS];
    int dense[MOST_SETTINGS];
    for (size_t i = 0; i < s->n; i++) {
        density[i] = s->cube[i].density;
        dense[i] = s->cube[i].dense;
    }
    return (score){stat_spearman(x, density, s->n), stat_auc(x, dense, s->n)};
}

/* Volumetric energy density with its optimum tuned on this very study: an oracle, not a prediction. */
static score tuned_energy(const study *s)
{
    score best = {-2, NAN};
    double lo = INFINITY, hi = 0;
    for (size_t i = 0; i < s->n; i++) {
        lo = fmin(lo, s->cube[i].ved);
        hi = fmax(hi, s->cube[i].ved);
    }
    for (int k = 0; k < 80; k++) {
        const double optimum = log(lo) - 0.1 + (log(hi) - log(lo) + 0.2) * k / 79;
        double x[MOST_SETTINGS];
        for (size_t i = 0; i < s->n; i++)
            x[i] = -fabs(log(s->cube[i].ved) - optimum);
        const score here = score_of(s, x);
        if (here.order > best.order)
            best = here;
    }
    return best;
}

typedef struct reliability {
    double stated[5], observed[5];
    int n[5];
} reliability;

static void add_bins(const study *s, const double *p, reliability *bins)
{
    for (size_t i = 0; i < s->n; i++) {
        const int b = p[i] >= 1 ? 4 : (int)(5 * p[i]);
        bins->stated[b] += p[i];
        bins->observed[b] += s->cube[i].nominal;
        bins->n[b]++;
    }
}

static void print_bins(const char *title, const reliability *r)
{
    (void)printf("\n%s\n  p_nominal   settings   stated   observed\n", title);
    for (int b = 0; b < 5; b++) {
        if (r->n[b] == 0)
            continue;
        (void)printf("  %.1f-%.1f %12d %8.2f %10.2f%s\n", 0.2 * b, 0.2 * b + 0.2, r->n[b], r->stated[b] / r->n[b], r->observed[b] / r->n[b],
                     r->n[b] < 20 ? "   (fewer than 20)" : "");
    }
}

static void cell(double v)
{
    if (isnan(v))
        (void)printf("%8s", "-");
    else
        (void)printf("%8.2f", v);
}

enum { SHIPPED, LEFT_OUT, VED, TUNED, RULES };

void validate_cubes(void)
{
    static score all[RULES][MOST_STUDIES];
    load();
    const mw_limits *l = mw_verdict_limits(MW_POOL_CAVITY);
    const constants shipped = {l->overlap_half, l->overlap_slope, l->energy_half, l->energy_slope}, whole = fitted_without("", &shipped);
    reliability as_shipped = {0}, as_left_out = {0};
    constants lo = whole, hi = whole;
    (void)printf("\nCubes: Spearman rank correlation with density within each study, and area under the ROC curve for 'at least 99.5 %% dense'.\n"
                 "shipped: p_nominal; left out: its constants fitted to the other DOIs; VED: volumetric energy density alone; tuned: VED with its optimum\n"
                 "fitted to this very study (an oracle). Studies that cannot be ranked are listed in tests/data/measured/SOURCES.md.\n\n");
    (void)printf("%-40s %-11s %-8s %4s%8s%8s%8s%8s%8s%8s%8s%8s\n", "study (DOI)", "alloy", "method", "n", "shipped", "left", "VED", "tuned", "AUC", "left", "VED",
                 "tuned");
    size_t n = 0;
    double wins = 0;
    for (size_t s = 0; s < n_study; s++) {
        const study *t = &studies[s];
        (void)printf("%-40.40s %-11.11s %-8.8s %4zu", t->doi, t->alloy, t->method, t->n);
        if (!t->evaluated) {
            (void)printf("   no card\n");
            continue;
        }
        const constants k = fitted_without(t->doi, &whole);
        double p[MOST_SETTINGS], q[MOST_SETTINGS], ved[MOST_SETTINGS];
        for (size_t i = 0; i < t->n; i++) {
            p[i] = t->cube[i].p_nominal;
            q[i] = p_nominal(&t->cube[i], &k);
            ved[i] = t->cube[i].ved;
        }
        const score here[RULES] = {score_of(t, p), score_of(t, q), score_of(t, ved), tuned_energy(t)};
        for (int r = 0; r < RULES; r++)
            cell(here[r].order);
        for (int r = 0; r < RULES; r++)
            cell(here[r].auc);
        (void)putchar('\n');
        for (int r = 0; r < RULES; r++)
            all[r][n] = here[r];
        n++;
        wins += here[LEFT_OUT].order > here[VED].order;
        if (strncmp(t->alloy, "Cu", 2) != 0) {
            add_bins(t, p, &as_shipped);
            add_bins(t, q, &as_left_out);
        }
        lo = (constants){fmin(lo.overlap_half, k.overlap_half), fmin(lo.overlap_slope, k.overlap_slope), fmin(lo.energy_half, k.energy_half), fmin(lo.energy_slope, k.energy_slope)};
        hi = (constants){fmax(hi.overlap_half, k.overlap_half), fmax(hi.overlap_slope, k.overlap_slope), fmax(hi.energy_half, k.energy_half), fmax(hi.energy_slope, k.energy_slope)};
    }
    for (int mean = 0; mean < 2; mean++) {
        (void)printf("%-66s", mean ? "mean" : "median");
        for (int what = 0; what < 2; what++)
            for (int r = 0; r < RULES; r++) {
                double x[MOST_STUDIES];
                for (size_t i = 0; i < n; i++)
                    x[i] = what == 0 ? all[r][i].order : all[r][i].auc;
                cell((mean ? stat_mean : stat_median)(x, n));
            }
        (void)putchar('\n');
    }
    (void)printf("p_nominal with constants left out ranks better than VED in %.0f of %zu studies\n", wins, n);
    (void)printf("constants fitted to all: overlap %.3f ^ %.2f, melt energy ratio %.3f ^ %.2f; over studies left out %.2f-%.2f ^ %.1f-%.1f, %.2f-%.2f ^ %.1f-%.1f\n",
                 whole.overlap_half, whole.overlap_slope, whole.energy_half, whole.energy_slope, lo.overlap_half, hi.overlap_half, lo.overlap_slope,
                 hi.overlap_slope, lo.energy_half, hi.energy_half, lo.energy_slope, hi.energy_slope);
    print_bins("Stated against observed, as shipped (copper left out)", &as_shipped);
    print_bins("Stated against observed, constants fitted to the other studies (copper left out)", &as_left_out);
}
