/* SPDX-License-Identifier: GPL-3.0-or-later
 * Loading good alloy cards, random damage to them, the rules and the JSON Schema. */
#include <math.h>
#include <stdbool.h>

#include "card_text.h"
#include "material/alloy_internal.h"

/* ---- a good card ---- */

static void loads_everything(void **state)
{
    (void)state;
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    if (mw_alloy_load("tests/data/cards/plain.json", &a, &err) != MW_OK)
        fail_msg("%s", err.text);
    assert_string_equal(a->name, "Plain");
    assert_string_equal(a->path, "tests/data/cards/plain.json");
    assert_int_equal(a->n_designation, 2);
    assert_string_equal(a->designation[1], "EN ISO 9.9999");
    assert_string_equal(a->summary, "round numbers for hand arithmetic; no real metal");
    assert_int_equal(a->n_caution, 1);
    assert_string_equal(a->caution[0], "nickel");
    assert_string_equal(a->balance, "Fe");
    assert_int_equal(a->n_limit, 2);
    assert_string_equal(a->limit[1].element, "C");
    assert_true(a->limit[0].low_pct == 16 && a->limit[0].high_pct == 18 && a->limit[1].high_pct == 0.030);
    assert_int_equal(a->n_source, 2);
    assert_string_equal(a->source[1].key, "Other");
    assert_string_equal(a->source[1].doi, "10.1000/none");
    assert_string_equal(a->source[1].seen, "memory");
    assert_null(a->source[0].doi);
    mw_alloy_free(a);
}

static void loads_properties(void **state)
{
    (void)state;
    mw_alloy *a = NULL;
    assert_int_equal(mw_alloy_load("tests/data/cards/plain.json", &a, NULL), MW_OK);
    const mw_property *solidus = &a->property[MW_PROP_SOLIDUS], *boiling = &a->property[MW_PROP_BOILING];
    const mw_property *k = &a->property[MW_PROP_CONDUCTIVITY_LIQUID],
                      *tension = &a->property[MW_PROP_SURFACE_TENSION];
    assert_true(solidus->n == 1 && solidus->value[0] == 1600 && isnan(solidus->temperature_K[0]));
    assert_true(solidus->uncertainty_pct == 0.5 && !solidus->from_memory && solidus->estimated_by == NULL);
    assert_string_equal(solidus->note, "round");
    assert_true(boiling->from_memory && boiling->n_source == 2);
    assert_string_equal(boiling->source[1], "Other");
    assert_true(k->n == 2 && k->temperature_K[1] == 3200 && k->value[1] == 45);
    assert_string_equal(k->estimated_by, "invented for this test");
    assert_true(tension->n == 1 && tension->temperature_K[0] == 1700);
    assert_int_equal(a->property[MW_PROP_VISCOSITY_LIQUID].n, 0);
    assert_int_equal(a->property[MW_PROP_SURFACE_TENSION_SLOPE].n, 0);
    mw_alloy_free(a);
    mw_alloy_free(NULL);
}

static void hash_tells_two_versions_apart(void **state)
{
    (void)state;
    mw_alloy *a = NULL, *b = NULL;
    char *changed = edited(plain, "\"value\": 1600", "\"value\": 1601"), hash[17];
    assert_int_equal(mw_alloy_parse("a", plain, plain_size, &a, NULL), MW_OK);
    assert_int_equal(mw_alloy_parse("b", changed, strlen(changed), &b, NULL), MW_OK);
    mw_hash_text(plain, plain_size, hash);
    assert_string_equal(a->hash, hash);
    assert_string_not_equal(a->hash, b->hash);
    mw_alloy_free(a);
    mw_alloy_free(b);
    free(changed);
}

static void accepted(const char *find, const char *replace)
{
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    char *text = edited(plain, find, replace);
    if (mw_alloy_parse("card.json", text, strlen(text), &a, &err) != MW_OK)
        fail_msg("refused %s: %s", replace, err.text);
    mw_alloy_free(a);
    free(text);
}

