/* SPDX-License-Identifier: GPL-3.0-or-later
 * The list of columns, and its views: every fixed name is there, CSV reads back exactly, JSON parses. */
#include "check.h"

#include <cjson/cJSON.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/table.h"
#include "meltwright/text.h"

/* Names that scripts rely on. */
static const char *const fixed[] = {
    "power_W", "speed_mm_per_s", "hatch_um", "layer_um", "d4sigma_um", "preheat_C", "width_um", "depth_um", "length_um", "width_lo_um", "width_hi_um",
    "depth_lo_um", "depth_hi_um", "absorptivity", "peak_temperature_K", "cooling_rate_K_per_s", "linear_energy_J_per_mm", "areal_energy_J_per_mm2",
    "volumetric_energy_J_per_mm3", "build_rate_cm3_per_h", "normalised_enthalpy", "keyhole_number", "overlap_index", "keyhole_index", "balling_index",
    "mode", "verdict", "p_nominal", "p_lack_of_fusion", "p_keyhole", "p_balling", "unmelted_pct", "status", "margin_power_down_pct",
    "margin_power_up_pct", "margin_speed_down_pct", "margin_speed_up_pct"};

static mw_result sample(void)
{
    mw_alloy *alloy;
    mw_plan plan;
    mw_result r;
    mw_error err;
    assert_int_equal(mw_alloy_load("alloys/718.json", &alloy, &err), MW_OK);
    assert_int_equal(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), MW_OK);
    const mw_setting s = {237.3, 0.9137, 97e-6, 41e-6, 83e-6, 293.15};
    assert_int_equal(mw_evaluate(&plan, &s, true, &r, &err), MW_OK);
    mw_alloy_free(alloy);
    return r;
}

static void every_fixed_column_is_there_once(void **state)
{
    (void)state;
    for (size_t k = 0; k < sizeof fixed / sizeof *fixed; k++) {
        int seen = 0;
        for (size_t i = 0; i < mw_column_count(); i++)
            seen += strcmp(mw_column_at(i)->key, fixed[k]) == 0;
        if (seen != 1)
            fail_msg("%s stands %d times", fixed[k], seen);
    }
    for (size_t i = 0; i < mw_column_count(); i++)
        assert_true(strlen(mw_column_at(i)->meaning) > 1);
    assert_true(mw_column_count() < 128); /* callers keep a flag a column in fixed arrays */
}

static void csv_reads_back_exactly(void **state)
{
    (void)state;
    const mw_result r = sample();
    for (size_t i = 0; i < mw_column_count(); i++) {
        char cell[64];
        const size_t n = mw_column_cell(i, &r, cell, sizeof cell);
        if (mw_column_at(i)->is_text) {
            assert_string_equal(cell, mw_column_text(i, &r));
            assert_true(isnan(mw_column_number(i, &r)));
            continue;
        }
        double back = NAN;
        const double value = mw_column_number(i, &r);
        assert_string_equal(mw_column_text(i, &r), "");
        if (isnan(value))
            assert_int_equal(n, 0);
        else
            assert_true(mw_read_number(cell, n, &back) && back == value);
    }
    char tiny[3];
    assert_int_equal(mw_column_cell(0, &r, tiny, sizeof tiny), 0);
    /* What was typed comes back as typed: 97 um, not 97.00000000000001. */
    char cell[64];
    (void)mw_column_cell(2, &r, cell, sizeof cell);
    assert_string_equal(cell, "97");
    (void)mw_column_cell(1, &r, cell, sizeof cell);
    assert_string_equal(cell, "913.7");
}

static char *written(void (*put)(FILE *, const void *), const void *what)
{
    FILE *f = tmpfile();
    assert_non_null(f);
    put(f, what);
    const long n = ftell(f);
    char *text = calloc((size_t)n + 1, 1);
    rewind(f);
    assert_true(fread(text, 1, (size_t)n, f) == (size_t)n);
    fclose(f);
    return text;
}

static void put_result(FILE *f, const void *r)
{
    mw_json_result(f, r);
}

static void put_provenance(FILE *f, const void *p)
{
    mw_json_provenance(f, p);
}

static void put_string(FILE *f, const void *s)
{
    mw_json_string(f, s);
}

