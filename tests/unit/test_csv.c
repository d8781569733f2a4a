/* SPDX-License-Identifier: GPL-3.0-or-later
 * CSV reading: RFC 4180 as written, and what spreadsheets do instead. */
#define _POSIX_C_SOURCE 200809L
#include "check.h"

#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "base/csv.h"

static char path[] = "/tmp/mw-csv-XXXXXX";

static int make_file(void **state)
{
    (void)state;
    strcpy(path, "/tmp/mw-csv-XXXXXX");
    const int fd = mkstemp(path);
    return fd < 0 ? -1 : close(fd);
}

static int drop_file(void **state)
{
    (void)state;
    return unlink(path);
}

static mw_status opened(const char *bytes, size_t n, mw_csv_reader **r, mw_error *err)
{
    FILE *f = fopen(path, "wb");
    assert_non_null(f);
    assert_true(fwrite(bytes, 1, n, f) == n);
    fclose(f);
    return mw_csv_open(path, r, err);
}

static void refused(const char *bytes, size_t n, const char *part)
{
    mw_csv_reader *r;
    mw_error err = {MW_OK, ""};
    if (opened(bytes, n, &r, &err) == MW_OK || strstr(err.text, part) == NULL)
        fail_msg("'%.40s' gave: %s", bytes, err.text);
    assert_null(r);
}

static void quotes_line_ends_and_blank_lines(void **state)
{
    (void)state;
    const char text[] = "a,\"b \"\"x\"\"\",c\r\n1,\"two\nlines, and a comma\",\r\n\r\n\"\",,3";
    mw_csv_reader *r;
    mw_error err;
    bool end;
    assert_int_equal(opened(text, sizeof text - 1, &r, &err), MW_OK);
    assert_int_equal(mw_csv_columns(r), 3);
    assert_string_equal(mw_csv_column_name(r, 1), "b \"x\"");
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_false(end);
    assert_int_equal(mw_csv_line(r), 2);
    assert_string_equal(mw_csv_get(r, 1).text, "two\nlines, and a comma");
    assert_int_equal(mw_csv_get(r, 1).n, strlen("two\nlines, and a comma"));
    assert_int_equal(mw_csv_get(r, 2).n, 0);
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_int_equal(mw_csv_line(r), 5); /* two lines in the quotes, one blank */
    assert_int_equal(mw_csv_get(r, 0).n, 0);
    assert_string_equal(mw_csv_get(r, 2).text, "3");
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_true(end);
    mw_csv_close(r);
}

static void what_is_no_table_is_refused(void **state)
{
    (void)state;
    static const struct { const char *text, *part; } row[] = {
        {"", "the file is empty"}, {"\n\n", "the file is empty"}, {"a,,b\n", "column 2 has no name"}, {"a,b,a\n", "column \"a\" stands twice, as number 1 and 3"},
        {"a;b\n1;2\n", "separated by semicolons"}, {"a\tb\n", "separated by tabs"}, {"\xEF\xBB\xBF" "a,b\n", "byte order mark"}, {"\"a\n", "is not closed"},
        {"a\"b,c\n", "a quote inside an unquoted field"}, {"\"a\"b,c\n", "text after a closing quote"}};
    for (size_t i = 0; i < sizeof row / sizeof *row; i++)
        refused(row[i].text, strlen(row[i].text), row[i].part);
    refused("a\0,b\n", 5, "zero byte");
    refused("\xFF\xFE" "a\0,\0", 6, "UTF-8");
    char *wide = malloc(4000);
    memset(wide, ',', 4000);
    refused(wide, 4000, "more than 512 fields");
    free(wide);
    mw_csv_reader *r;
    mw_error err;
    assert_int_equal(mw_csv_open("tests/no-such.csv", &r, &err), MW_CANNOT_READ);
}

static void a_bad_record_does_not_end_the_run(void **state)
{
    (void)state;
    const char text[] = "a,b\n1\n2,3,4\nx\"y,1\n5,6\n";
    static const char *const part[] = {":2: 1 fields, but the header has 2 columns", ":3: 3 fields", ":4: a quote inside"};
    mw_csv_reader *r;
    mw_error err;
    bool end;
    assert_int_equal(opened(text, sizeof text - 1, &r, &err), MW_OK);
    for (size_t i = 0; i < 3; i++) {
        assert_int_equal(mw_csv_next(r, &end, &err), MW_BAD_FILE);
        if (strstr(err.text, part[i]) == NULL)
            fail_msg("%s", err.text);
    }
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_string_equal(mw_csv_get(r, 1).text, "6");
    mw_csv_close(r);
}

static void long_fields_pass_and_longer_ones_are_refused(void **state)
{
    (void)state;
    const size_t n = 1000 * 1000;
    char *text = malloc(2 * n + (1 << 16) + 100);
    size_t used = (size_t)sprintf(text, "a,b\n1,");
    memset(text + used, 'x', n);
    used += n;
    used += (size_t)sprintf(text + used, "\n2,");
    memset(text + used, 'y', n + (1 << 16));
    used += n + (1 << 16);
    used += (size_t)sprintf(text + used, "\n3,4\n");
    mw_csv_reader *r;
    mw_error err;
    bool end;
    assert_int_equal(opened(text, used, &r, &err), MW_OK);
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_int_equal(mw_csv_get(r, 1).n, n);
    assert_int_equal(mw_csv_next(r, &end, &err), MW_BAD_FILE);
    assert_non_null(strstr(err.text, "more than 1 MB"));
    assert_int_equal(mw_csv_next(r, &end, &err), MW_OK);
    assert_string_equal(mw_csv_get(r, 0).text, "3");
    mw_csv_close(r);
    free(text);
}

static void any_bytes_end_in_records_or_lines(void **state)
{
    (void)state;
    static const char alphabet[] = "ab1,,\"\"\n\r;\t \xC3\xA9";
    uint64_t s = 11;
    for (int i = 0; i < 3000; i++) {
        char text[200];
        const size_t n = (size_t)i % sizeof text;
        for (size_t k = 0; k < n; k++) {
            s = s * UINT64_C(6364136223846793005) + UINT64_C(1442695040888963407);
            text[k] = alphabet[(s >> 33) % (sizeof alphabet - 1)];
        }
        mw_csv_reader *r;
        mw_error err = {MW_OK, ""};
        if (opened(text, n, &r, &err) != MW_OK) {
            assert_true(err.text[0] != '\0');
            continue;
        }
        bool end = false;
        int records = 0;
        while (!end && records < 1000) {
            if (mw_csv_next(r, &end, &err) == MW_OK && !end)
                assert_int_equal(mw_csv_count(r), mw_csv_columns(r));
            records++;
        }
        assert_true(records < 1000);
        mw_csv_close(r);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(quotes_line_ends_and_blank_lines),
        cmocka_unit_test(what_is_no_table_is_refused),
        cmocka_unit_test(a_bad_record_does_not_end_the_run),
        cmocka_unit_test(long_fields_pass_and_longer_ones_are_refused),
        cmocka_unit_test(any_bytes_end_in_records_or_lines),
    };
    return cmocka_run_group_tests(tests, make_file, drop_file);
}