static void edges_are_accepted(void **state)
{
    (void)state;
    accepted("{\"value\": 1700", "{\"value\": 1600"); /* a pure metal: solidus and liquidus coincide */
    accepted("\"uncertainty_pct\": 0.5", "\"uncertainty_pct\": 0");
    accepted("\"uncertainty_pct\": 0.5", "\"uncertainty_pct\": 100");
    accepted("\"value\": 1600", "\"value\": 300");
    accepted("\"nickel\"", "\"reactive-powder\", \"nickel\", \"cobalt\", \"chromium\"");
    accepted("[\"nickel\"]", "[]");
    accepted("[\"UNS Z00001\", \"EN ISO 9.9999\"]", "[]");
    accepted("no real metal", "\\u00e4 \xC3\xA4 \xE2\x89\xA4 \xF0\x9F\x94\xA9");
    accepted("[16, 18]", "[0, 100]");
    accepted("[16, 18]", "[100, 100]");
    accepted("\"temperature_K\": [300, 1600]",
             "\"temperature_K\": [600, 1701]"); /* last place allowed for the solid */
    accepted("\"temperature_K\": [1700, 3200]", "\"temperature_K\": [1599, 3200]"); /* and for the melt */
    accepted("{\"temperature_K\": 1700, ", "{");
    accepted("\"value\": 8000,",
             "\"temperature_K\": 900, \"value\": 8000,"); /* one row may stand anywhere in the solid */
    accepted("\"value\": 8000,", "\"temperature_K\": [298], \"value\": [8000],");
    accepted("\"coupling_ratio\"", "\"viscosity_liquid_Pa_s\": {\"value\": 0.006, \"uncertainty_pct\": 20, "
                                   "\"source\": [\"Other\"]}, \"coupling_ratio\"");
}

/* ---- random damage ---- */

static uint64_t random_state = 20;

static size_t random_below(size_t n)
{
    random_state =
        random_state * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407); /* Knuth's MMIX constants */
    return (size_t)(random_state >> 33) % n;
}

/* One change of bytes: any byte, a byte of JSON's own alphabet, a lost run, a doubled run. Returns the new length. */
static size_t damage(char *text, size_t n)
{
    static const char alphabet[] = "0123456789.-+eE\"{}[]:,\\ \ntrufalsn_KCpJ";
    const size_t at = random_below(n), run = 1 + random_below(20);
    switch (random_below(5)) {
    case 0:
        text[at] = (char)random_below(256);
        return n;
    case 1: /* keeps JSON whole more often: a digit for a digit, a letter for a letter */
        if (text[at] >= '0' && text[at] <= '9')
            text[at] = (char)('0' + random_below(10));
        else if (text[at] >= 'a' && text[at] <= 'z')
            text[at] = (char)('a' + random_below(26));
        return n;
    case 2:
        if (at + run >= n)
            return n;
        memmove(text + at, text + at + run, n - at - run);
        return n - run;
    case 3:
        if (at + run >= n)
            return n;
        memmove(text + at + run, text + at, n - at);
        return n + run;
    default:
        text[at] = alphabet[random_below(sizeof alphabet - 1)];
        return n;
    }
}

static void damaged_cards_never_crash(void **state)
{
    (void)state;
    enum { ROUNDS = 20000, SPARE = 256 };
    char *text = malloc(plain_size + SPARE);
    assert_non_null(text);
    size_t good = 0, no_json = 0;
    for (int round = 0; round < ROUNDS; round++) {
        memcpy(text, plain, plain_size);
        size_t n = plain_size;
        for (size_t k = 1 + random_below(4); k > 0; k--)
            n = damage(text, n);
        mw_alloy *a = NULL;
        mw_error err = {MW_OK, ""};
        const mw_status status = mw_alloy_parse("card.json", text, n, &a, &err);
        if (status == MW_OK) {
            mw_effective e;
            assert_non_null(a);
            assert_true(mw_alloy_effective(a, 293.15, &e) != MW_NO_MEMORY);
            good++;
        } else {
            if (status != MW_BAD_FILE || a != NULL || strncmp(err.text, "card.json:", 10) != 0 ||
                strlen(err.text) < 20)
                fail_msg("round %d: status %d, text %s", round, (int)status, err.text);
            for (const char *s = err.text; *s != '\0'; s++)
                if ((unsigned char)*s < 0x20 || *s == 0x7F)
                    fail_msg("round %d: control character in %s", round, err.text);
            no_json += strstr(err.text, "expected") != NULL;
        }
        mw_alloy_free(a);
    }
    /* The damage must reach all depths: some cards stay good, some are no JSON, the rest are bad cards. */
    assert_true(good > ROUNDS / 100 && no_json > ROUNDS / 100 && ROUNDS - good - no_json > ROUNDS / 100);
    free(text);
}

