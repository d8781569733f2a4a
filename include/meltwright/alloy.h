/* SPDX-License-Identifier: GPL-3.0-or-later
 * Alloy cards: JSON files with properties, each with unit, uncertainty and source; and the averages that the models use. */
#ifndef MELTWRIGHT_ALLOY_H
#define MELTWRIGHT_ALLOY_H

#include <stdbool.h>
#include <stddef.h>

#include "meltwright/pool.h"
#include "meltwright/status.h"

/* The one list of what an alloy card can hold. X(NAME, key, shape, need, lowest, highest, meaning)
 * shape: CONSTANT = {"value"}, TABLE = {"value"} or {"temperature_K", "value"} as lists.  need: REQUIRED or OPTIONAL.
 * The unit is the tail of the key. The loader, the JSON Schema and `card show` are all made from this list. */
#define MW_PROPERTY_LIST(X)                                                                                                     \
    X(SOLIDUS, "solidus_K", CONSTANT, REQUIRED, 300, 4500, "end of freezing; edge of the pool")                                 \
    X(LIQUIDUS, "liquidus_K", CONSTANT, REQUIRED, 300, 4500, "start of freezing")                                               \
    X(BOILING, "boiling_K", CONSTANT, REQUIRED, 800, 7000, "vapour pressure of the melt reaches one atmosphere")                \
    X(LATENT_FUSION, "latent_heat_fusion_J_per_kg", CONSTANT, REQUIRED, 1e4, 2e6, "enthalpy of melting")                        \
    X(LATENT_VAPOUR, "latent_heat_vaporisation_J_per_kg", CONSTANT, OPTIONAL, 1e6, 5e7, "enthalpy of boiling")                  \
    X(DENSITY_SOLID, "density_solid_kg_per_m3", TABLE, REQUIRED, 500, 25000, "density below the solidus")                       \
    X(DENSITY_LIQUID, "density_liquid_kg_per_m3", TABLE, OPTIONAL, 500, 25000, "density of the melt")                           \
    X(HEAT_SOLID, "heat_capacity_solid_J_per_kgK", TABLE, REQUIRED, 50, 5000, "without the heat of melting")                    \
    X(HEAT_LIQUID, "heat_capacity_liquid_J_per_kgK", TABLE, REQUIRED, 50, 5000, "of the melt")                                  \
    X(CONDUCTIVITY_SOLID, "conductivity_solid_W_per_mK", TABLE, REQUIRED, 0.5, 600, "thermal conductivity below the solidus")   \
    X(CONDUCTIVITY_LIQUID, "conductivity_liquid_W_per_mK", TABLE, REQUIRED, 0.5, 600, "thermal conductivity of the melt")       \
    X(VISCOSITY_LIQUID, "viscosity_liquid_Pa_s", TABLE, OPTIONAL, 1e-4, 0.1, "of the melt near the liquidus")                   \
    X(SURFACE_TENSION, "surface_tension_N_per_m", TABLE, REQUIRED, 0.1, 4, "of the melt near the liquidus")                     \
    X(SURFACE_TENSION_SLOPE, "surface_tension_slope_N_per_mK", CONSTANT, OPTIONAL, -2e-3, 2e-3, "sign depends on sulphur, oxygen") \
    X(ABSORPTIVITY_FLAT, "absorptivity_flat_ratio", CONSTANT, REQUIRED, 0.005, 1, "flat surface, 1.06-1.08 um, no cavity, as measured") \
    X(ABSORPTIVITY_POWDER, "absorptivity_powder_ratio", CONSTANT, OPTIONAL, 0.005, 1, "unmelted powder bed; not used for the pool") \
    X(ABSORPTIVITY_KEYHOLE, "absorptivity_keyhole_ratio", CONSTANT, OPTIONAL, 0.005, 1, "deep cavity, as measured; a check, not an input") \
    X(COUPLING, "coupling_ratio", CONSTANT, REQUIRED, 0.005, 1, "effective absorptivity A0 of the pool models, fitted to tracks") \
    X(ONSET, "cavity_onset_ratio", CONSTANT, REQUIRED, 0.5, 10, "computed peak rise over boiling rise where the cavity starts")

typedef enum mw_property_id {
#define X(name, key, shape, need, lo, hi, meaning) MW_PROP_##name,
    MW_PROPERTY_LIST(X)
#undef X
    MW_PROPERTY_COUNT
} mw_property_id;

/* One property: n = 0 absent; n = 1 a constant (temperature_K NaN unless the card gives it); n > 1 a table with rising
 * temperatures. Between rows it is linear; outside them the end value holds (the card's own range is kept for warnings). */
