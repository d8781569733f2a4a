/* SPDX-License-Identifier: GPL-3.0-or-later
 * From a card, a model and overrides to the constants that a whole study uses. */
#include <math.h>
#include <stddef.h>

#include "meltwright/study.h"

const mw_overrides mw_no_overrides = {NAN, NAN, NAN, NAN, NAN};

static const struct {
    const char *word, *description;
} model_table[MW_MODEL_COUNT] = {
    [MW_MODEL_DEFAULT] = {"default", "Gaussian source that opens a vapour cavity (conduction to keyhole)"},
    [MW_MODEL_ROSENTHAL] = {"rosenthal", "moving point source, conduction only (Rosenthal 1946)"},
    [MW_MODEL_GAUSSIAN] = {"gaussian", "moving Gaussian source, conduction only (Eagar and Tsai 1983)"},
};

const char *mw_model_word(mw_model model)
{
    return model_table[model].word;
}

const char *mw_model_description(mw_model model)
{
    return model_table[model].description;
}

static mw_status check_overrides(const mw_overrides *o, mw_error *err)
{
    const struct {
        const char *name;
        double value, low, high;
    } check[] = {
        {"absorptivity", o->absorptivity, 0.001, 1},
        {"conductivity (W/(m K))", o->conductivity_W_per_mK, 0.1, 2000},
        {"density (kg/m3)", o->density_kg_per_m3, 100, 30000},
        {"heat capacity (J/(kg K))", o->heat_capacity_J_per_kgK, 10, 20000},
        {"melting point (K)", o->melting_point_K, 200, 6000},
    };
    for (size_t i = 0; i < sizeof check / sizeof *check; i++)
        if (!isnan(check[i].value) && !(check[i].value >= check[i].low && check[i].value <= check[i].high))
            return mw_fail(err, MW_BAD_VALUE, NULL, 0, "%s %g is outside %g to %g", check[i].name, check[i].value, check[i].low,
                           check[i].high);
    return MW_OK;
}

static bool all_constants(const mw_overrides *o)
{
    return !isnan(o->conductivity_W_per_mK) && !isnan(o->density_kg_per_m3) && !isnan(o->heat_capacity_J_per_kgK) &&
           !isnan(o->melting_point_K);
}

/* Melt properties at the liquidus, for the keyhole number. A density or heat that the card does not have stays NaN. */
static mw_medium liquid_medium(const mw_alloy *alloy, double preheat_K)
{
    const double liquidus = mw_property_at(&alloy->property[MW_PROP_LIQUIDUS], 0);
    return (mw_medium){
        .conductivity_W_per_mK = mw_property_at(&alloy->property[MW_PROP_CONDUCTIVITY_LIQUID], liquidus),
        .volumetric_heat_J_per_m3K = mw_property_at(&alloy->property[MW_PROP_DENSITY_LIQUID], liquidus) *
                                     mw_property_at(&alloy->property[MW_PROP_HEAT_LIQUID], liquidus),
        .ambient_K = preheat_K,
        .isotherm_K = liquidus,
    };
}

/* Overrides that do not make a whole check case replace their part of the card's averages and leave the rest, latent heat included. */
static void apply_overrides(mw_plan *plan, const mw_effective *card, const mw_overrides *o)
{
    const double melting = isnan(o->melting_point_K) ? card->melt.isotherm_K : o->melting_point_K;
    const double rise = melting - plan->preheat_K, card_rise = card->melt.isotherm_K - plan->preheat_K;
    const double density = isnan(o->density_kg_per_m3) ? card->density_cold_kg_per_m3 : o->density_kg_per_m3;
    const double sensible = isnan(o->heat_capacity_J_per_kgK) ? card->sensible_J_per_kg / card_rise : o->heat_capacity_J_per_kgK;
    const double latent = card->enthalpy_to_melt_J_per_kg - card->sensible_J_per_kg;
    plan->melt = card->melt;
    plan->melt.isotherm_K = melting;
    plan->melt.volumetric_heat_J_per_m3K = density * (sensible + latent / rise);
    plan->boil = card->boil;
    plan->boil.volumetric_heat_J_per_m3K *= density / card->density_cold_kg_per_m3;
    plan->density_cold_kg_per_m3 = density;
    if (!isnan(o->conductivity_W_per_mK))
        plan->melt.conductivity_W_per_mK = plan->boil.conductivity_W_per_mK = o->conductivity_W_per_mK;
}

