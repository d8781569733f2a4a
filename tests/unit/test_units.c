/* SPDX-License-Identifier: GPL-3.0-or-later
 * Quantities at the door: every suffix, every refusal, axes. Definitions of the units: SI Brochure, 9th edition. */
#include "check.h"

#include <stdlib.h>
#include <string.h>

#include "meltwright/units.h"

static void every_suffix_means_what_it_says(void **state)
{
    (void)state;
    static const struct { mw_quantity q; const char *text; double si; } row[] = {
        {MW_POWER, "200", 200}, {MW_POWER, "200W", 200}, {MW_POWER, "0.2kW", 200}, {MW_POWER, "200 W", 200},
        {MW_SPEED, "800", 0.8}, {MW_SPEED, "800mm/s", 0.8}, {MW_SPEED, "0.8m/s", 0.8},
        {MW_LENGTH, "80", 80e-6}, {MW_LENGTH, "80um", 80e-6}, {MW_LENGTH, "80\xC2\xB5m", 80e-6}, {MW_LENGTH, "80\xCE\xBCm", 80e-6},
        {MW_LENGTH, "0.08mm", 80e-6}, {MW_LENGTH, "8e-5m", 80e-6},
        {MW_TEMPERATURE, "80", 353.15}, {MW_TEMPERATURE, "80C", 353.15}, {MW_TEMPERATURE, "353K", 353},
        {MW_KELVIN, "1700", 1700}, {MW_KELVIN, "1426.85C", 1700}, {MW_PLAIN, "0.35", 0.35}, {MW_CONDUCTIVITY, "26.9", 26.9},
        {MW_DENSITY, "7904", 7904}, {MW_HEAT_CAPACITY, "610", 610}, {MW_ENERGY_DENSITY, "60", 60e9}, {MW_ENERGY_DENSITY, "60J/mm3", 60e9}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        double got = NAN;
        mw_error err;
        assert_int_equal(mw_parse_quantity(row[i].q, "--x", row[i].text, &got, &err), MW_OK);
        CHECK_REL(got, row[i].si, 2e-16);
    }
}

/* The same length in any spelling is the same double, so that grids and tables agree to the last bit. */
static void spellings_of_one_value_agree_to_the_bit(void **state)
{
    (void)state;
    for (int um = 1; um < 3000; um++) {
        char a[32], b[32];
        (void)snprintf(a, sizeof a, "%dum", um);
        (void)snprintf(b, sizeof b, "%.3fmm", um / 1000.0);
        double x, y;
        assert_int_equal(mw_parse_quantity(MW_LENGTH, "--x", a, &x, NULL), MW_OK);
        assert_int_equal(mw_parse_quantity(MW_LENGTH, "--x", b, &y, NULL), MW_OK);
        assert_true(x == y);
        assert_true(mw_to_trade(MW_LENGTH, x) == um);
        assert_true(mw_from_trade(MW_LENGTH, um) == x);
    }
    CHECK_NEAR(mw_to_trade(MW_TEMPERATURE, 353.15), 80, 1e-12);
    for (int tenth = 1; tenth < 20000; tenth++) {
        char a[32];
        const int n = snprintf(a, sizeof a, "%.1f", tenth / 10.0);
        double typed, cell;
        assert_int_equal(mw_parse_quantity(MW_SPEED, "--x", a, &typed, NULL), MW_OK);
        assert_true(mw_read_trade(MW_SPEED, a, (size_t)n, &cell) && cell == typed);
        assert_true(mw_to_trade(MW_SPEED, typed) == tenth / 10.0);
    }
    double keep = 1;
    assert_false(mw_read_trade(MW_SPEED, "0,8", 3, &keep));
    assert_false(mw_read_trade(MW_SPEED, "", 0, &keep));
    assert_true(keep == 1);
}

static void refusals_say_what_is_allowed(void **state)
{
    (void)state;
    static const struct { mw_quantity q; const char *text, *part; } row[] = {
        {MW_POWER, "200mW", "unit 'mW' in '200mW' is not one of: W, kW"}, {MW_SPEED, "0.8km/h", "mm/s, m/s"},
        {MW_LENGTH, "80in", "um, mm, m"}, {MW_TEMPERATURE, "80F", "C, K"}, {MW_PLAIN, "35%", "no unit"}, {MW_LENGTH, "", "not a number"},
        {MW_LENGTH, "nan", "not a number"}, {MW_LENGTH, "inf", "not a number"}, {MW_LENGTH, "1e999", "not a number"}, {MW_LENGTH, "um", "not a number"},
        {MW_SPEED, "0,8", "write decimals with a point"}, {MW_SPEED, "0,8m/s", "write decimals with a point"},
        {MW_POWER, "1111111111111111111111111111111111111111111111111111111111111111111111", "not a number"}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        double keep = 1;
        mw_error err;
        assert_int_equal(mw_parse_quantity(row[i].q, "--x", row[i].text, &keep, &err), MW_BAD_VALUE);
        if (strstr(err.text, row[i].part) == NULL || strncmp(err.text, "--x: ", 5) != 0)
            fail_msg("'%s' gave: %s", row[i].text, err.text);
    }
}

