/* SPDX-License-Identifier: GPL-3.0-or-later
 * The JSON Schema (draft 2020-12) of an alloy card, from the same lists as the loader. It says what a schema can say;
 * order of temperatures, equal lengths, known sources and sums are checked by the loader alone. */
#include <stdlib.h>
#include <string.h>

#include "material/alloy_internal.h"

/* Set when an allocation failed anywhere; everything hangs below one root, so nothing leaks. */
typedef struct builder {
    bool failed;
} builder;

/* Hangs item below parent and returns it; NULL parents and items are let through, so that calls can be nested. */
static cJSON *put(builder *b, cJSON *parent, const char *key, cJSON *item)
{
    if (cJSON_AddItemToObject(parent, key, item))
        return item;
    cJSON_Delete(item);
    b->failed = true;
    return NULL;
}

static void put_text(builder *b, cJSON *parent, const char *key, const char *text)
{
    (void)put(b, parent, key, cJSON_CreateString(text));
}

static void put_number(builder *b, cJSON *parent, const char *key, double value)
{
    (void)put(b, parent, key, cJSON_CreateNumber(value));
}

static void put_texts(builder *b, cJSON *parent, const char *key, const char *const texts[], size_t n)
{
    cJSON *list = put(b, parent, key, cJSON_CreateArray());
    for (size_t i = 0; i < n; i++) {
        cJSON *text = cJSON_CreateString(texts[i]);
        if (!cJSON_AddItemToArray(list, text)) {
            cJSON_Delete(text);
            b->failed = true;
        }
    }
}

static cJSON *put_type(builder *b, cJSON *parent, const char *key, const char *type)
{
    cJSON *item = put(b, parent, key, cJSON_CreateObject());
    put_text(b, item, "type", type);
    return item;
}

/* A text that is not blank. */
static cJSON *put_line(builder *b, cJSON *parent, const char *key, const char *description)
{
    cJSON *item = put_type(b, parent, key, "string");
    put_text(b, item, "pattern", "[^ ]");
    if (description != NULL)
        put_text(b, item, "description", description);
    return item;
}

/* An object with a fixed set of keys; returns its "properties". */
static cJSON *put_fields(builder *b, cJSON *object, const char *const required[], size_t n)
{
    put_texts(b, object, "required", required, n);
    (void)put(b, object, "additionalProperties", cJSON_CreateFalse());
    return put(b, object, "properties", cJSON_CreateObject());
}

static cJSON *put_reference(builder *b, cJSON *parent, const char *key, const char *target)
{
    cJSON *item = put(b, parent, key, cJSON_CreateObject());
    put_text(b, item, "$ref", target);
    return item;
}

static void put_range(builder *b, cJSON *object, double lowest, double highest)
{
    put_number(b, object, "minimum", lowest);
    put_number(b, object, "maximum", highest);
}

/* ---- shared parts ---- */

static void put_definitions(builder *b, cJSON *root)
{
    cJSON *defs = put(b, root, "$defs", cJSON_CreateObject());
    cJSON *element = put_type(b, defs, "element", "string");
    put_texts(b, element, "enum", mw_element_symbols, MW_ELEMENT_COUNT);
    cJSON *list = put_type(b, defs, "source_list", "array");
    put_text(b, list, "description", "keys of \"sources\"");
    (void)put_line(b, list, "items", NULL);
    put_number(b, list, "minItems", 1);
    (void)put(b, list, "uniqueItems", cJSON_CreateTrue());
    put_text(b, put_type(b, defs, "from_memory", "boolean"), "description",
             "true: the number was not seen in an opened source");
    (void)put_line(b, defs, "note", "why this value and not another");
    cJSON *percent = put_type(b, defs, "percent", "number");
    put_range(b, percent, 0, 100);
    cJSON *row = put_type(b, defs, "temperature_K", "number");
    put_range(b, row, MW_ROW_LOWEST_K, MW_ROW_HIGHEST_K);
}

