/* SPDX-License-Identifier: GPL-3.0-or-later
 * The rules of the property list; values, means and the averages that the models use. */
#include <math.h>
#include <string.h>

#include "material/alloy_internal.h"

/* ---- rules ---- */

#define CONSTANT false
#define TABLE true
#define REQUIRED true
#define OPTIONAL false
static const mw_property_rule rules[MW_PROPERTY_COUNT] = {
#define X(name, key, shape, need, lo, hi, meaning) {key, meaning, shape, need, lo, hi},
    MW_PROPERTY_LIST(X)
#undef X
};

static const mw_key_unit units[] = {
    {"K", "in K", "degrees Celsius", 1, 273.15},
    {"J_per_kg", "in J/kg", "kJ/kg", 1e3, 0},
    {"kg_per_m3", "in kg/m3", "g/cm3", 1e3, 0},
    {"J_per_kgK", "in J/(kg K)", "J/(g K)", 1e3, 0},
    {"W_per_mK", "in W/(m K)", "W/(cm K)", 1e2, 0},
    {"Pa_s", "in Pa s", "mPa s", 1e-3, 0},
    {"N_per_m", "in N/m", "mN/m", 1e-3, 0},
    {"N_per_mK", "in N/(m K)", "mN/(m K)", 1e-3, 0},
    {"ratio", "as a ratio, not in percent", "percent", 1e-2, 0},
};

const mw_property_rule *mw_property_rule_of(mw_property_id id)
{
    return &rules[id];
}

const mw_key_unit *mw_property_unit(mw_property_id id, size_t *stem_length)
{
    const char *key = rules[id].key;
    const size_t length = strlen(key);
    for (size_t i = 0; i < sizeof units / sizeof *units; i++) {
        const size_t tail = strlen(units[i].tail);
        if (length <= tail + 1 || key[length - tail - 1] != '_' || strcmp(key + length - tail, units[i].tail) != 0)
            continue;
        if (stem_length != NULL)
            *stem_length = length - tail - 1;
        return &units[i];
    }
    return NULL; /* unreachable: a test walks the list */
}

bool mw_property_is_solid(mw_property_id id)
{
    return id == MW_PROP_DENSITY_SOLID || id == MW_PROP_HEAT_SOLID || id == MW_PROP_CONDUCTIVITY_SOLID;
}

bool mw_property_is_liquid(mw_property_id id)
{
    return id == MW_PROP_DENSITY_LIQUID || id == MW_PROP_HEAT_LIQUID || id == MW_PROP_CONDUCTIVITY_LIQUID ||
           id == MW_PROP_VISCOSITY_LIQUID || id == MW_PROP_SURFACE_TENSION;
}

const char *mw_property_key(mw_property_id id)
{
    return (unsigned)id < MW_PROPERTY_COUNT ? rules[id].key : "unknown";
}

const char *mw_property_meaning(mw_property_id id)
{
    return (unsigned)id < MW_PROPERTY_COUNT ? rules[id].meaning : "unknown";
}

/* ---- values ---- */

/* On the segment between rows i and i + 1. Written from the nearer row, so that a row gives its own value exactly. */
static double on_segment(const mw_property *p, size_t i, double t)
{
    const double t0 = p->temperature_K[i], t1 = p->temperature_K[i + 1];
    const double slope = (p->value[i + 1] - p->value[i]) / (t1 - t0);
    return t - t0 <= t1 - t ? p->value[i] + slope * (t - t0) : p->value[i + 1] - slope * (t1 - t);
}

double mw_property_at(const mw_property *p, double temperature_K)
{
    if (p->n == 0 || isnan(temperature_K))
        return NAN;
    if (p->n == 1 || temperature_K <= p->temperature_K[0])
        return p->value[0];
    if (temperature_K >= p->temperature_K[p->n - 1])
        return p->value[p->n - 1];
    size_t i = 0;
    while (temperature_K >= p->temperature_K[i + 1])
        i++;
    return on_segment(p, i, temperature_K);
}

/* Integral over [from, to], from <= to: held ends as rectangles, segments as trapezoids of what they share with
 * [from, to]. */
