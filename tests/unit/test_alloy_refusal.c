/* SPDX-License-Identifier: GPL-3.0-or-later
 * What the loader of alloy cards refuses, and what it says. Most bad cards are the good one with one text replaced.
 */
#include "card_text.h"
#include "material/alloy_internal.h"

static long line_of(const char *text, const char *mark)
{
    const char *at = strstr(text, mark);
    if (at == NULL)
        fail_msg("no mark %s", mark);
    long line = 1;
    for (const char *s = text; s < at; s++)
        line += *s == '\n';
    return line;
}

/* ---- refusals ---- */

typedef struct refusal {
    const char *find, *replace; /* what is done to the good card */
    const char *mark;           /* text on the line that must be named; NULL: the line of `replace` */
    const char *part[4];        /* what the message must contain */
} refusal;

static void refused(const refusal *c)
{
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    char *text = edited(plain, c->find, c->replace), place[40];
    const mw_status status = mw_alloy_parse("card.json", text, strlen(text), &a, &err);
    if (status != MW_BAD_FILE || a != NULL || err.status != MW_BAD_FILE)
        fail_msg("%s was not refused (status %d)", c->replace, (int)status);
    (void)snprintf(place, sizeof place, "card.json:%ld: ", line_of(text, c->mark != NULL ? c->mark : c->replace));
    if (strncmp(err.text, place, strlen(place)) != 0)
        fail_msg("%s: message must start with %s: %s", c->replace, place, err.text);
    for (size_t i = 0; i < 4 && c->part[i] != NULL; i++)
        if (strstr(err.text, c->part[i]) == NULL)
            fail_msg("%s: message must say %s: %s", c->replace, c->part[i], err.text);
    assert_null(strchr(err.text, '\n'));
    assert_int_equal(mw_alloy_parse("card.json", text, strlen(text), &a, NULL), MW_BAD_FILE); /* no text wanted */
    free(text);
}

#define REFUSE(cases)                                                                                                \
    for (size_t i_ = 0; i_ < sizeof(cases) / sizeof *(cases); i_++)                                                  \
    refused(&(cases)[i_])

static void refuses_wrong_kind(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"card\": \"alloy\"", "\"card\": \"lot\"", NULL, {"\"card\" is \"lot\"", "\"alloy\""}},
        {"\"card\": \"alloy\"", "\"card\": 3", NULL, {"\"card\"", "\"alloy\""}},
        {"\"card\": \"alloy\",", "", "{", {"key \"card\" is missing in the card"}},
        {"\"format\": 1", "\"format\": 2", NULL, {"\"format\" is 2", "reads format 1"}},
        {"\"format\": 1", "\"format\": 1.5", NULL, {"\"format\" is 1.5", "reads format 1"}},
        {"\"format\": 1", "\"format\": \"1\"", NULL, {"\"format\" must be a number, found a text"}},
        {"\"format\": 1,", "", "{", {"key \"format\" is missing in the card"}},
    };
    REFUSE(c);
}

static void refuses_unknown_keys(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"summary\"", "\"sumary\"", NULL, {"unknown key \"sumary\" in the card", "did you mean \"summary\"?"}},
        {"\"summary\"",
         "\"zzzzzzzzzz\"",
         NULL,
         {"unknown key \"zzzzzzzzzz\"", "allowed: ", "\"composition\"", "\"sources\""}},
        {"\"balance\"",
         "\"balanced\"",
         NULL,
         {"unknown key \"balanced\" in \"composition\"", "did you mean \"balance\"?"}},
        {"\"solidus_K\"",
         "\"solidsu_K\"",
         NULL,
         {"unknown key \"solidsu_K\"", "\"properties\"", "did you mean \"solidus_K\"?"}},
        {"\"solidus_K\"", "\"solidus_k\"", NULL, {"unknown key \"solidus_k\"", "did you mean \"solidus_K\"?"}},
        {"\"note\": \"round\"",
         "\"nota\": \"round\"",
         NULL,
         {"unknown key \"nota\" in \"solidus_K\"", "did you mean \"note\"?"}},
        {"\"value\": 1600", "\"Value\": 1600", NULL, {"unknown key \"Value\"", "did you mean \"value\"?"}},
        {"\"doi\"", "\"DOI\"", NULL, {"unknown key \"DOI\" in source \"Other\"", "did you mean \"doi\"?"}},
    };
    REFUSE(c);
}