/* Appends one of the two forms of a table to its "oneOf". */
static void put_form(builder *b, cJSON *forms, const char *type, bool temperature_needed)
{
    static const char *const need[] = {"temperature_K"};
    cJSON *form = cJSON_CreateObject();
    if (!cJSON_AddItemToArray(forms, form)) {
        cJSON_Delete(form);
        b->failed = true;
        return;
    }
    cJSON *fields = put(b, form, "properties", cJSON_CreateObject());
    (void)put_type(b, fields, "value", type);
    (void)put_type(b, fields, "temperature_K", type);
    if (temperature_needed)
        put_texts(b, form, "required", need, 1);
}

/* Number or list of numbers. */
static void put_table(builder *b, cJSON *object, cJSON *fields, const mw_property_rule *rule)
{
    static const char *const either[] = {"number", "array"};
    cJSON *value = put(b, fields, "value", cJSON_CreateObject());
    put_texts(b, value, "type", either, 2);
    put_range(b, value, rule->lowest, rule->highest);
    put_range(b, put_type(b, value, "items", "number"), rule->lowest, rule->highest);
    put_number(b, value, "minItems", 1);
    cJSON *temperature = put(b, fields, "temperature_K", cJSON_CreateObject());
    put_texts(b, temperature, "type", either, 2);
    put_range(b, temperature, MW_ROW_LOWEST_K, MW_ROW_HIGHEST_K);
    (void)put_reference(b, temperature, "items", "#/$defs/temperature_K");
    put_text(b, temperature, "description", "strictly rising, as many as values");
    cJSON *forms = put(b, object, "oneOf", cJSON_CreateArray());
    put_form(b, forms, "number", false);
    put_form(b, forms, "array", true);
}

static void put_property(builder *b, cJSON *parent, const mw_property_rule *rule)
{
    static const char *const required[] = {"value", "uncertainty_pct", "source"};
    cJSON *object = put_type(b, parent, rule->key, "object");
    put_text(b, object, "description", rule->meaning);
    cJSON *fields = put_fields(b, object, required, 3);
    if (rule->table)
        put_table(b, object, fields, rule);
    else
        put_range(b, put_type(b, fields, "value", "number"), rule->lowest, rule->highest);
    (void)put_reference(b, fields, "uncertainty_pct", "#/$defs/percent");
    (void)put_reference(b, fields, "source", "#/$defs/source_list");
    (void)put_reference(b, fields, "from_memory", "#/$defs/from_memory");
    (void)put_line(b, fields, "estimated_by", "the rule, where the value is an estimate");
    (void)put_reference(b, fields, "note", "#/$defs/note");
}

/* ---- parts of the card ---- */

static void put_properties(builder *b, cJSON *parent)
{
    const char *required[MW_PROPERTY_COUNT];
    size_t n = 0;
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++)
        if (mw_property_rule_of(id)->required)
            required[n++] = mw_property_key(id);
    cJSON *fields = put_fields(b, put_type(b, parent, "properties", "object"), required, n);
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++)
        put_property(b, fields, mw_property_rule_of(id));
}

static void put_composition(builder *b, cJSON *parent)
{
    static const char *const required[] = {"balance", "limits_wt_pct", "source"};
    cJSON *fields = put_fields(b, put_type(b, parent, "composition", "object"), required, 3);
    (void)put_reference(b, fields, "balance", "#/$defs/element");
    cJSON *limits = put_type(b, fields, "limits_wt_pct", "object");
    put_text(b, limits, "description", "mass percent by element: [lowest, highest]");
    (void)put_reference(b, limits, "propertyNames", "#/$defs/element");
    cJSON *pair = put_type(b, limits, "additionalProperties", "array");
    (void)put_reference(b, pair, "items", "#/$defs/percent");
    put_number(b, pair, "minItems", 2);
    put_number(b, pair, "maxItems", 2);
    (void)put_reference(b, fields, "source", "#/$defs/source_list");
    (void)put_reference(b, fields, "from_memory", "#/$defs/from_memory");
    (void)put_reference(b, fields, "note", "#/$defs/note");
}

