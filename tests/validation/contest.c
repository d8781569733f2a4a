/* SPDX-License-Identifier: GPL-3.0-or-later
 * Other forms of the pool model on the same published tracks, each with its coupling fitted to the other papers: what the default model is
 * better than, and by how much. Published forms are cited beside their functions. */
#include <math.h>
#include <stdlib.h>

#include "meltwright/gaussian.h"
#include "meltwright/keyhole.h"
#include "meltwright/rosenthal.h"
#include "stats.h"
#include "track_sets.h"
#include "validate.h"

/* A track of a set with the media of its alloy. */
typedef struct track_case {
    const track_row *row;
    const mw_plan *plan;
    double coupling;
} track_case;

typedef struct form {
    const char *name;
    void (*predict)(const track_case *t, const struct form *f, predicted *out);
    size_t changed; /* offset of the one constant that differs from the defaults */
    double value;   /* NaN: none does */
} form;

/* The constants of a variant of the default model. */
static mw_keyhole_constants constants_of(const form *f)
{
    mw_keyhole_constants c = mw_keyhole_defaults;
    if (!isnan(f->value))
        *(double *)((char *)&c + f->changed) = f->value;
    return c;
}

static predicted sized(double width_m, double depth_m, double length_m)
{
    return (predicted){width_m, depth_m, length_m, NAN, NAN, NAN, NAN, NAN, NAN};
}

static mw_source source_of(const track_case *t)
{
    return (mw_source){t->coupling * t->row->power_W, t->row->speed_m_per_s, t->row->d4sigma_m / 4};
}

static void point_source(const track_case *t, const form *f, predicted *out)
{
    (void)f;
    const mw_source s = source_of(t);
    mw_pool p;
    stop_on(mw_rosenthal_pool(&s, &t->plan->melt, &p), NULL);
    *out = sized(p.width_m, p.depth_m, p.length_m);
}

static mw_pool gaussian_pool(const track_case *t, const mw_medium *medium)
{
    const mw_source s = source_of(t);
    mw_pool p;
    stop_on(mw_gaussian_pool(&s, medium, &p), NULL);
    return p;
}

static void gaussian_source(const track_case *t, const form *f, predicted *out)
{
    (void)f;
    const mw_pool p = gaussian_pool(t, &t->plan->melt);
    *out = sized(p.width_m, p.depth_m, p.length_m);
}

/* Gaussian source for width and length; the deeper of its depth and a keyhole law of its own for depth. */
static void with_keyhole_depth(const track_case *t, double keyhole_m, predicted *out)
{
    const mw_pool p = gaussian_pool(t, &t->plan->melt);
    *out = sized(p.width_m, fmax(p.depth_m, keyhole_m), p.length_m);
}

/* Depth over beam radius 0.4 (Ke - 1.4), Ke = A P/((Tm-T0) pi rho c sqrt(alpha v r^3)): Z. Gan et al., Nat. Commun. 12 (2021) 2379 (from memory). */
static void keyhole_number_law(const track_case *t, const form *f, predicted *out)
{
    (void)f;
    const mw_medium *m = &t->plan->melt;
    const double r = t->row->d4sigma_m / 2, alpha = m->conductivity_W_per_mK / m->volumetric_heat_J_per_m3K;
    const double ke = t->coupling * t->row->power_W / ((m->isotherm_K - m->ambient_K) * acos(-1) * m->volumetric_heat_J_per_m3K * sqrt(alpha * t->row->speed_m_per_s * r * r * r));
    with_keyhole_depth(t, 0.4 * r * fmax(ke - 1.4, 0), out);
}

/* Power over what a moving isothermal cylinder as wide as the beam gives off, at constant absorptivity: P.S. Lankalapalli, J.F. Tu, M. Gartner,
 * J. Phys. D 29 (1996) 1831 (from memory), with the exact series. */
static void cylinder_law(const track_case *t, const form *f, predicted *out)
{
    (void)f;
    const mw_medium *b = &t->plan->boil;
    const double peclet = t->row->speed_m_per_s * t->row->d4sigma_m * b->volumetric_heat_J_per_m3K / (4 * b->conductivity_W_per_mK);
    with_keyhole_depth(t, t->coupling * t->row->power_W / (b->conductivity_W_per_mK * (b->isotherm_K - b->ambient_K) * mw_cylinder_heat(peclet)), out);
}

