/* SPDX-License-Identifier: GPL-3.0-or-later
 * Numbers to and from text against the C library's own conversions, in a locale with a decimal comma too; nearest names; status words. */
#include "check.h"

#include <locale.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>

#include "meltwright/status.h"
#include "meltwright/text.h"
#include "meltwright/version.h"

static bool reads(const char *text, double *out)
{
    return mw_read_number(text, strlen(text), out);
}

/* xorshift64*: a fixed sequence for the property tests. */
static uint64_t next_random(uint64_t *s)
{
    *s ^= *s >> 12;
    *s ^= *s << 25;
    *s ^= *s >> 27;
    return *s * UINT64_C(2685821657736338717);
}

static void every_double_survives_print_and_read(void **state)
{
    (void)state;
    uint64_t seed = 20;
    for (int i = 0; i < 300000; i++) {
        const uint64_t bits = next_random(&seed);
        double value, back;
        memcpy(&value, &bits, sizeof value);
        if (!isfinite(value))
            continue;
        char text[MW_NUMBER_SIZE];
        const size_t n = mw_print_number(text, value);
        if (n != strlen(text) || !mw_read_number(text, n, &back) || back != value)
            fail_msg("%a printed as %s", value, text);
    }
}

static void reading_agrees_with_strtod(void **state)
{
    (void)state;
    uint64_t seed = 7;
    for (int i = 0; i < 300000; i++) {
        char text[64];
        const uint64_t a = next_random(&seed), b = next_random(&seed);
        const int digits = 1 + (int)(b % 24);
        (void)snprintf(text, sizeof text, "%s%0*llu.%llue%d", a % 2 ? "-" : "", digits, (unsigned long long)(a >> (b % 60)),
                       (unsigned long long)(b >> (a % 60)), (int)(b % 60) - 30);
        double got;
        assert_true(reads(text, &got));
        if (got != strtod(text, NULL))
            fail_msg("%s: got %a, strtod %a", text, got, strtod(text, NULL));
    }
}

static void only_plain_decimals_are_numbers(void **state)
{
    (void)state;
    static const char *const bad[] = {"", "-", ".", "+.", "e5", "1e", "1e+", "0x10", "nan", "inf", "-inf", " 1", "1 ", "1,5", "1.2.3", "--1", "1e999",
                                      "12W", "1_0", "\xD9\xA1"};
    for (size_t i = 0; i < sizeof bad / sizeof *bad; i++) {
        double keep = 42;
        if (reads(bad[i], &keep) || keep != 42)
            fail_msg("'%s' was read as %g", bad[i], keep);
    }
    static const struct { const char *text; double value; } good[] = {
        {"0", 0}, {"-0", 0}, {"1.", 1}, {".5", 0.5}, {"+2.385", 2.385}, {"1E3", 1000}, {"00012", 12}, {"1e-400", 0},
        {"123456789012345678901234567890", 1.2345678901234568e29}, {"0.000000000000000000000000000001", 1e-30}};
    for (size_t i = 0; i < sizeof good / sizeof *good; i++) {
        double got = -1;
        assert_true(reads(good[i].text, &got));
        assert_true(got == good[i].value);
    }
    char lone[3] = {'1', '2', '3'}; /* not zero-terminated: the length rules */
    double got;
    assert_true(mw_read_number(lone, 2, &got) && got == 12);
}

static void the_locale_has_no_say(void **state)
{
    (void)state;
    char text[MW_NUMBER_SIZE];
    double got;
    /* Present on many systems; where none is, the plain locale is tested twice. */
    const char *const comma[] = {"de_DE.UTF-8", "de_DE.utf8", "fr_FR.UTF-8", "C"};
    for (size_t i = 0; i < 4 && setlocale(LC_ALL, comma[i]) == NULL; i++) {
    }
    assert_int_equal(mw_print_number(text, 2.385), 5);
    assert_string_equal(text, "2.385");
    assert_true(reads("2.3850000000000000000001", &got) && got == 2.385);
    setlocale(LC_ALL, "C");
}

static void what_is_not_finite_prints_as_nothing(void **state)
{
    (void)state;
    char text[MW_NUMBER_SIZE] = "x";
    assert_int_equal(mw_print_number(text, NAN), 0);
    assert_string_equal(text, "");
    assert_int_equal(mw_print_number(text, INFINITY), 0);
}

static void the_nearest_name_is_offered_only_when_near(void **state)
{
    (void)state;
    static const char *const names[] = {"power", "speed", "hatch", "layer", NULL, "d4sigma"};
    assert_string_equal(mw_nearest_name("pwoer", names, 6), "power");
    assert_string_equal(mw_nearest_name("Hatches", names, 6), "hatch");
    assert_string_equal(mw_nearest_name("d4sgima", names, 6), "d4sigma");
    assert_string_equal(mw_nearest_name("lay", names, 6), "layer");
    assert_null(mw_nearest_name("contrast", names, 6));
    assert_null(mw_nearest_name("", names, 6));
    assert_null(mw_nearest_name("x", names, 0));
    char longest[500];
    memset(longest, 'a', sizeof longest - 1);
    longest[sizeof longest - 1] = '\0';
    assert_null(mw_nearest_name(longest, names, 6));
    assert_true(mw_same_word("PoWer", "pOwER") && !mw_same_word("power", "powers") && !mw_same_word("a", ""));
}

static void an_error_is_one_printable_line(void **state)
{
    (void)state;
    mw_error err;
    assert_int_equal(mw_fail(&err, MW_BAD_FILE, "a.json", 12, "key \"%s\"", "x\ny\x1B[31m\xC2\x9B \xFF \xC3\xA9"), MW_BAD_FILE);
    assert_string_equal(err.text, "a.json:12: key \"x?y?[31m?? ? \xC3\xA9\"");
    assert_int_equal(err.status, MW_BAD_FILE);
    (void)mw_fail(&err, MW_BAD_VALUE, NULL, 0, "plain");
    assert_string_equal(err.text, "plain");
    assert_int_equal(mw_fail(NULL, MW_NO_MEMORY, "f", 0, "unwanted"), MW_NO_MEMORY);
    char path[3000];
    memset(path, 'p', sizeof path - 1);
    path[sizeof path - 1] = '\0';
    (void)mw_fail(&err, MW_BAD_VALUE, path, 3, "the message survives a long path");
    assert_non_null(strstr(err.text, "the message survives a long path"));
}

static void every_status_has_word_and_sentence(void **state)
{
    (void)state;
#define X(name, number, word, sentence)                                                                                \
    assert_string_equal(mw_status_word(MW_##name), word);                                                              \
    assert_string_equal(mw_status_sentence(MW_##name), sentence);
    MW_STATUS_LIST(X)
#undef X
    assert_string_equal(mw_status_word((mw_status)99), "unknown");
    assert_string_equal(mw_status_sentence((mw_status)99), "unknown");
    assert_string_equal(mw_version(), MW_VERSION);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(every_double_survives_print_and_read),
        cmocka_unit_test(reading_agrees_with_strtod),
        cmocka_unit_test(only_plain_decimals_are_numbers),
        cmocka_unit_test(the_locale_has_no_say),
        cmocka_unit_test(what_is_not_finite_prints_as_nothing),
        cmocka_unit_test(the_nearest_name_is_offered_only_when_near),
        cmocka_unit_test(an_error_is_one_printable_line),
        cmocka_unit_test(every_status_has_word_and_sentence),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