/* ---- rules and schema ---- */

static void every_key_carries_a_unit(void **state)
{
    (void)state;
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++) {
        size_t stem = 0;
        assert_non_null(mw_property_unit(id, &stem));
        assert_true(stem > 0);
        assert_true(mw_property_rule_of(id)->lowest < mw_property_rule_of(id)->highest);
        assert_true(strlen(mw_property_meaning(id)) > 0);
        for (mw_property_id other = 0; other < id; other++)
            assert_string_not_equal(mw_property_key(id), mw_property_key(other));
    }
    assert_string_equal(mw_property_key(MW_PROP_SOLIDUS), "solidus_K");
    assert_string_equal(mw_property_key(MW_PROPERTY_COUNT), "unknown");
    assert_string_equal(mw_property_meaning(MW_PROPERTY_COUNT), "unknown");
}

/* Every object that describes a part of a card refuses other keys. */
static void closed_objects(const cJSON *node)
{
    const cJSON *type = cJSON_GetObjectItemCaseSensitive(node, "type");
    if (cJSON_IsString(type) && strcmp(type->valuestring, "object") == 0)
        assert_non_null(cJSON_GetObjectItemCaseSensitive(node, "additionalProperties"));
    for (const cJSON *child = node->child; child != NULL; child = child->next)
        closed_objects(child);
}

static const cJSON *below(const cJSON *node, const char *a, const char *b, const char *c)
{
    node = cJSON_GetObjectItemCaseSensitive(node, a);
    node = cJSON_GetObjectItemCaseSensitive(node, b);
    return c == NULL ? node : cJSON_GetObjectItemCaseSensitive(node, c);
}

static void schema_says_what_the_list_says(void **state)
{
    (void)state;
    char *text = mw_alloy_schema();
    mw_json json;
    mw_error err;
    assert_non_null(text);
    assert_true(text[strlen(text) - 1] == '\n');
    assert_int_equal(mw_json_parse("schema", text, strlen(text), &json, &err), MW_OK);
    assert_string_equal(cJSON_GetObjectItemCaseSensitive(json.root, "$schema")->valuestring,
                        "https://json-schema.org/draft/2020-12/schema");
    closed_objects(json.root);
    const cJSON *part = below(json.root, "properties", "properties", NULL);
    const cJSON *required = cJSON_GetObjectItemCaseSensitive(part, "required");
    for (mw_property_id id = 0; id < MW_PROPERTY_COUNT; id++) {
        const mw_property_rule *rule = mw_property_rule_of(id);
        const cJSON *value = below(below(part, "properties", rule->key, NULL), "properties", "value", NULL);
        assert_non_null(value);
        assert_true(cJSON_GetObjectItemCaseSensitive(value, "minimum")->valuedouble == rule->lowest);
        assert_true(cJSON_GetObjectItemCaseSensitive(value, "maximum")->valuedouble == rule->highest);
        bool listed = false;
        for (const cJSON *key = required->child; key != NULL; key = key->next)
            listed = listed || strcmp(key->valuestring, rule->key) == 0;
        assert_int_equal(listed, rule->required);
    }
    mw_json_free(&json);
    char *again = mw_alloy_schema();
    assert_string_equal(text, again);
    free(text);
    free(again);
}

/* The committed schema is the one that this program writes (`card schema`). */
static void committed_schema_is_current(void **state)
{
    (void)state;
    char *committed = NULL, *text = mw_alloy_schema();
    size_t n = 0;
    mw_error err;
    assert_non_null(text);
    if (mw_file_read("alloys/alloy.schema.json", 1 << 20, &committed, &n, &err) != MW_OK)
        fail_msg("%s", err.text);
    assert_string_equal(committed, text);
    free(committed);
    free(text);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(loads_everything),
        cmocka_unit_test(loads_properties),
        cmocka_unit_test(hash_tells_two_versions_apart),
        cmocka_unit_test(edges_are_accepted),
        cmocka_unit_test(damaged_cards_never_crash),
        cmocka_unit_test(every_key_carries_a_unit),
        cmocka_unit_test(schema_says_what_the_list_says),
        cmocka_unit_test(committed_schema_is_current),
    };
    return cmocka_run_group_tests(tests, read_plain, free_plain);
}