static mw_status plan_from_card(mw_plan *plan, const mw_overrides *o, mw_error *err)
{
    mw_effective card;
    const mw_status status = mw_alloy_effective(plan->alloy, plan->preheat_K, &card);
    if (status < 0)
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "preheat %.4g C is outside what the card of %s allows: -73 C to below the solidus, %.4g C",
                       plan->preheat_K - 273.15, plan->alloy->name,
                       mw_property_at(&plan->alloy->property[MW_PROP_SOLIDUS], 0) - 273.15);
    apply_overrides(plan, &card, o);
    plan->liquid = liquid_medium(plan->alloy, plan->preheat_K);
    plan->surface_tension_N_per_m = card.surface_tension_N_per_m;
    plan->absorptivity = mw_property_at(&plan->alloy->property[MW_PROP_COUPLING], 0);
    plan->constants.onset_ratio = mw_property_at(&plan->alloy->property[MW_PROP_ONSET], 0);
    if (!(plan->melt.isotherm_K < plan->boil.isotherm_K))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "melting point %g K is not below the boiling temperature, %g K", plan->melt.isotherm_K,
                       plan->boil.isotherm_K);
    return MW_OK;
}

static void plan_from_constants(mw_plan *plan, const mw_overrides *o)
{
    plan->check_case = true;
    plan->melt = (mw_medium){o->conductivity_W_per_mK, o->density_kg_per_m3 * o->heat_capacity_J_per_kgK, plan->preheat_K,
                             o->melting_point_K};
    plan->density_cold_kg_per_m3 = o->density_kg_per_m3;
    if (isnan(plan->boil.isotherm_K))
        return;
    /* With a card beside them, the constants hold up to boiling too. */
    const double boiling = plan->boil.isotherm_K;
    plan->boil = plan->melt;
    plan->boil.isotherm_K = boiling;
}

mw_status mw_plan_make(const mw_alloy *alloy, mw_model model, const mw_overrides *overrides, double preheat_K, mw_plan *out,
                       mw_error *err)
{
    static const mw_medium unknown = {NAN, NAN, NAN, NAN};
    const mw_overrides *o = overrides != NULL ? overrides : &mw_no_overrides;
    *out = (mw_plan){.alloy = alloy,
                     .model = model,
                     .preheat_K = preheat_K,
                     .absorptivity = NAN,
                     .melt = unknown,
                     .boil = unknown,
                     .liquid = unknown,
                     .density_cold_kg_per_m3 = NAN,
                     .surface_tension_N_per_m = NAN,
                     .constants = mw_keyhole_defaults,
                     .kind = model == MW_MODEL_DEFAULT ? MW_POOL_CAVITY : MW_POOL_FLAT};
    mw_status status = check_overrides(o, err);
    if (status != MW_OK)
        return status;
    if (!isfinite(preheat_K))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "preheat is not a number");
    const bool whole = all_constants(o);
    if (alloy == NULL && (!whole || isnan(o->absorptivity)))
        return mw_fail(err, MW_BAD_USAGE, NULL, 0,
                       "an alloy is needed, or absorptivity, conductivity, density, heat capacity and melting point all five");
    if (alloy == NULL && model == MW_MODEL_DEFAULT)
        return mw_fail(err, MW_BAD_USAGE, NULL, 0,
                       "the default model needs an alloy for the boiling temperature; without one choose the gaussian or rosenthal model");
    if (alloy != NULL)
        status = plan_from_card(out, o, err);
    if (status != MW_OK)
        return status;
    if (whole)
        plan_from_constants(out, o);
    if (!isnan(o->absorptivity))
        out->absorptivity = o->absorptivity;
    if (!(out->melt.isotherm_K > preheat_K))
        return mw_fail(err, MW_BAD_VALUE, NULL, 0, "preheat %.4g K is not below the melting point, %.4g K", preheat_K, out->melt.isotherm_K);
    return MW_OK;
}
