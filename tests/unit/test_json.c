/* SPDX-License-Identifier: GPL-3.0-or-later
 * Strict JSON (RFC 8259): what must be refused, with its line; what must be taken; files whole or not at all. */
#define _POSIX_C_SOURCE 200809L
#include "check.h"

#include <dirent.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/file.h"
#include "base/json.h"

static void refused(const char *text, size_t n, const char *part)
{
    mw_json json;
    mw_error err = {MW_OK, ""};
    const mw_status status = mw_json_parse("t.json", text, n, &json, &err);
    if (status != MW_BAD_FILE || strstr(err.text, part) == NULL || json.root != NULL)
        fail_msg("'%.60s' gave %s: %s", text, mw_status_word(status), err.text);
}

static void loose_json_is_refused_with_its_line(void **state)
{
    (void)state;
    static const struct { const char *text, *part; } row[] = {
        {"", "t.json:1: a value is expected, but the file ends"}, {"{\n\"a\": 1,\n\"a\": 2}", "t.json:3: key \"a\" stands twice; the first is on line 2"},
        {"{\"a\":{\"b\":1,\"b\":1}}", "key \"b\" stands twice"}, {"{\"a\" 1}", "a colon is expected"}, {"{\"a\":1,}", "a text in double quotes is expected"},
        {"{'a':1}", "a text in double quotes"}, {"[1,2", "a comma or ] is expected, but the file ends"}, {"[1 2]", "a comma or ] is expected"},
        {"[01]", "must not start with 0"}, {"[1.]", "a digit is expected"}, {"[.5]", "a value is expected"}, {"[+1]", "a value is expected"},
        {"[-]", "a digit is expected"}, {"[1e]", "a digit is expected"}, {"[NaN]", "a value is expected"}, {"[Infinity]", "a value is expected"},
        {"[1e999]", "fits a double"}, {"[tru]", "a value is expected"}, {"{} x", "t.json:1: nothing more is expected"}, {"\xEF\xBB\xBF{}", "byte order mark"},
        {"[\"\n\"]", "line end inside a text"}, {"[\"\x01\"]", "control character"}, {"[\"\xFF\"]", "not UTF-8"}, {"[\"\xC0\xAF\"]", "not UTF-8"},
        {"[\"\xED\xA0\x80\"]", "not UTF-8"}, {"[\"\\x\"]", "unknown escape"}, {"[\"\\u12g4\"]", "four hex digits"}, {"[\"\\u0000\"]", "\\u0000"},
        {"[\"abc", "a closing double quote"}, {"[\"\\ud800\"]", "lone surrogate"}, {"// c\n{}", "a value is expected"}, {"{\"a\":1 /*c*/}", "a comma or }"},
        {"{\n\n\n\"a\": [1,\n2,\n x]}", "t.json:6: a value is expected, found 'x]}'"}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++)
        refused(row[i].text, strlen(row[i].text), row[i].part);
    refused("[\"a\0b\"]", 7, "control character");
    refused("{}\0", 3, "nothing more");
}

static void deep_and_wide_files_are_refused(void **state)
{
    (void)state;
    char deep[200];
    memset(deep, '[', 100);
    memset(deep + 100, ']', 100);
    refused(deep, 200, "nested too deep");
    size_t size = 1 << 20, used = 1;
    char *wide = malloc(size);
    assert_non_null(wide);
    wide[0] = '{';
    for (int i = 0; i < 1001; i++)
        used += (size_t)snprintf(wide + used, size - used, "%s\"k%d\":1", i ? "," : "", i);
    wide[used++] = '}';
    refused(wide, used, "more than 1000 keys");
    free(wide);
}

static void good_json_keeps_values_and_lines(void **state)
{
    (void)state;
    const char text[] = "{\n  \"a\": [1, -2.5e-3,\n   \"\xC3\xA9\\u00e9\\n\"],\r\n  \"b\": {\"c\": true, \"d\": null}\n}\n";
    mw_json json;
    mw_error err;
    assert_int_equal(mw_json_parse("t", text, sizeof text - 1, &json, &err), MW_OK);
    const cJSON *a = cJSON_GetObjectItemCaseSensitive(json.root, "a"), *b = cJSON_GetObjectItemCaseSensitive(json.root, "b");
    assert_int_equal(mw_json_line(json.root), 1);
    assert_int_equal(mw_json_line(a), 2);
    assert_int_equal(mw_json_line(cJSON_GetArrayItem(a, 1)), 2);
    assert_int_equal(mw_json_line(cJSON_GetArrayItem(a, 2)), 3);
    assert_int_equal(mw_json_line(cJSON_GetObjectItemCaseSensitive(b, "d")), 4);
    assert_true(cJSON_GetArrayItem(a, 1)->valuedouble == -2.5e-3);
    assert_string_equal(cJSON_GetArrayItem(a, 2)->valuestring, "\xC3\xA9\xC3\xA9\n");
    assert_int_equal(strlen(json.hash), 16);
    mw_json_free(&json);
}

/* FNV-1a 64 test vectors of its authors (Fowler, Noll, Vo; from memory): "" and "a". */
static void the_hash_is_fnv_1a(void **state)
{
    (void)state;
    char hash[17];
    mw_hash_text("", 0, hash);
    assert_string_equal(hash, "cbf29ce484222325");
    mw_hash_text("a", 1, hash);
    assert_string_equal(hash, "af63dc4c8601ec8c");
}