typedef struct mw_property {
    size_t n;
    const double *temperature_K;
    const double *value;
    double uncertainty_pct;      /* standard uncertainty (k = 1), percent of the value */
    bool from_memory;            /* the number was not seen in an opened source */
    const char *estimated_by;    /* the rule, where the value is an estimate; else NULL */
    size_t n_source;
    const char *const *source;   /* keys into the card's sources */
    const char *note;            /* why this row and not another; may be NULL */
} mw_property;

typedef struct mw_source_entry {
    const char *key, *citation, *doi /* may be NULL */, *seen;
} mw_source_entry;

typedef struct mw_composition_limit {
    const char *element;
    double low_pct, high_pct;    /* mass percent */
} mw_composition_limit;

/* A loaded card. Everything it points to lives until mw_alloy_free. */
typedef struct mw_alloy {
    const char *name;             /* e.g. "316L" */
    const char *path;             /* file it came from */
    char hash[17];                /* FNV-1a 64 of the file's bytes, hex: enough to tell two versions apart, no protection */
    size_t n_designation;
    const char *const *designation; /* e.g. "UNS S31603" */
    const char *summary;
    size_t n_caution;
    const char *const *caution;   /* words: "reactive-powder", "nickel", "cobalt", "chromium" */
    const char *balance;          /* element that makes up the rest */
    size_t n_limit;
    const mw_composition_limit *limit;
    mw_property property[MW_PROPERTY_COUNT];
    size_t n_source;
    const mw_source_entry *source;
    void *arena;                  /* private */
} mw_alloy;

/* The key of a property ("solidus_K") and its meaning. Static storage. */
const char *mw_property_key(mw_property_id id);
const char *mw_property_meaning(mw_property_id id);

/* Loads and checks one card. One clear error with file, line, key, value, what is allowed and the nearest valid name.
 * Errors: MW_CANNOT_READ, MW_BAD_FILE, MW_TOO_LARGE (over 4 MB), MW_NO_MEMORY. Free with mw_alloy_free (NULL is fine). */
mw_status mw_alloy_load(const char *path, mw_alloy **out, mw_error *err);
void mw_alloy_free(mw_alloy *alloy);

/* Finds a card by name, designation ("S31603", "UNS S31603"; letter case and blanks do not matter) or path (contains '/'
 * or ends in ".json") among the *.json files of dirs[0..n_dir-1], first directory first, and loads it.
 * A *.json file whose "card" is not "alloy", or whose name ends in ".schema.json", is passed over.
 * In one folder a name goes before a designation; two cards that match alike are refused (MW_BAD_FILE). When no folder has the word
 * as it stands, letters and digits alone are compared ("Ti6Al4V"), and a name that is a number may follow letters ("alloy 718").
 * Errors: as mw_alloy_load, and MW_NOT_FOUND with the nearest name and the directories searched. */
mw_status mw_alloy_find(const char *name, const char *const dirs[], size_t n_dir, mw_alloy **out, mw_error *err);

/* Names of all alloy cards in the directories, sorted; free with mw_names_free. */
mw_status mw_alloy_names(const char *const dirs[], size_t n_dir, char ***names, size_t *n, mw_error *err);
void mw_names_free(char **names, size_t n);

/* The JSON Schema (draft 2020-12) of an alloy card, made from MW_PROPERTY_LIST. The caller frees it with free(). NULL: out of memory. */
char *mw_alloy_schema(void);

/* Value of a property at a temperature: linear between rows, end value outside. NaN when absent. */
double mw_property_at(const mw_property *property, double temperature_K);
/* Mean of a property over [from_K, to_K]: exact integral of the piecewise linear table over the interval / length. NaN when absent. */
double mw_property_mean(const mw_property *property, double from_K, double to_K);

/* Averages from the tables for one preheat. */
typedef struct mw_effective {
    mw_medium melt;    /* preheat to solidus: Kirchhoff mean of k; cold density times (enthalpy + latent heat) / rise; isotherm = solidus */
    mw_medium boil;    /* preheat to boiling: k over solid and liquid, enthalpy with both latent-free parts + latent heat of fusion; isotherm = boiling */
    double density_cold_kg_per_m3;        /* at 298 K: sections are measured in cold metal, mass is conserved */
    double enthalpy_to_melt_J_per_kg;     /* preheat to solidus, with the latent heat of fusion */
    double sensible_J_per_kg;             /* the same without it */
    double surface_tension_N_per_m;       /* at the liquidus */
} mw_effective;

/* physics: Kirchhoff transformation for k and the enthalpy mean for rho c. preheat_K from 200 K up to below the solidus.
 * Errors: MW_BAD_VALUE. Warning MW_OUTSIDE_CHECKED when the preheat lies more than 30 K below the tables' first row. */
mw_status mw_alloy_effective(const mw_alloy *alloy, double preheat_K, mw_effective *out);

#endif