static void refuses_keys_with_another_unit(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"solidus_K\"",
         "\"solidus_C\"",
         NULL,
         {"unknown key \"solidus_C\"", "wrong unit: this property is given in K, key \"solidus_K\", allowed 300 to 4500"}},
        {"\"density_solid_kg_per_m3\"",
         "\"density_solid_g_per_cm3\"",
         NULL,
         {"wrong unit", "given in kg/m3", "key \"density_solid_kg_per_m3\""}},
        {"\"solidus_K\"", "\"solidus\"", NULL, {"unknown key \"solidus\"", "no unit", "key \"solidus_K\""}},
        {"\"coupling_ratio\"",
         "\"coupling_pct\"",
         NULL,
         {"wrong unit", "as a ratio, not in percent", "\"coupling_ratio\""}},
        {"\"heat_capacity_liquid_J_per_kgK\"",
         "\"heat_capacity_liquid_J_per_gK\"",
         NULL,
         {"wrong unit", "in J/(kg K)", "\"heat_capacity_liquid_J_per_kgK\""}},
        {"\"surface_tension_N_per_m\"",
         "\"surface_tension_mN_per_m\"",
         NULL,
         {"wrong unit", "\"surface_tension_N_per_m\""}},
        /* one stem is the start of another */
        {"\"surface_tension_N_per_m\"",
         "\"surface_tension_slope_mN_per_mK\"",
         NULL,
         {"wrong unit", "key \"surface_tension_slope_N_per_mK\""}},
    };
    REFUSE(c);
}

static void refuses_missing_keys(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"summary\": \"round numbers for hand arithmetic; no real metal\",",
         "",
         "{",
         {"key \"summary\" is missing in the card"}},
        {"\"cautions\": [\"nickel\"],", "", "{", {"key \"cautions\" is missing"}},
        {"\"balance\": \"Fe\",", "", "\"composition\"", {"key \"balance\" is missing in \"composition\""}},
        {"    \"latent_heat_fusion_J_per_kg\": {\"value\": 250000, \"uncertainty_pct\": 5, \"source\": "
         "[\"Invented\"]},\n",
         "",
         "\"properties\"",
         {"key \"latent_heat_fusion_J_per_kg\" is missing in \"properties\""}},
        {"\"value\": 1600, ", "", "\"solidus_K\"", {"key \"value\" is missing in \"solidus_K\""}},
        {"\"uncertainty_pct\": 0.5, ", "", "\"solidus_K\"", {"key \"uncertainty_pct\" is missing in \"solidus_K\""}},
        {", \"source\": [\"Invented\"], \"note\": \"round\"",
         "",
         "\"solidus_K\"",
         {"key \"source\" is missing in \"solidus_K\"; write \"source\": [\"KEY\"]"}},
        {"\"citation\": \"A second invented source\", ",
         "",
         "\"Other\": {",
         {"key \"citation\" is missing in source \"Other\""}},
        {", \"seen\": \"memory\"", "", "\"Other\": {", {"key \"seen\" is missing in source \"Other\""}},
    };
    REFUSE(c);
}