static void put_sources(builder *b, cJSON *parent)
{
    static const char *const required[] = {"citation", "seen"};
    cJSON *object = put_type(b, parent, "sources", "object");
    put_text(b, object, "description", "every entry is named by at least one \"source\" list");
    put_number(b, object, "minProperties", 1);
    cJSON *key = put(b, object, "propertyNames", cJSON_CreateObject());
    put_number(b, key, "minLength", 1);
    put_number(b, key, "maxLength", MW_LONGEST_NAME);
    cJSON *fields = put_fields(b, put_type(b, object, "additionalProperties", "object"), required, 2);
    (void)put_line(b, fields, "citation", "authors, title, journal, year: enough to find it");
    put_text(b, put_type(b, fields, "doi", "string"), "pattern", "^10\\.[^ ]*/[^ ]*$");
    cJSON *seen = put_type(b, fields, "seen", "string");
    put_texts(b, seen, "enum", mw_seen_words, MW_SEEN_COUNT);
    put_text(b, seen, "description",
             "what was read: the text, its abstract, a copy of its numbers, nothing (from memory)");
}

static void put_head(builder *b, cJSON *fields)
{
    put_text(b, put(b, fields, "card", cJSON_CreateObject()), "const", "alloy");
    put_number(b, put(b, fields, "format", cJSON_CreateObject()), "const", MW_CARD_FORMAT);
    cJSON *name = put_type(b, fields, "name", "string");
    put_text(b, name, "pattern", "^[^-. /\\\\,;\"]([^/\\\\,;\"]*[^ /\\\\,;\"])?$");
    put_number(b, name, "maxLength", MW_LONGEST_NAME);
    cJSON *designations = put_type(b, fields, "designations", "array");
    put_text(b, designations, "description", "UNS, EN, ISO: \"UNS S31603\"");
    (void)put_line(b, designations, "items", NULL);
    (void)put(b, designations, "uniqueItems", cJSON_CreateTrue());
    (void)put_line(b, fields, "summary", NULL);
    cJSON *cautions = put_type(b, fields, "cautions", "array");
    put_texts(b, put(b, cautions, "items", cJSON_CreateObject()), "enum", mw_caution_words, MW_CAUTION_COUNT);
    (void)put(b, cautions, "uniqueItems", cJSON_CreateTrue());
}

/* Text with a closing newline, as files end. */
static char *print(const cJSON *root)
{
    char *text = cJSON_Print(root);
    const size_t n = text == NULL ? 0 : strlen(text);
    char *longer = text == NULL ? NULL : realloc(text, n + 2);
    if (longer == NULL) {
        free(text);
        return NULL;
    }
    memcpy(longer + n, "\n", 2);
    return longer;
}

char *mw_alloy_schema(void)
{
    static const char *const required[] = {"card",     "format",      "name",       "designations", "summary",
                                           "cautions", "composition", "properties", "sources"};
    builder b = {false};
    cJSON *root = cJSON_CreateObject();
    put_text(&b, root, "$schema", "https://json-schema.org/draft/2020-12/schema");
    put_text(&b, root, "title", "alloy card");
    put_text(&b, root, "description", "Properties of one alloy in SI units, each with uncertainty and source");
    put_text(&b, root, "type", "object");
    cJSON *fields = put_fields(&b, root, required, sizeof required / sizeof *required);
    put_head(&b, fields);
    put_composition(&b, fields);
    put_properties(&b, fields);
    put_sources(&b, fields);
    put_definitions(&b, root);
    char *text = b.failed ? NULL : print(root);
    cJSON_Delete(root);
    return text;
}
