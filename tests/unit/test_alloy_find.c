/* SPDX-License-Identifier: GPL-3.0-or-later
 * Finding alloy cards in folders. */
#define _POSIX_C_SOURCE 200809L
#include <sys/stat.h>
#include <unistd.h>

#include "card_text.h"
#include "meltwright/alloy.h"

typedef struct shelf {
    char root[64], one[80], two[80];
    const char *dirs[3];
} shelf;

static void write_file(const char *dir, const char *file, const char *text)
{
    char path[200];
    (void)snprintf(path, sizeof path, "%s/%s", dir, file);
    FILE *f = fopen(path, "w");
    assert_non_null(f);
    assert_true(fputs(text, f) >= 0);
    assert_int_equal(fclose(f), 0);
}

static void write_card(const char *dir, const char *file, const char *name, const char *designations)
{
    char *with_name = edited(plain, "\"Plain\"", name);
    char *text = edited(with_name, "[\"UNS Z00001\", \"EN ISO 9.9999\"]", designations);
    write_file(dir, file, text);
    free(with_name);
    free(text);
}

static int make_shelf(void **state)
{
    shelf *s = calloc(1, sizeof *s);
    assert_non_null(s);
    strcpy(s->root, "/tmp/mw-test-alloy-XXXXXX");
    assert_non_null(mkdtemp(s->root));
    (void)snprintf(s->one, sizeof s->one, "%s/one", s->root);
    (void)snprintf(s->two, sizeof s->two, "%s/two", s->root);
    assert_int_equal(mkdir(s->one, 0700) + mkdir(s->two, 0700), 0);
    s->dirs[0] = "/nowhere/at/all"; /* a folder that is not there is no error */
    s->dirs[1] = s->one;
    s->dirs[2] = s->two;
    write_card(s->one, "b.json", "\"Steel-9\"", "[\"UNS S99900\", \"EN ISO 9.1234\"]");
    write_card(s->one, "a.json", "\"Brass 5\"", "[\"UNS C55500\", \"Steel-9\"]");
    write_card(s->two, "c.json", "\"Steel-9\"", "[\"UNS S11100\"]");
    write_card(s->two, "d.json", "\"Zinc\"", "[\"EN Z1\"]");
    write_file(s->one, "lot.json", "{\"card\": \"lot\", \"name\": \"Lot\"}");
    write_file(s->one, "alloy.schema.json", "{\"card\": \"alloy\", \"name\": \"Schema\"}");
    write_file(s->one, ".hidden.json", "{\"card\": \"alloy\", \"name\": \"Hidden\"}");
    write_file(s->one, "readme.txt", "{\"card\": \"alloy\", \"name\": \"Text\"}");
    *state = s;
    return 0;
}

static int remove_shelf(void **state)
{
    shelf *s = *state;
    static const char *const file[] = {
        "one/a.json",       "one/b.json",     "one/lot.json",    "one/alloy.schema.json",
        "one/.hidden.json", "one/readme.txt", "one/broken.json", "one/broken2.json",
        "one/noname.json",  "one/e.json",     "two/c.json",      "two/d.json"};
    char path[200];
    for (size_t i = 0; i < sizeof file / sizeof *file; i++) {
        (void)snprintf(path, sizeof path, "%s/%s", s->root, file[i]);
        (void)unlink(path);
    }
    const int left = rmdir(s->one) + rmdir(s->two) + rmdir(s->root);
    free(s);
    return left;
}

static void finds(const shelf *s, const char *word, const char *file)
{
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    char path[200];
    (void)snprintf(path, sizeof path, "%s/%s", s->root, file);
    if (mw_alloy_find(word, s->dirs, 3, &a, &err) != MW_OK)
        fail_msg("%s: %s", word, err.text);
    if (strcmp(a->path, path) != 0)
        fail_msg("%s: got %s, want %s", word, a->path, path);
    mw_alloy_free(a);
}

static void finds_by_name_and_designation(void **state)
{
    const shelf *s = *state;
    finds(s, "Steel-9", "one/b.json"); /* first folder first; a name goes before the same word as a designation */
    finds(s, "STEEL -9", "one/b.json");
    finds(s, "brass5", "one/a.json");
    finds(s, "UNS S99900", "one/b.json");
    finds(s, "unss99900", "one/b.json");
    finds(s, "S99900", "one/b.json");
    finds(s, "EN ISO 9.1234", "one/b.json");
    finds(s, "9.1234", "one/b.json");
    finds(s, "S11100", "two/c.json");
    finds(s, "z1", "two/d.json");
    finds(s, "Zinc", "two/d.json");
    finds(s, "steel9", "one/b.json");           /* letters and digits alone */
    finds(s, "alloy 91234", "one/b.json");      /* a number after somebody's own letters */
    finds(s, "EN-9.1234", "one/b.json");
}

static void finds_by_path(void **state)
{
    const shelf *s = *state;
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    assert_int_equal(mw_alloy_find("tests/data/cards/plain.json", s->dirs, 3, &a, &err), MW_OK);
    assert_string_equal(a->name, "Plain");
    mw_alloy_free(a);
    assert_int_equal(mw_alloy_find("no_such_card.json", s->dirs, 3, &a, &err), MW_CANNOT_READ);
    assert_int_equal(mw_alloy_find("tests/data/cards/wrong_unit.json", NULL, 0, &a, &err), MW_BAD_FILE);
    assert_null(a);
}