/* A P/(2 pi k (Tb-T0)) ln((r + alpha/v)/r): G.G. Gladush, I. Smurov, Physics of Laser Materials Processing, Springer (2011) (from memory). */
static void logarithmic_law(const track_case *t, const form *f, predicted *out)
{
    (void)f;
    const mw_medium *b = &t->plan->boil;
    const double r = t->row->d4sigma_m / 2, alpha = b->conductivity_W_per_mK / b->volumetric_heat_J_per_m3K;
    with_keyhole_depth(t, t->coupling * t->row->power_W / (2 * acos(-1) * b->conductivity_W_per_mK * (b->isotherm_K - b->ambient_K)) * log1p(alpha / (t->row->speed_m_per_s * r)), out);
}

static void cavity_pool(const track_case *t, const mw_medium *melt, const form *f, predicted *out)
{
    const mw_keyhole_constants constants = constants_of(f);
    const mw_keyhole_input in = {t->row->power_W, t->coupling, t->row->speed_m_per_s, t->row->d4sigma_m, t->row->layer_m, *melt, t->plan->boil};
    mw_keyhole_pool k;
    stop_on(mw_keyhole_pool_compute(&in, &constants, &k), NULL);
    *out = sized(k.pool.width_m, k.pool.depth_m, k.pool.length_m);
}

static void default_form(const track_case *t, const form *f, predicted *out)
{
    cavity_pool(t, &t->plan->melt, f, out);
}

static void without_latent_heat(const track_case *t, const form *f, predicted *out)
{
    mw_medium melt = t->plan->melt;
    const mw_alloy *a = t->plan->alloy;
    melt.volumetric_heat_J_per_m3K -= t->plan->density_cold_kg_per_m3 * mw_property_at(&a->property[MW_PROP_LATENT_FUSION], 0) / (melt.isotherm_K - melt.ambient_K);
    cavity_pool(t, &melt, f, out);
}

static void solidus_conductivity(const track_case *t, const form *f, predicted *out)
{
    mw_medium melt = t->plan->melt;
    melt.conductivity_W_per_mK = mw_property_at(&t->plan->alloy->property[MW_PROP_CONDUCTIVITY_SOLID], melt.isotherm_K);
    cavity_pool(t, &melt, f, out);
}

/* A conduction coupling of 0.8 times the cavity's: closer to flat absorptivity without a cavity. */
static void two_couplings(const track_case *t, const form *f, predicted *out)
{
    track_case flat = *t;
    flat.coupling *= 0.8;
    predicted cavity, alone;
    default_form(t, f, &cavity);
    default_form(&flat, f, &alone);
    const mw_source s = source_of(t);
    double peclet, strength;
    stop_on(mw_gaussian_numbers(&s, &t->plan->boil, &peclet, &strength), NULL);
    *out = strength * mw_gaussian_peak(peclet, NULL) < mw_keyhole_defaults.onset_ratio ? alone : cavity;
}

#define AS_IT_IS 0, NAN
#define WITH(constant, value) offsetof(mw_keyhole_constants, constant), value
static const form forms[] = {
    {"point source alone", point_source, AS_IT_IS},
    {"Gaussian source alone", gaussian_source, AS_IT_IS},
    {"  + keyhole number law", keyhole_number_law, AS_IT_IS},
    {"  + moving cylinder, A constant", cylinder_law, AS_IT_IS},
    {"  + logarithmic law", logarithmic_law, AS_IT_IS},
    {"default", default_form, AS_IT_IS},
    {"  without latent heat", without_latent_heat, AS_IT_IS},
    {"  conductivity at the solidus", solidus_conductivity, AS_IT_IS},
    {"  two couplings, 0.8 below onset", two_couplings, AS_IT_IS},
    {"  no gate", default_form, WITH(gate_exponent, 1000)},
    {"  gate exponent 4", default_form, WITH(gate_exponent, 4)},
    {"  gate exponent 8", default_form, WITH(gate_exponent, 8)},
    {"  gate exponent 30", default_form, WITH(gate_exponent, 30)},
    {"  onset ratio 2.0", default_form, WITH(onset_ratio, 2.0)},
    {"  onset ratio 3.4", default_form, WITH(onset_ratio, 3.4)},
    {"  cone, c = 2", default_form, WITH(cavity_shape, 2)},
    {"  cylinder with bottom, c = 4", default_form, WITH(cavity_shape, 4)},
    {"  blend exponent 2", default_form, WITH(blend_exponent, 2)},
    {"  blend exponent 5", default_form, WITH(blend_exponent, 5)},
    {"  powder layer ignored", default_form, WITH(layer_factor, 0)},
    {"  no flow widening", default_form, WITH(flow_widening, 1)},
};
enum { FORMS = sizeof forms / sizeof *forms };