static void put_row(FILE *f, const void *r)
{
    mw_csv_header(f, NULL);
    (void)fputc('\n', f);
    mw_csv_row(f, r, NULL);
}

static void json_parses_and_agrees(void **state)
{
    (void)state;
    mw_result r = sample();
    r.margins.power_up_pct = NAN;
    char *text = written(put_result, &r);
    cJSON *json = cJSON_Parse(text);
    assert_non_null(json);
    for (size_t i = 0; i < mw_column_count(); i++) {
        const cJSON *item = cJSON_GetObjectItemCaseSensitive(json, mw_column_at(i)->key);
        assert_non_null(item);
        if (mw_column_at(i)->is_text)
            assert_string_equal(item->valuestring, mw_column_text(i, &r));
        else if (isnan(mw_column_number(i, &r)))
            assert_true(cJSON_IsNull(item));
        else
            assert_true(item->valuedouble == mw_column_number(i, &r));
    }
    cJSON_Delete(json);
    free(text);
}

static void strings_and_fields_are_quoted_as_the_standards_ask(void **state)
{
    (void)state;
    const char nasty[] = "a\"b\\c\nd\te\x01 \xC3\xA9 </script>";
    char *text = written(put_string, nasty);
    cJSON *json = cJSON_Parse(text);
    assert_non_null(json);
    assert_string_equal(json->valuestring, nasty);
    cJSON_Delete(json);
    free(text);
    FILE *f = tmpfile();
    mw_csv_field(f, "plain", 5);
    (void)fputc('|', f);
    mw_csv_field(f, "a,\"b\"\n", 6);
    rewind(f);
    char line[64] = "";
    assert_true(fread(line, 1, sizeof line - 1, f) > 0);
    assert_string_equal(line, "plain|\"a,\"\"b\"\"\n\"");
    fclose(f);
}

static void header_and_row_have_the_same_cells(void **state)
{
    (void)state;
    const mw_result r = sample();
    char *text = written(put_row, &r);
    char *line_end = strchr(text, '\n');
    size_t commas[2] = {0, 0};
    for (char *c = text; *c != '\0'; c++)
        commas[c > line_end] += *c == ',';
    assert_int_equal(commas[0], mw_column_count() - 1);
    assert_int_equal(commas[1], mw_column_count() - 1);
    free(text);
}

static void provenance_says_what_made_it(void **state)
{
    (void)state;
    mw_alloy *alloy;
    mw_plan plan;
    mw_error err;
    assert_int_equal(mw_alloy_load("alloys/316L.json", &alloy, &err), MW_OK);
    assert_int_equal(mw_plan_make(alloy, MW_MODEL_DEFAULT, NULL, 293.15, &plan, &err), MW_OK);
    const char *const option[] = {"power"}, *const value[] = {"200\"W"};
    const mw_provenance p = {.command = "sweep", .plan = &plan, .n_option = 1, .option = option, .option_value = value};
    char *text = written(put_provenance, &p);
    cJSON *json = cJSON_Parse(text);
    assert_non_null(json);
    assert_string_equal(cJSON_GetObjectItem(json, "command")->valuestring, "sweep");
    const cJSON *card = cJSON_GetArrayItem(cJSON_GetObjectItem(json, "cards"), 0);
    assert_string_equal(cJSON_GetObjectItem(card, "hash")->valuestring, alloy->hash);
    assert_string_equal(cJSON_GetObjectItem(card, "file")->valuestring, "316L.json");
    assert_string_equal(cJSON_GetObjectItem(cJSON_GetObjectItem(json, "options"), "power")->valuestring, "200\"W");
    assert_true(cJSON_GetObjectItem(cJSON_GetObjectItem(json, "limits"), "overlap_index_even_odds")->valuedouble > 0);
    cJSON_Delete(json);
    free(text);
    mw_alloy_free(alloy);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_fixed_column_is_there_once),
        cmocka_unit_test(csv_reads_back_exactly),
        cmocka_unit_test(json_parses_and_agrees),
        cmocka_unit_test(strings_and_fields_are_quoted_as_the_standards_ask),
        cmocka_unit_test(header_and_row_have_the_same_cells),
        cmocka_unit_test(provenance_says_what_made_it),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