static void misses(const shelf *s, const char *word, mw_status want, const char *const part[], size_t n)
{
    mw_alloy *a = NULL;
    mw_error err = {MW_OK, ""};
    const mw_status status = mw_alloy_find(word, s->dirs, 3, &a, &err);
    if (status != want || a != NULL)
        fail_msg("%s: status %d, %s", word, (int)status, err.text);
    for (size_t i = 0; i < n; i++)
        if (strstr(err.text, part[i]) == NULL)
            fail_msg("%s: message must say %s: %s", word, part[i], err.text);
    assert_int_equal(mw_alloy_find(word, s->dirs, 3, &a, NULL), want);
}

static void missing_card_names_the_nearest(void **state)
{
    const shelf *s = *state;
    const char *const near[] = {"no alloy card \"Steel-8\"", "did you mean \"Steel-9\"?", "/nowhere/at/all", s->one,
                                s->two};
    misses(s, "Steel-8", MW_NOT_FOUND, near, 5);
    const char *const number[] = {"\"UNS S99901\"", "did you mean \"UNS S99900\"?"};
    misses(s, "UNS S99901", MW_NOT_FOUND, number, 2);
    const char *const bare_number[] = {"did you mean \"9.1234\"?"};
    misses(s, "9.1235", MW_NOT_FOUND, bare_number, 1);
    const char *const prefix[] = {"no alloy card \"MySteel-9\""}; /* letters before letters are another word */
    misses(s, "MySteel-9", MW_NOT_FOUND, prefix, 1);
    const char *const digits[] = {"no alloy card \"X1 91234\""};
    misses(s, "X1 91234", MW_NOT_FOUND, digits, 1);
    const char *const far[] = {"\"qqqqqqqqqq\"", "there are: ", "Brass 5, Steel-9", "Zinc"};
    misses(s, "qqqqqqqqqq", MW_NOT_FOUND, far, 4);
    misses(s, "Lot", MW_NOT_FOUND, NULL, 0);
    misses(s, "Schema", MW_NOT_FOUND, NULL, 0);
    misses(s, "Hidden", MW_NOT_FOUND, NULL, 0);
    misses(s, "Text", MW_NOT_FOUND, NULL, 0);
    misses(s, "", MW_NOT_FOUND, NULL, 0);
}

static void broken_neighbour_hides_nothing(void **state)
{
    const shelf *s = *state;
    write_file(s->one, "broken.json", "{\"card\": \"alloy\",\n \"name\" }");
    write_file(s->one, "noname.json", "{\"card\": \"alloy\"}");
    finds(s, "Steel-9", "one/b.json");
    finds(s, "Zinc", "two/d.json");
    const char *const part[] = {"2 files could not be read, first ", "one/broken.json:2: "};
    misses(s, "Steel-8", MW_NOT_FOUND, part, 2);
}

static void found_but_bad_card_says_why(void **state)
{
    const shelf *s = *state;
    char *text = edited(plain, "\"Plain\"", "\"Bad\"");
    char *bad = edited(text, "\"solidus_K\"", "\"solidus_C\"");
    write_file(s->one, "e.json", bad);
    const char *const part[] = {"one/e.json:", "wrong unit"};
    misses(s, "Bad", MW_BAD_FILE, part, 2);
    free(text);
    free(bad);
}

static void two_cards_of_one_name_are_refused(void **state)
{
    const shelf *s = *state;
    write_card(s->one, "e.json", "\"steel-9\"", "[\"UNS C55500\"]");
    const char *const part[] = {"is the name of two cards", "one/b.json", "one/e.json"};
    misses(s, "Steel-9", MW_BAD_FILE, part, 3);
    const char *const number[] = {"\"C55500\" is the designation of two cards", "one/a.json", "one/e.json"};
    misses(s, "C55500", MW_BAD_FILE, number, 3);
}

static void names_are_sorted(void **state)
{
    const shelf *s = *state;
    char **names = NULL;
    size_t n = 0;
    mw_error err = {MW_OK, ""};
    write_file(s->one, "broken.json", "{");
    write_card(s->one, "e.json", "\"Alum\"", "[]");
    assert_int_equal(mw_alloy_names(s->dirs, 3, &names, &n, &err), MW_OK);
    assert_int_equal(n, 4); /* "Steel-9" lies in both folders and counts once */
    assert_string_equal(names[0], "Alum");
    assert_string_equal(names[1], "Brass 5");
    assert_string_equal(names[2], "Steel-9");
    assert_string_equal(names[3], "Zinc");
    mw_names_free(names, n);
    assert_int_equal(mw_alloy_names(s->dirs, 1, &names, &n, &err), MW_OK);
    assert_int_equal(n, 0);
    mw_names_free(names, n);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test_setup_teardown(finds_by_name_and_designation, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(finds_by_path, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(missing_card_names_the_nearest, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(broken_neighbour_hides_nothing, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(found_but_bad_card_says_why, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(two_cards_of_one_name_are_refused, make_shelf, remove_shelf),
        cmocka_unit_test_setup_teardown(names_are_sorted, make_shelf, remove_shelf),
    };
    return cmocka_run_group_tests(tests, read_plain, free_plain);
}