static void refuses_wrong_types(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"name\": \"Plain\"", "\"name\": 316", NULL, {"\"name\" must be a text, found a number"}},
        {"\"designations\": [\"UNS Z00001\", \"EN ISO 9.9999\"]",
         "\"designations\": \"UNS\"",
         NULL,
         {"\"designations\" must be a list of texts, found a text"}},
        {"\"cautions\": [\"nickel\"]", "\"cautions\": [1]", NULL, {"\"cautions\" must be a text, found a number"}},
        {"\"value\": 1600", "\"value\": \"1600\"", NULL, {"\"solidus_K\" must be a number, found a text, \"1600\"; allowed: 300 to 4500"}},
        {"\"value\": 1600", "\"value\": null", NULL, {"\"solidus_K\" must be a number, found null"}},
        {"\"value\": 1600", "\"value\": [1600]", NULL, {"\"solidus_K\" is one number, not a table"}},
        {"\"value\": 1600",
         "\"temperature_K\": 300, \"value\": 1600",
         NULL,
         {"\"solidus_K\"", "takes no \"temperature_K\""}},
        {"\"solidus_K\": {\"value\": 1600, \"uncertainty_pct\": 0.5, \"source\": [\"Invented\"], \"note\": "
         "\"round\"}",
         "\"solidus_K\": 1600",
         NULL,
         {"\"solidus_K\" must be an object", "found a number"}},
        {"\"from_memory\": true}",
         "\"from_memory\": 1}",
         NULL,
         {"\"from_memory\" must be true or false, found a number"}},
        {"\"note\": \"round\"", "\"note\": [\"round\"]", NULL, {"\"note\" must be a text, found a list"}},
        {"\"source\": [\"Invented\"], \"note\"",
         "\"source\": \"Invented\", \"note\"",
         NULL,
         {"\"source\" of \"solidus_K\" must be a list of texts, found a text, \"Invented\""}},
        {"\"uncertainty_pct\": 0.5",
         "\"uncertainty_pct\": true",
         NULL,
         {"\"uncertainty_pct\" must be a number, found true"}},
        {"[16, 18]", "16", "\"Cr\"", {"\"Cr\" must be a list of two numbers"}},
        {"[16, 18]", "[16, \"18\"]", NULL, {"\"Cr\" must be a number, found a text"}},
    };
    REFUSE(c);
}

static void refuses_broken_tables(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [300]",
         NULL,
         {"\"heat_capacity_solid_J_per_kgK\"", "1 temperatures but 2 values"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [300, 300]",
         NULL,
         {"\"heat_capacity_solid_J_per_kgK\"", "rise strictly", "300 follows 300"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [500, 400]",
         NULL,
         {"rise strictly", "400 follows 500"}},
        {"\"temperature_K\": [300, 1600]", "\"temperature_K\": 300", NULL, {"\"temperature_K\" must be a list"}},
        {"\"temperature_K\": [300, 1600],", "", "\"value\": [400, 700]", {"\"temperature_K\" is missing"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [20, 1300]",
         NULL,
         {"\"temperature_K\" of \"heat_capacity_solid_J_per_kgK\" is 20", "50 to 10000", "degrees Celsius"}},
        {"\"temperature_K\": [1700, 3200]", "\"temperature_K\": [1700, 20000]", NULL, {"is 20000", "50 to 10000"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [300, null]",
         NULL,
         {"\"temperature_K\" must be a number, found null"}},
        {"[400, 700]", "[400, [700]]", NULL, {"\"heat_capacity_solid_J_per_kgK\" must be a number, found a list"}},
        {"\"temperature_K\": [300, 1600],\n      \"value\": [400, 700]",
         "\"temperature_K\": [],\n      \"value\": []",
         "\"value\": []",
         {"\"heat_capacity_solid_J_per_kgK\"", "table is empty"}},
        /* each value of a table is checked, and the message names its own line */
        {"\"value\": [400, 700]",
         "\"value\": [400,\n 0.7]",
         " 0.7",
         {"\"heat_capacity_solid_J_per_kgK\" is 0.7", "50 to 5000", "J/(g K)"}},
    };
    REFUSE(c);
}

static void refuses_values_out_of_range(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"value\": 1600",
         "\"value\": 250",
         NULL,
         {"\"solidus_K\" is 250", "allowed: 300 to 4500", "looks like degrees Celsius"}},
        {"\"value\": 1600", "\"value\": 5000", NULL, {"\"solidus_K\" is 5000", "allowed: 300 to 4500"}},
        {"\"value\": 8000",
         "\"value\": 7.9",
         NULL,
         {"\"density_solid_kg_per_m3\" is 7.9", "500 to 25000", "looks like g/cm3"}},
        {"\"value\": 250000",
         "\"value\": 250",
         NULL,
         {"\"latent_heat_fusion_J_per_kg\" is 250", "10000 to 2000000", "kJ/kg"}},
        {"\"value\": 1.5",
         "\"value\": 1593",
         NULL,
         {"\"surface_tension_N_per_m\" is 1593", "0.1 to 4", "looks like mN/m"}},
        {"\"value\": 0.4", "\"value\": 40", NULL, {"\"coupling_ratio\" is 40", "0.005 to 1", "looks like percent"}},
        {"\"value\": 0.35", "\"value\": -0.35", NULL, {"\"absorptivity_flat_ratio\" is -0.35", "0.005 to 1"}},
        {"\"value\": 800,", "\"value\": 0.8,", NULL, {"\"heat_capacity_liquid_J_per_kgK\" is 0.8", "J/(g K)"}},
        {"\"value\": [10, 30]",
         "\"value\": [0.1, 30]",
         NULL,
         {"\"conductivity_solid_W_per_mK\" is 0.1", "0.5 to 600", "W/(cm K)"}},
        {"\"uncertainty_pct\": 0.5", "\"uncertainty_pct\": -1", NULL, {"\"uncertainty_pct\" is -1", "0 to 100"}},
        {"\"uncertainty_pct\": 0.5",
         "\"uncertainty_pct\": 100.5",
         NULL,
         {"\"uncertainty_pct\" is 100.5", "0 to 100"}},
        {"\"value\": 1600", "\"value\": 1e999", NULL, {"a number that fits a double"}},
    };
    REFUSE(c);
}

