/* SPDX-License-Identifier: GPL-3.0-or-later
 * The "properties" of an alloy card: each alone, then against each other. */
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "material/alloy_internal.h"

/* ---- unknown keys ---- */

/* True when text is made of words of units joined by '_', as in "g_per_cm3". */
static bool looks_like_unit(const char *text)
{
    static const char *const word[] = {
        "per", "K",   "C",    "F",   "degC", "celsius", "kelvin", "g",   "kg",    "mg",  "mol",     "m",
        "cm",  "mm",  "um",   "m3",  "cm3",  "mm3",     "J",      "kJ",  "MJ",    "cal", "W",       "mW",
        "kW",  "mK",  "cmK",  "mmK", "kgK",  "gK",      "molK",   "mC",  "kgC",   "gC",  "Pa",      "mPa",
        "s",   "Pas", "mPas", "cP",  "P",    "N",       "mN",     "dyn", "ratio", "pct", "percent", "fraction"};
    for (const char *at = text;;) {
        const size_t n = strcspn(at, "_");
        bool known = false;
        for (size_t i = 0; i < sizeof word / sizeof *word && !known; i++)
            known = strlen(word[i]) == n && strncmp(at, word[i], n) == 0;
        if (!known)
            return false;
        if (at[n] == '\0')
            return true;
        at += n + 1;
    }
}

/* The property whose key is `key` with no unit or another one, or MW_PROPERTY_COUNT. At most one fits: what follows a
 * shorter stem ("surface_tension" of "surface_tension_slope_...") is no unit. */
static mw_property_id same_stem(const char *key)
{
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++) {
        size_t n = 0;
        (void)mw_property_unit(id, &n);
        if (strncmp(key, mw_property_key(id), n) == 0 &&
            (key[n] == '\0' || (key[n] == '_' && looks_like_unit(key + n + 1))))
            return id;
    }
    return MW_PROPERTY_COUNT;
}

/* Refuses a key with the right stem and the wrong unit with the unit to use; leaves others to the general rule. */
static bool check_units_of_keys(mw_alloy_reader *r, const cJSON *properties)
{
    for (const cJSON *child = properties->child; child != NULL; child = child->next) {
        const mw_property_id id = same_stem(child->string);
        if (id == MW_PROPERTY_COUNT || strcmp(child->string, mw_property_key(id)) == 0)
            continue;
        size_t stem = 0;
        const mw_key_unit *unit = mw_property_unit(id, &stem);
        return mw_card_refuse(&r->card, child,
                              "unknown key \"%.80s\": %s unit: this property is given %s, key \"%s\", allowed %s to %s",
                              child->string, child->string[stem] == '\0' ? "no" : "wrong", unit->phrase, mw_property_key(id),
                              mw_card_shown(mw_property_rule_of(id)->lowest).text, mw_card_shown(mw_property_rule_of(id)->highest).text);
    }
    return true;
}

/* ---- one property ---- */

/* The value in the own unit if it had been written in the unit it is most often mistaken for. */
static bool fits_other_unit(mw_property_id id, double value)
{
    const mw_property_rule *rule = mw_property_rule_of(id);
    const mw_key_unit *unit = mw_property_unit(id, NULL);
    const double converted = unit->factor * value + unit->offset;
    return converted >= rule->lowest && converted <= rule->highest;
}

static bool check_value(mw_alloy_reader *r, const cJSON *at, mw_property_id id, double value)
{
    const mw_property_rule *rule = mw_property_rule_of(id);
    if (value >= rule->lowest && value <= rule->highest)
        return true;
    const mw_key_unit *unit = mw_property_unit(id, NULL);
    const bool hint = fits_other_unit(id, value);
    return mw_card_refuse(&r->card, at, "\"%s\" is %s; allowed: %s to %s%s%s", rule->key, mw_card_shown(value).text,
                          mw_card_shown(rule->lowest).text, mw_card_shown(rule->highest).text,
                          hint ? "; it looks like " : "", hint ? unit->mistaken : "");
}

/* A number in the range of the property; anything else is refused with that range. */
static bool read_value(mw_alloy_reader *r, const cJSON *at, mw_property_id id, double *out)
{
    const mw_property_rule *rule = mw_property_rule_of(id);
    if (cJSON_IsNumber(at))
        return mw_card_number(&r->card, at, rule->key, out) && check_value(r, at, id, *out);
    return mw_card_refuse(&r->card, at, "\"%s\" must be a number, found %s; allowed: %s to %s", rule->key, mw_card_found(at).text,
                          mw_card_shown(rule->lowest).text, mw_card_shown(rule->highest).text);
}