static void axes_are_lists_ranges_or_both(void **state)
{
    (void)state;
    static const struct { const char *text; size_t n; double um[8]; } row[] = {
        {"80", 1, {80}}, {"80,100,120", 3, {80, 100, 120}}, {"120,80,100,80", 3, {80, 100, 120}}, {"80:140:3", 3, {80, 110, 140}},
        {"80,100:140:3", 4, {80, 100, 120, 140}}, {"80:140:4um", 4, {80, 100, 120, 140}}, {"0.08:0.14:4mm", 4, {80, 100, 120, 140}},
        {"0.08mm:140um:4", 4, {80, 100, 120, 140}}, {"0.08:0.14mm:4", 4, {80, 100, 120, 140}}, {"140:80:3", 3, {80, 110, 140}}, {"80:80:1", 1, {80}},
        {" 80 , 100 ", 2, {80, 100}}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        double *got = NULL;
        size_t n = 0;
        mw_error err = {MW_OK, ""};
        if (mw_parse_axis(MW_LENGTH, "--hatch", row[i].text, 1000, &got, &n, &err) != MW_OK || n != row[i].n)
            fail_msg("'%s': %zu values, %s", row[i].text, n, err.text);
        for (size_t j = 0; j < n; j++)
            CHECK_REL(got[j], row[i].um[j] * 1e-6, 3e-16);
        free(got);
    }
}

static void bad_axes_are_refused_whole(void **state)
{
    (void)state;
    static const struct { const char *text; mw_status status; const char *part; } row[] = {
        {"", MW_BAD_VALUE, "not a number"}, {"80,", MW_BAD_VALUE, "not a number"}, {",80", MW_BAD_VALUE, "not a number"},
        {"80:140", MW_BAD_VALUE, "START:STOP:COUNT"}, {"80:140:3:4", MW_BAD_VALUE, "START:STOP:COUNT"}, {"80:140:0", MW_BAD_VALUE, "COUNT"},
        {"80:140:2.5", MW_BAD_VALUE, "COUNT"}, {"80:140:-1", MW_BAD_VALUE, "COUNT"}, {"80:140:x", MW_BAD_VALUE, "COUNT"},
        {"80:140:1", MW_BAD_VALUE, "two different ends"}, {"80:140:101", MW_TOO_LARGE, "100"}, {"1:2:1e9", MW_TOO_LARGE, "100"},
        {"80x:140:3", MW_BAD_VALUE, "unit 'x'"}, {"80:140y:3", MW_BAD_VALUE, "unit 'y'"}, {"80:140:3z", MW_BAD_VALUE, "COUNT"}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++) {
        double *got = NULL;
        size_t n = 0;
        mw_error err;
        const mw_status status = mw_parse_axis(MW_LENGTH, "--hatch", row[i].text, 100, &got, &n, &err);
        if (status != row[i].status || strstr(err.text, row[i].part) == NULL || got != NULL)
            fail_msg("'%s' gave %s: %s", row[i].text, mw_status_word(status), err.text);
    }
    char many[1000] = "1";
    for (int i = 2; i < 150; i++)
        (void)snprintf(many + strlen(many), sizeof many - strlen(many), ",%d", i);
    double *got = NULL;
    size_t n;
    assert_int_equal(mw_parse_axis(MW_LENGTH, "--hatch", many, 100, &got, &n, NULL), MW_TOO_LARGE);
}

/* Whatever is typed, the answer is a value or one line. */
static void any_text_gets_a_value_or_a_line(void **state)
{
    (void)state;
    static const char alphabet[] = "0123456789.,:+-eEumWkK C/s\xC2\xB5\x01";
    uint64_t s = 99;
    for (int i = 0; i < 100000; i++) {
        char text[24];
        size_t n = 0;
        for (; n < sizeof text - 1; n++) {
            s = s * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
            if ((s >> 40) % 12 == 0)
                break;
            text[n] = alphabet[(s >> 33) % (sizeof alphabet - 1)];
        }
        text[n] = '\0';
        double *got = NULL;
        size_t count = 0;
        mw_error err = {MW_OK, ""};
        const mw_status status = mw_parse_axis((mw_quantity)(i % 10), "--x", text, 50, &got, &count, &err);
        if (status == MW_OK) {
            assert_true(count >= 1 && count <= 50);
            for (size_t k = 0; k < count; k++)
                assert_true(isfinite(got[k]) && (k == 0 || got[k] > got[k - 1]));
            free(got);
        } else {
            assert_true(err.text[0] != '\0' && strchr(err.text, '\n') == NULL);
        }
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_suffix_means_what_it_says), cmocka_unit_test(spellings_of_one_value_agree_to_the_bit),
        cmocka_unit_test(refusals_say_what_is_allowed),    cmocka_unit_test(axes_are_lists_ranges_or_both),
        cmocka_unit_test(bad_axes_are_refused_whole),      cmocka_unit_test(any_text_gets_a_value_or_a_line),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