static void refuses_contradictions(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"{\"value\": 1700", "{\"value\": 1599", NULL, {"\"liquidus_K\" 1599 is below \"solidus_K\" 1600 of line ", "allowed: from there up"}},
        {"\"value\": 3200,",
         "\"value\": 1700,",
         "\"boiling_K\"",
         {"\"boiling_K\" 1700 must be above \"liquidus_K\" 1700"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [601, 1600]",
         NULL,
         {"\"heat_capacity_solid_J_per_kgK\" starts at 601 K", "600 K or below"}},
        {"\"temperature_K\": [300, 1600]",
         "\"temperature_K\": [300,\n 1701.5]",
         " 1701.5",
         {"\"heat_capacity_solid_J_per_kgK\" has a row at 1701.5 K", "above the liquidus 1700 K"}},
        {"\"temperature_K\": [1700, 3200]",
         "\"temperature_K\": [1598, 3200]",
         NULL,
         {"\"conductivity_liquid_W_per_mK\" has a row at 1598 K", "below the solidus 1600 K"}},
        {"\"temperature_K\": 1700",
         "\"temperature_K\": 298",
         NULL,
         {"\"surface_tension_N_per_m\" has a row at 298 K", "below the solidus 1600 K"}},
        {"\"value\": 8000",
         "\"temperature_K\": 2000, \"value\": 8000",
         NULL,
         {"\"density_solid_kg_per_m3\" has a row at 2000 K", "above the liquidus 1700 K"}},
    };
    REFUSE(c);
}

static void refuses_bad_sources(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"source\": [\"Invented\"], \"note\"", "\"source\": [], \"note\"", NULL, {"\"source\" of \"solidus_K\" is an empty list"}},
        {"\"source\": [\"Invented\"], \"note\"",
         "\"source\": [\"Inventd\"], \"note\"",
         NULL,
         {"source \"Inventd\" does not stand in \"sources\"", "did you mean \"Invented\"?"}},
        {"\"source\": [\"Invented\"], \"note\"",
         "\"source\": [\"Qqqqqqqqqq\"], \"note\"",
         NULL,
         {"source \"Qqqqqqqqqq\" does not stand"}},
        {"[\"Invented\", \"Other\"]", "[\"Invented\", \"Invented\"]", NULL, {"\"source\" of \"boiling_K\" has \"Invented\" twice"}},
        {"[\"Invented\", \"Other\"]", "[\"Invented\"]", "\"Other\": {", {"source \"Other\" is never used"}},
        {"\"citation\": \"A second invented source\"", "\"citation\": \"\"", NULL, {"\"citation\" is empty"}},
        {"\"citation\": \"A second invented source\"", "\"citation\": \"  \"", NULL, {"\"citation\" is empty"}},
        {"\"seen\": \"memory\"",
         "\"seen\": \"open\"",
         NULL,
         {"\"seen\": \"open\"", "did you mean \"opened\"?", "\"secondary\""}},
        {"10.1000/none",
         "https://doi.org/10.1000/none",
         NULL,
         {"\"doi\": \"https://doi.org/10.1000/none\"", "10.1007/abc"}},
        {"10.1000/none", "10.1000", NULL, {"\"doi\": \"10.1000\""}},
        {"\"Other\": {", "\"\": {", NULL, {"source key \"\"", "1 to 64 bytes"}},
    };
    REFUSE(c);
}