static double integral(const mw_property *p, double from, double to)
{
    if (p->n == 1)
        return p->value[0] * (to - from);
    const double first = p->temperature_K[0], last = p->temperature_K[p->n - 1];
    double sum = 0;
    if (from < first)
        sum += p->value[0] * (fmin(to, first) - from);
    for (size_t i = 0; i + 1 < p->n; i++) {
        const double a = fmax(from, p->temperature_K[i]), b = fmin(to, p->temperature_K[i + 1]);
        if (a < b)
            sum += 0.5 * (on_segment(p, i, a) + on_segment(p, i, b)) * (b - a);
    }
    if (to > last)
        sum += p->value[p->n - 1] * (to - fmax(from, last));
    return sum;
}

double mw_property_mean(const mw_property *p, double from_K, double to_K)
{
    if (p->n == 0 || !isfinite(from_K) || !isfinite(to_K))
        return NAN;
    if (from_K == to_K)
        return mw_property_at(p, from_K);
    const double low = fmin(from_K, to_K), high = fmax(from_K, to_K);
    return integral(p, low, high) / (high - low);
}

/* ---- averages ---- */

static const double cold_K = 298.15; /* 25 C, where densities of cold metal are stated */
static const double least_preheat_K = 200;
static const double outside_table_K = 30; /* so far below its first row a table is trusted to hold */

static double constant(const mw_alloy *alloy, mw_property_id id)
{
    return mw_property_at(&alloy->property[id], cold_K);
}

static mw_effective nothing(void)
{
    const mw_medium none = {NAN, NAN, NAN, NAN};
    const mw_effective out = {none, none, NAN, NAN, NAN, NAN};
    return out;
}

static bool below_table(const mw_property *p, double temperature_K)
{
    return p->n > 1 && temperature_K < p->temperature_K[0] - outside_table_K;
}

mw_status mw_alloy_effective(const mw_alloy *alloy, double preheat_K, mw_effective *out)
{
    const mw_property *cp_solid = &alloy->property[MW_PROP_HEAT_SOLID],
                      *cp_liquid = &alloy->property[MW_PROP_HEAT_LIQUID];
    const mw_property *k_solid = &alloy->property[MW_PROP_CONDUCTIVITY_SOLID];
    const mw_property *k_liquid = &alloy->property[MW_PROP_CONDUCTIVITY_LIQUID];
    const double solidus = constant(alloy, MW_PROP_SOLIDUS), boiling = constant(alloy, MW_PROP_BOILING);
    const double liquidus = constant(alloy, MW_PROP_LIQUIDUS), latent = constant(alloy, MW_PROP_LATENT_FUSION);
    *out = nothing();
    if (!(preheat_K >= least_preheat_K && preheat_K < solidus - 1 && boiling > solidus))
        return MW_BAD_VALUE;

    const double to_melt = solidus - preheat_K, to_boil = boiling - preheat_K, molten = boiling - solidus;
    const double k = mw_property_mean(k_solid, preheat_K, solidus);
    const double sensible = mw_property_mean(cp_solid, preheat_K, solidus) * to_melt;
    const double in_melt = mw_property_mean(cp_liquid, solidus, boiling) * molten;
    const double density = mw_property_at(&alloy->property[MW_PROP_DENSITY_SOLID], cold_K);
    const double k_boil = (k * to_melt + mw_property_mean(k_liquid, solidus, boiling) * molten) / to_boil;
    const mw_effective e = {
        .melt = {k, density * (sensible + latent) / to_melt, preheat_K, solidus},
        .boil = {k_boil, density * (sensible + latent + in_melt) / to_boil, preheat_K, boiling},
        .density_cold_kg_per_m3 = density,
        .enthalpy_to_melt_J_per_kg = sensible + latent,
        .sensible_J_per_kg = sensible,
        .surface_tension_N_per_m = mw_property_at(&alloy->property[MW_PROP_SURFACE_TENSION], liquidus),
    };
    /* NaN where a hand-made alloy lacks a property; a loaded card has them all. */
    const double all =
        e.melt.volumetric_heat_J_per_m3K + e.boil.volumetric_heat_J_per_m3K + k_boil + e.surface_tension_N_per_m;
    if (!isfinite(all))
        return MW_BAD_VALUE;
    *out = e;
    return below_table(cp_solid, preheat_K) || below_table(k_solid, preheat_K) ? MW_OUTSIDE_CHECKED : MW_OK;
}