static bool check_temperature(mw_alloy_reader *r, const cJSON *at, mw_property_id id, double temperature_K)
{
    if (temperature_K >= MW_ROW_LOWEST_K && temperature_K <= MW_ROW_HIGHEST_K)
        return true;
    return mw_card_refuse(
        &r->card, at, "\"temperature_K\" of \"%s\" is %s; allowed: %s to %s%s", mw_property_key(id),
        mw_card_shown(temperature_K).text, mw_card_shown(MW_ROW_LOWEST_K).text, mw_card_shown(MW_ROW_HIGHEST_K).text,
        temperature_K < MW_ROW_LOWEST_K && temperature_K > -MW_ROW_LOWEST_K ? "; it looks like degrees Celsius" : "");
}

static bool read_scalar(mw_alloy_reader *r, const cJSON *value, const cJSON *temperature, mw_property_id id)
{
    mw_property *p = &r->alloy->property[id];
    double *number = mw_arena_take(r->card.arena, 2, sizeof *number);
    if (number == NULL)
        return mw_card_no_memory(&r->card);
    number[1] = NAN;
    if (!read_value(r, value, id, &number[0]))
        return false;
    if (temperature != NULL) {
        if (!mw_card_number(&r->card, temperature, "temperature_K", &number[1]) ||
            !check_temperature(r, temperature, id, number[1]))
            return false;
    }
    p->n = 1;
    p->value = &number[0];
    p->temperature_K = &number[1];
    return true;
}

static bool read_rows(mw_alloy_reader *r, const cJSON *value, const cJSON *temperature, mw_property_id id)
{
    mw_property *p = &r->alloy->property[id];
    const char *key = mw_property_key(id);
    if (!cJSON_IsArray(temperature))
        return mw_card_refuse(&r->card, temperature, "\"%s\": \"temperature_K\" must be a list, as \"value\" is",
                              key);
    const size_t n = (size_t)cJSON_GetArraySize(value), n_temperature = (size_t)cJSON_GetArraySize(temperature);
    if (n != n_temperature)
        return mw_card_refuse(&r->card, temperature,
                              "\"%s\": %zu temperatures but %zu values; the lists must be equally long", key,
                              n_temperature, n);
    if (n == 0)
        return mw_card_refuse(&r->card, value, "\"%s\": the table is empty", key);
    double *rows = mw_arena_take(r->card.arena, 2 * n, sizeof *rows);
    if (rows == NULL)
        return mw_card_no_memory(&r->card);
    const cJSON *t = temperature->child, *v = value->child;
    for (size_t i = 0; i < n; i++, t = t->next, v = v->next) {
        if (!mw_card_number(&r->card, t, "temperature_K", &rows[i]) || !check_temperature(r, t, id, rows[i]) ||
            !read_value(r, v, id, &rows[n + i]))
            return false;
        if (i > 0 && !(rows[i] > rows[i - 1]))
            return mw_card_refuse(&r->card, t, "\"%s\": temperatures must rise strictly, but %s follows %s", key,
                                  mw_card_shown(rows[i]).text, mw_card_shown(rows[i - 1]).text);
    }
    p->n = n;
    p->temperature_K = rows;
    p->value = rows + n;
    return true;
}

static bool read_numbers(mw_alloy_reader *r, const cJSON *node, const char *what, mw_property_id id)
{
    const cJSON *value = mw_card_need(&r->card, node, what, "value");
    const cJSON *temperature = cJSON_GetObjectItemCaseSensitive(node, "temperature_K");
    if (value == NULL)
        return false;
    if (!mw_property_rule_of(id)->table) {
        if (temperature != NULL)
            return mw_card_refuse(&r->card, temperature, "\"%s\" is one number and takes no \"temperature_K\"",
                                  mw_property_key(id));
        if (cJSON_IsArray(value))
            return mw_card_refuse(&r->card, value, "\"%s\" is one number, not a table", mw_property_key(id));
        return read_scalar(r, value, NULL, id);
    }
    if (!cJSON_IsArray(value))
        return read_scalar(r, value, temperature, id);
    if (temperature == NULL)
        return mw_card_refuse(&r->card, value, "\"%s\": \"value\" is a list, but \"temperature_K\" is missing",
                              mw_property_key(id));
    return read_rows(r, value, temperature, id);
}

static bool read_remarks(mw_alloy_reader *r, const cJSON *node, mw_property *p)
{
    const cJSON *note = cJSON_GetObjectItemCaseSensitive(node, "note");
    const cJSON *rule = cJSON_GetObjectItemCaseSensitive(node, "estimated_by");
    if (note != NULL && (p->note = mw_card_text(&r->card, note, "note")) == NULL)
        return false;
    if (rule != NULL && (p->estimated_by = mw_card_text(&r->card, rule, "estimated_by")) == NULL)
        return false;
    return mw_card_flag(&r->card, cJSON_GetObjectItemCaseSensitive(node, "from_memory"), "from_memory",
                        &p->from_memory);
}