static void refuses_bad_composition(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"Cr\"", "\"Cx\"", NULL, {"\"limits_wt_pct\": \"Cx\" is not the symbol of an element"}},
        {"\"Cr\"", "\"CR\"", NULL, {"\"CR\" is not the symbol of an element", "did you mean \"Cr\"?"}},
        {"\"balance\": \"Fe\"",
         "\"balance\": \"Iron\"",
         NULL,
         {"\"balance\": \"Iron\" is not the symbol of an element"}},
        {"[16, 18]", "[18, 16]", NULL, {"\"Cr\" has its lowest 18 above its highest 16"}},
        {"[16, 18]", "[-1, 18]", NULL, {"\"Cr\" is -1", "0 to 100"}},
        {"[16, 18]", "[16, 118]", NULL, {"\"Cr\" is 118", "0 to 100"}},
        {"[16, 18]", "[16, 17, 18]", NULL, {"\"Cr\" must be a list of two numbers"}},
        {"\"Cr\": [16, 18],\n      \"C\": [0, 0.030]",
         "\"Cr\": [60, 80],\n      \"C\": [41, 50]",
         "\"limits_wt_pct\"",
         {"\"limits_wt_pct\"", "add up to 101 %"}},
        {"\"source\": [\"Invented\"],\n    \"from_memory\"",
         "\"from_memory\"",
         "\"composition\"",
         {"key \"source\" is missing in \"composition\""}},
    };
    REFUSE(c);
}

static void refuses_bad_names_and_words(void **state)
{
    (void)state;
    static const refusal c[] = {
        {"\"Plain\"", "\"\"", NULL, {"\"name\" is empty"}},
        {"\"Plain\"", "\"a/b\"", NULL, {"\"name\": \"a/b\" has a '/'"}},
        {"\"Plain\"", "\"a\\\\b\"", NULL, {"has a '\\'"}},
        {"\"Plain\"", "\"-p\"", NULL, {"\"name\": \"-p\" must not start with"}},
        {"\"Plain\"", "\"Plain.JSON\"", NULL, {"nor end in a blank or .json"}},
        {"\"Plain\"", "\"Plain \"", NULL, {"nor end in a blank"}},
        {"\"Plain\"", "\"Pl\\u001bain\"", NULL, {"\"name\" has a control character in \"Pl?ain\""}},
        {"\"Plain\"", "\"Pl\\nain\"", NULL, {"\"name\" has a control character"}},
        {"\"Plain\"", "\"Pl\\u0085ain\"", NULL, {"\"name\" has a control character"}},
        {"\"Plain\"", "\"Pl\\u007fain\"", NULL, {"\"name\" has a control character"}},
        {"\"Plain\"",
         "\"01234567890123456789012345678901234567890123456789012345678901234\"",
         NULL,
         {"\"name\" is 65 bytes long", "at most 64"}},
        {"[\"nickel\"]",
         "[\"nikel\"]",
         NULL,
         {"\"cautions\": \"nikel\"", "did you mean \"nickel\"?", "\"reactive-powder\""}},
        {"[\"nickel\"]",
         "[\"explosive!!\"]",
         NULL,
         {"\"cautions\": \"explosive!!\"", "allowed: \"reactive-powder\""}},
        {"[\"nickel\"]", "[\"nickel\", \"nickel\"]", NULL, {"\"cautions\" has \"nickel\" twice"}},
        {"\"EN ISO 9.9999\"", "\"\"", NULL, {"\"designations\" is empty"}},
        {"\"note\": \"round\"", "\"note\": \"\"", NULL, {"\"note\" is empty"}},
        {"\"summary\": \"round", "\"summary\": \"\\u0007round", NULL, {"\"summary\" has a control character"}},
    };
    REFUSE(c);
}

