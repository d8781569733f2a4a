/* SPDX-License-Identifier: GPL-3.0-or-later
 * Parity plots: a file that appears whole, the same bytes each time, and clear answers to what cannot be drawn. */
#define _POSIX_C_SOURCE 200809L
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "base/file.h"
#include "check.h"
#include "meltwright/parityplot.h"

enum { POINTS = 600 };
static double measured[POINTS], predicted[POINTS];
static bool conduction[POINTS];
static char folder[64];

static int make_points(void **state)
{
    (void)state;
    for (int i = 0; i < POINTS; i++) {
        measured[i] = 20 * pow(20, i / (double)POINTS);
        predicted[i] = measured[i] * exp(0.2 * sin(7.0 * i));
        conduction[i] = i % 3 == 0;
    }
    strcpy(folder, "/tmp/mw-test-parity-XXXXXX");
    return mkdtemp(folder) == NULL;
}

static int remove_folder(void **state)
{
    (void)state;
    return rmdir(folder);
}

static const char *const names[] = {"one", "two # with a sign", "three"};

static mw_status draw(size_t n_group, size_t n_panel, const mw_parity_points *points, const char *file, bool overwrite, mw_error *err)
{
    char path[128];
    const mw_parity_panel panel[] = {{"width (um)", points}, {"depth (um)", points}, {"length (um)", points}, {"", points}};
    const mw_parity_picture p = {.title = "test", .n_group = n_group, .group = names, .n_panel = n_panel, .panel = panel};
    (void)snprintf(path, sizeof path, "%s/%s", folder, file);
    return mw_parity_draw(&p, path, overwrite, err);
}

static void same_bytes_below_the_size_that_a_page_bears(void **state)
{
    (void)state;
    const mw_parity_points points[] = {{POINTS / 2, measured, predicted, conduction}, {POINTS / 2, measured + POINTS / 2, predicted + POINTS / 2, NULL}, {0, NULL, NULL, NULL}};
    static const char *const kind[] = {"a.svg", "a.png", "a.pdf"};
    for (size_t k = 0; k < 3; k++) {
        char path[128], *first = NULL, *second = NULL;
        size_t n = 0, m = 0;
        mw_error err = {MW_OK, ""};
        (void)snprintf(path, sizeof path, "%s/%s", folder, kind[k]);
        if (draw(3, 1, points, kind[k], false, &err) != MW_OK)
            fail_msg("%s: %s", kind[k], err.text);
        assert_int_equal(mw_file_read(path, 1 << 24, &first, &n, &err), MW_OK);
        assert_true(n < 1000 * POINTS);
        assert_int_equal(draw(3, 1, points, kind[k], false, &err), MW_CANNOT_WRITE); /* it exists */
        assert_int_equal(draw(3, 1, points, kind[k], true, &err), MW_OK);
        assert_int_equal(mw_file_read(path, 1 << 24, &second, &m, &err), MW_OK);
        assert_int_equal(n, m);
        assert_memory_equal(first, second, n);
        free(first);
        free(second);
        assert_int_equal(unlink(path), 0);
    }
}

static void what_cannot_be_drawn_is_said(void **state)
{
    (void)state;
    const double bad[] = {NAN, 0, -3, INFINITY};
    const mw_parity_points none = {4, bad, bad, NULL}, good = {POINTS, measured, predicted, NULL};
    mw_error err;
    assert_int_equal(draw(1, 1, &none, "b.svg", false, &err), MW_BAD_VALUE);
    assert_non_null(strstr(err.text, "no point"));
    assert_int_equal(draw(0, 1, &good, "b.svg", false, &err), MW_BAD_VALUE);
    assert_int_equal(draw(MW_PARITY_MOST_GROUPS + 1, 1, &good, "b.svg", false, &err), MW_BAD_VALUE);
    assert_int_equal(draw(1, 0, &good, "b.svg", false, &err), MW_BAD_VALUE);
    assert_int_equal(draw(1, MW_PARITY_MOST_PANELS + 1, &good, "b.svg", false, &err), MW_BAD_VALUE);
    assert_int_equal(draw(1, 1, &good, "b.bmp", false, &err), MW_BAD_USAGE);
    assert_int_equal(draw(1, 1, &good, "no/such/b.svg", false, &err), MW_CANNOT_WRITE);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(same_bytes_below_the_size_that_a_page_bears),
        cmocka_unit_test(what_cannot_be_drawn_is_said),
    };
    return cmocka_run_group_tests(tests, make_points, remove_folder);
}