static void predict_set(const form *f, const mw_plan *plan, const track_rows *rows, double coupling, predicted *out)
{
    for (size_t i = 0; i < rows->n; i++) {
        const track_case t = {&rows->row[i], plan, coupling};
        f->predict(&t, f, &out[i]);
    }
}

/* One line: medians over the sets with the paper left out, and the mean loss there. */
static void run(const form *f, const mw_plan *plan, const track_rows *rows, predicted *all)
{
    coupling_scan scan[TRACK_SETS];
    double w[TRACK_SETS], c[TRACK_SETS], k[TRACK_SETS], l[TRACK_SETS], mode[TRACK_SETS], loss[TRACK_SETS];
    for (size_t s = 0; s < TRACK_SETS; s++) {
        predicted *const here = &all[s * COUPLINGS * MOST_ROWS];
        for (size_t i = 0; i < COUPLINGS; i++)
            predict_set(f, &plan[s], &rows[s], coupling_at(i), &here[i * MOST_ROWS]);
        scan[s] = (coupling_scan){&rows[s], here};
    }
    for (size_t s = 0; s < TRACK_SETS; s++) {
        const size_t i = fit_coupling_without(scan, track_sets[s].paper);
        const summary m = summarise_tracks(&rows[s], &scan[s].at[i * MOST_ROWS]);
        w[s] = m.width;
        c[s] = m.n_conduction >= 3 ? m.depth_c : NAN;
        k[s] = m.n_keyhole >= 3 ? m.depth_k : NAN;
        l[s] = m.length;
        mode[s] = m.mode;
        loss[s] = track_sets[s].paper[0] != '\0' ? track_loss(&scan[s], i) : NAN;
    }
    (void)printf("%-34s %7.2f %9.1f %8.1f %8.1f %8.1f %8.1f %8.2f %8.3f\n", f->name, coupling_at(fit_coupling_without(scan, "")), stat_median(w, TRACK_SETS),
                 stat_mean(w, TRACK_SETS), stat_median(c, TRACK_SETS), stat_median(k, TRACK_SETS), stat_mean(l, TRACK_SETS), stat_mean(mode, TRACK_SETS),
                 stat_mean(loss, TRACK_SETS));
}

void validate_contest(void)
{
    static track_rows rows[TRACK_SETS];
    static mw_plan plan[TRACK_SETS];
    mw_alloy *alloy[TRACK_SETS];
    mw_error err;
    predicted *all = malloc(TRACK_SETS * COUPLINGS * MOST_ROWS * sizeof *all);
    for (size_t s = 0; s < TRACK_SETS; s++) {
        load_track_set(&track_sets[s], &rows[s]);
        alloy[s] = find_card(track_sets[s].card);
        stop_on(mw_plan_make(alloy[s], MW_MODEL_DEFAULT, NULL, 298.15, &plan[s], &err), &err);
    }
    (void)printf("\nOther forms on the same tracks, each with its coupling fitted to the other papers. Median over the sets (W also mean, L mean) of the\n"
                 "median absolute error in percent; mode: mean agreement; loss: the mean of what the fit minimises, over the papers left out.\n\n%-34s %7s %9s %8s %8s %8s %8s %8s %8s\n",
                 "form", "A0", "W median", "W mean", "Dc", "Dk", "L", "mode", "loss");
    for (size_t f = 0; f < FORMS; f++)
        run(&forms[f], plan, rows, all);
    for (size_t s = 0; s < TRACK_SETS; s++)
        mw_alloy_free(alloy[s]);
    free(all);
}