static void refused_file(const char *path, mw_status want, const char *text)
{
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    const mw_status status = mw_alloy_load(path, &a, &err);
    if (status != want || strncmp(err.text, text, strlen(text)) != 0)
        fail_msg("got status %d, text %s; want %d, %s", (int)status, err.text, (int)want, text);
    assert_null(a);
}

static void refuses_files(void **state)
{
    (void)state;
    refused_file(
        "tests/data/cards/wrong_unit.json", MW_BAD_FILE,
        "tests/data/cards/wrong_unit.json:10: unknown key \"solidus_C\": wrong unit: this property is given in K, "
        "key \"solidus_K\"");
    refused_file("tests/data/cards/not_json.json", MW_BAD_FILE, "tests/data/cards/not_json.json:5: ");
    refused_file("tests/data/cards/twice.json", MW_BAD_FILE,
                 "tests/data/cards/twice.json:5: key \"name\" stands twice");
    refused_file("tests/data/cards/lot.json", MW_BAD_FILE, "tests/data/cards/lot.json:2: \"card\" is \"lot\"");
    refused_file("tests/data/cards/none.json", MW_CANNOT_READ, "tests/data/cards/none.json: ");
    refused_file("tests/data/cards", MW_CANNOT_READ, "tests/data/cards: ");
}

/* JSON that is no card at all, and lists and objects where another kind is needed. */
static void refuses_other_json(void **state)
{
    (void)state;
    static const char *const whole[][2] = {{"[]", "the card must be an object { }, found a list"},
                                           {"3", "the card must be an object { }, found a number"},
                                           {"{}", "key \"card\" is missing"},
                                           {"", "a value is expected"},
                                           {"null", "the card must be an object { }, found null"}};
    for (size_t i = 0; i < sizeof whole / sizeof *whole; i++) {
        mw_alloy *a = NULL;
        mw_error err = {MW_OK, ""};
        assert_int_equal(mw_alloy_parse("card.json", whole[i][0], strlen(whole[i][0]), &a, &err), MW_BAD_FILE);
        if (strstr(err.text, whole[i][1]) == NULL)
            fail_msg("message must say %s: %s", whole[i][1], err.text);
    }
}

/* A list that only wastes time is cut off: its entries are compared with each other. */
static void refuses_endless_lists(void **state)
{
    (void)state;
    enum { ENTRIES = 1001, EACH = 9 };
    char *list = malloc(ENTRIES * EACH + 8), *at = list;
    assert_non_null(list);
    for (int i = 0; i < ENTRIES; i++)
        at += sprintf(at, "%s\"%d\"", i == 0 ? "[" : ", ", i);
    strcpy(at, "]");
    const refusal c = {
        "[\"UNS Z00001\", \"EN ISO 9.9999\"]", list, NULL, {"\"designations\" has 1001 entries", "at most 1000"}};
    refused(&c);
    free(list);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(refuses_wrong_kind),
        cmocka_unit_test(refuses_unknown_keys),
        cmocka_unit_test(refuses_keys_with_another_unit),
        cmocka_unit_test(refuses_missing_keys),
        cmocka_unit_test(refuses_wrong_types),
        cmocka_unit_test(refuses_broken_tables),
        cmocka_unit_test(refuses_values_out_of_range),
        cmocka_unit_test(refuses_contradictions),
        cmocka_unit_test(refuses_bad_sources),
        cmocka_unit_test(refuses_bad_composition),
        cmocka_unit_test(refuses_bad_names_and_words),
        cmocka_unit_test(refuses_files),
        cmocka_unit_test(refuses_other_json),
        cmocka_unit_test(refuses_endless_lists),
    };
    return cmocka_run_group_tests(tests, read_plain, free_plain);
}