static bool read_property(mw_alloy_reader *r, const cJSON *node, mw_property_id id)
{
    static const char *const keys[] = {"value",        "temperature_K", "uncertainty_pct", "source", "from_memory",
                                       "estimated_by", "note"};
    mw_property *p = &r->alloy->property[id];
    char what[80];
    (void)snprintf(what, sizeof what, "\"%s\"", mw_property_key(id));
    if (!mw_card_object(&r->card, node, what, keys, sizeof keys / sizeof *keys) || !read_numbers(r, node, what, id))
        return false;
    const cJSON *uncertainty = mw_card_need(&r->card, node, what, "uncertainty_pct");
    if (uncertainty == NULL ||
        !mw_card_number_in(&r->card, uncertainty, "uncertainty_pct", 0, 100, &p->uncertainty_pct))
        return false;
    const cJSON *source = cJSON_GetObjectItemCaseSensitive(node, "source");
    if (source == NULL)
        return mw_card_refuse(&r->card, node, "key \"source\" is missing in %s; write \"source\": [\"KEY\"] with a key of \"sources\"", what);
    return mw_alloy_read_source(r, source, mw_property_key(id), &p->source, &p->n_source) && read_remarks(r, node, p);
}

/* ---- one against another ---- */

static bool check_order(mw_alloy_reader *r)
{
    const double solidus = r->alloy->property[MW_PROP_SOLIDUS].value[0];
    const double liquidus = r->alloy->property[MW_PROP_LIQUIDUS].value[0];
    const double boiling = r->alloy->property[MW_PROP_BOILING].value[0];
    if (!(solidus <= liquidus))
        return mw_card_refuse(&r->card, r->node[MW_PROP_LIQUIDUS], "\"liquidus_K\" %s is below \"solidus_K\" %s of line %ld; allowed: from there up",
                              mw_card_shown(liquidus).text, mw_card_shown(solidus).text, mw_json_line(r->node[MW_PROP_SOLIDUS]));
    if (!(liquidus < boiling))
        return mw_card_refuse(&r->card, r->node[MW_PROP_BOILING], "\"boiling_K\" %s must be above \"liquidus_K\" %s",
                              mw_card_shown(boiling).text, mw_card_shown(liquidus).text);
    return true;
}

/* The place of row i's temperature. */
static const cJSON *row_node(const cJSON *property, size_t i)
{
    const cJSON *t = cJSON_GetObjectItemCaseSensitive(property, "temperature_K");
    return cJSON_IsArray(t) ? cJSON_GetArrayItem(t, (int)i) : t;
}

/* A table of the solid must start cold and must not reach into the melt, and the other way round: either is a sign of
 * rows put under the wrong key. */
static bool check_side(mw_alloy_reader *r, mw_property_id id)
{
    const double latest_start_K = 600, slack_K = 1;
    const mw_property *p = &r->alloy->property[id];
    const double solidus = r->alloy->property[MW_PROP_SOLIDUS].value[0];
    const double liquidus = r->alloy->property[MW_PROP_LIQUIDUS].value[0];
    if (p->n == 0 || isnan(p->temperature_K[0]))
        return true;
    const double first = p->temperature_K[0], last = p->temperature_K[p->n - 1];
    if (mw_property_is_solid(id) && p->n > 1 && first > latest_start_K)
        return mw_card_refuse(&r->card, row_node(r->node[id], 0),
                              "\"%s\" starts at %s K; a table of the solid must start at %s K or below",
                              mw_property_key(id), mw_card_shown(first).text, mw_card_shown(latest_start_K).text);
    if (mw_property_is_solid(id) && last > liquidus + slack_K)
        return mw_card_refuse(&r->card, row_node(r->node[id], p->n - 1),
                              "\"%s\" has a row at %s K, above the liquidus %s K", mw_property_key(id),
                              mw_card_shown(last).text, mw_card_shown(liquidus).text);
    if (mw_property_is_liquid(id) && first < solidus - slack_K)
        return mw_card_refuse(&r->card, row_node(r->node[id], 0), "\"%s\" has a row at %s K, below the solidus %s K",
                              mw_property_key(id), mw_card_shown(first).text, mw_card_shown(solidus).text);
    return true;
}

bool mw_alloy_read_properties(mw_alloy_reader *r, const cJSON *node)
{
    const char *keys[MW_PROPERTY_COUNT];
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++)
        keys[id] = mw_property_key(id);
    if (cJSON_IsObject(node) && !check_units_of_keys(r, node))
        return false;
    if (!mw_card_object(&r->card, node, "\"properties\"", keys, MW_PROPERTY_COUNT))
        return false;
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++) {
        r->node[id] = cJSON_GetObjectItemCaseSensitive(node, keys[id]);
        if (r->node[id] == NULL && mw_property_rule_of(id)->required)
            return mw_card_need(&r->card, node, "\"properties\"", keys[id]) != NULL;
        if (r->node[id] != NULL && !read_property(r, r->node[id], id))
            return false;
    }
    if (!check_order(r))
        return false;
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++)
        if (!check_side(r, id))
            return false;
    return true;
}