/* Broken texts of every kind: a tree or one line, never a crash (the sanitizer flavour watches). */
static void mangled_json_never_crashes(void **state)
{
    (void)state;
    const char good[] = "{\"a\": [1, 2.5e3, true], \"b\": {\"c\": \"x\\u00e9\", \"d\": null}, \"e\": -0.0}";
    uint64_t s = 3;
    for (int i = 0; i < 50000; i++) {
        char text[sizeof good];
        memcpy(text, good, sizeof good);
        for (int k = 0; k < 1 + i % 3; k++) {
            s = s * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
            text[(s >> 33) % (sizeof good - 1)] = (char)(s >> 56);
        }
        mw_json json;
        mw_error err = {MW_OK, ""};
        if (mw_json_parse("t", text, sizeof good - 1 - (size_t)(i % 7), &json, &err) == MW_OK)
            mw_json_free(&json);
        else
            assert_true(err.text[0] != '\0' && strchr(err.text, '\n') == NULL);
    }
}

static char folder[64];

static int make_folder(void **state)
{
    (void)state;
    strcpy(folder, "/tmp/mw-file-XXXXXX");
    return mkdtemp(folder) == NULL;
}

static int drop_folder(void **state)
{
    (void)state;
    return rmdir(folder);
}

static int entries(void)
{
    DIR *d = opendir(folder);
    int n = -2;
    while (readdir(d) != NULL)
        n++;
    closedir(d);
    return n;
}

static void a_file_appears_whole_or_not_at_all(void **state)
{
    (void)state;
    char path[128];
    (void)snprintf(path, sizeof path, "%s/out.csv", folder);
    mw_file_out out;
    mw_error err;
    assert_int_equal(mw_file_create(path, false, &out, &err), MW_OK);
    assert_true(fputs("half", out.stream) >= 0);
    assert_int_equal(access(path, F_OK), -1); /* nothing under the final name yet */
    mw_file_discard(&out);
    assert_int_equal(entries(), 0);
    assert_int_equal(mw_file_create(path, false, &out, &err), MW_OK);
    (void)fputs("first", out.stream);
    assert_int_equal(mw_file_commit(&out, &err), MW_OK);
    char *bytes;
    size_t n;
    assert_int_equal(mw_file_read(path, 100, &bytes, &n, &err), MW_OK);
    assert_string_equal(bytes, "first");
    free(bytes);
    assert_int_equal(mw_file_create(path, false, &out, &err), MW_CANNOT_WRITE);
    assert_non_null(strstr(err.text, "exists already"));
    assert_int_equal(mw_file_create(path, true, &out, &err), MW_OK);
    (void)fputs("second", out.stream);
    assert_int_equal(mw_file_commit(&out, &err), MW_OK);
    assert_int_equal(mw_file_read(path, 5, &bytes, &n, &err), MW_TOO_LARGE);
    assert_int_equal(mw_file_read(path, 6, &bytes, &n, &err), MW_OK);
    assert_string_equal(bytes, "second");
    free(bytes);
    assert_int_equal(entries(), 1);
    unlink(path);
}

/* Two writers of one name without leave to overwrite: the second is told, the first file stays. */
static void a_late_rival_is_not_overwritten(void **state)
{
    (void)state;
    char path[128];
    (void)snprintf(path, sizeof path, "%s/out.csv", folder);
    mw_file_out one, two;
    mw_error err;
    assert_int_equal(mw_file_create(path, false, &one, &err), MW_OK);
    assert_int_equal(mw_file_create(path, false, &two, &err), MW_OK);
    (void)fputs("one", one.stream);
    (void)fputs("two", two.stream);
    assert_int_equal(mw_file_commit(&one, &err), MW_OK);
    assert_int_equal(mw_file_commit(&two, &err), MW_CANNOT_WRITE);
    char *bytes;
    size_t n;
    assert_int_equal(mw_file_read(path, 100, &bytes, &n, &err), MW_OK);
    assert_string_equal(bytes, "one");
    free(bytes);
    unlink(path);
    assert_int_equal(entries(), 0);
}

static void what_cannot_be_read_or_written_is_said(void **state)
{
    (void)state;
    char *bytes;
    size_t n;
    mw_error err;
    mw_file_out out;
    assert_int_equal(mw_file_read("tests/no-such-file", 10, &bytes, &n, &err), MW_CANNOT_READ);
    assert_non_null(strstr(err.text, "tests/no-such-file: cannot be opened"));
    assert_int_equal(mw_file_read("tests", 10, &bytes, &n, &err), MW_CANNOT_READ);
    assert_non_null(strstr(err.text, "is a folder"));
    assert_int_equal(mw_file_create("tests", true, &out, &err), MW_CANNOT_WRITE);
    assert_int_equal(mw_file_create("no-such-folder/x.csv", true, &out, &err), MW_CANNOT_WRITE);
    assert_non_null(strstr(err.text, "cannot be written"));
    mw_json json;
    assert_int_equal(mw_json_read("tests/no-such-file", &json, &err), MW_CANNOT_READ);
    mw_file_discard(&(mw_file_out){0});
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(loose_json_is_refused_with_its_line),
        cmocka_unit_test(deep_and_wide_files_are_refused),
        cmocka_unit_test(good_json_keeps_values_and_lines),
        cmocka_unit_test(the_hash_is_fnv_1a),
        cmocka_unit_test(mangled_json_never_crashes),
        cmocka_unit_test_setup_teardown(a_file_appears_whole_or_not_at_all, make_folder, drop_folder),
        cmocka_unit_test_setup_teardown(a_late_rival_is_not_overwritten, make_folder, drop_folder),
        cmocka_unit_test(what_cannot_be_read_or_written_is_said),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
