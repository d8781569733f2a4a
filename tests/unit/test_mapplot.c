/* SPDX-License-Identifier: GPL-3.0-or-later
 * The process map as a file, on an invented scenario: scaling laws with round constants, no claim to any alloy. */
#define _POSIX_C_SOURCE 200809L
#include "check.h"

#include <dirent.h>
#include <signal.h>
#include <stdbool.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#include "base/file.h"
#include "meltwright/mapplot.h"

enum { N = 129, PANELS = 4 };

typedef struct scenario {
    double power[N], speed[N];
    double lof[PANELS][N * N], over[PANELS][N * N], melt[PANELS][N * N], balling[PANELS][N * N], depth[PANELS][N * N];
    mw_map_contours contours[PANELS];
    mw_map_panel panel[PANELS];
    mw_map_picture picture;
} scenario;

static const double energies[] = {40, 60, 80, 100};
static const mw_map_mark marks[] = {{195, 800, "start #1", -1}, {280, 1200, NULL, 0}, {5000, 1, "off the map", -1}};
static const char *const subtitle[] = {"invented fields, 100 % made up; '#' and \xc2\xb5 must show as they are"};

static void fill(scenario *s, size_t k, double hatch_um, double layer_um)
{
    for (size_t j = 0; j < N; j++)
        for (size_t i = 0; i < N; i++) {
            const double p = s->power[i], v = 1e-3 * s->speed[j], h = 1e-6 * hatch_um, t = 1e-6 * layer_um;
            const double w = 90e-6 * sqrt(p / 200 * 0.8 / v), d = 60e-6 * (p / 200) * pow(0.8 / v, 0.8);
            const size_t at = j * N + i;
            s->lof[k][at] = 2 * log((h * h / (w * w) + t * t / (d * d)) / 1.41);
            s->over[k][at] = 3.2 * log(p / (v * h * t) / 1.2e11);
            s->melt[k][at] = p - 20 - 60 * v;
            s->balling[k][at] = log(v * sqrt(p / 200) / 1.4);
            s->depth[k][at] = 1e6 * d;
        }
    s->contours[k] = (mw_map_contours){.name = "track depth", .unit = "um", .field = s->depth[k]};
    s->panel[k] = (mw_map_panel){.hatch_um = hatch_um,
                                 .layer_um = layer_um,
                                 .lof = s->lof[k],
                                 .over = s->over[k],
                                 .melt = s->melt[k],
                                 .balling = s->balling[k],
                                 .n_contour = 1,
                                 .contours = &s->contours[k]};
}

static int make(void **state)
{
    scenario *s = calloc(1, sizeof *s);
    assert_non_null(s);
    for (size_t i = 0; i < N; i++) {
        s->power[i] = 50 + 350 * (double)i / (N - 1);
        s->speed[i] = 200 + 2300 * (double)i / (N - 1);
    }
    for (size_t k = 0; k < PANELS; k++)
        fill(s, k, k % 2 == 0 ? 80 : 100, k < 2 ? 30 : 50);
    s->picture = (mw_map_picture){.title = "Invented map",
                                  .n_subtitle = 1,
                                  .subtitle = subtitle,
                                  .footer = "a footer",
                                  .n_power = N,
                                  .power_W = s->power,
                                  .n_speed = N,
                                  .speed_mm_per_s = s->speed,
                                  .n_panel = PANELS,
                                  .panels = s->panel,
                                  .n_energy = 4,
                                  .energy_J_per_mm3 = energies,
                                  .n_mark = 3,
                                  .marks = marks};
    *state = s;
    return 0;
}

static int drop(void **state)
{
    free(*state);
    return 0;
}

/* A folder of its own, so that "nothing else is left" can be checked. */
static void new_folder(char folder[64])
{
    (void)strcpy(folder, "/tmp/mw-map-XXXXXX");
    assert_non_null(mkdtemp(folder));
}

static size_t files_in(const char *folder)
{
    size_t n = 0;
    DIR *d = opendir(folder);
    assert_non_null(d);
    for (const struct dirent *e = readdir(d); e != NULL; e = readdir(d))
        n += e->d_name[0] != '.';
    (void)closedir(d);
    return n;
}

static const char *at(const char *folder, const char *name)
{
    static char path[2][160];
    static int turn;
    turn = 1 - turn;
    (void)snprintf(path[turn], sizeof path[turn], "%s/%s", folder, name);
    return path[turn];
}

static char *read_all(const char *path, size_t *n)
{
    char *bytes;
    mw_error err;
    if (mw_file_read(path, 1 << 26, &bytes, n, &err) != MW_OK)
        fail_msg("%s", err.text);
    return bytes;
}

static bool holds(const char *bytes, size_t n, const char *word)
{
    const size_t length = strlen(word);
    for (size_t i = 0; i + length <= n; i++)
        if (memcmp(bytes + i, word, length) == 0)
            return true;
    return false;
}

static void draw(const scenario *s, const char *path)
{
    mw_error err;
    if (mw_map_draw(&s->picture, path, true, &err) != MW_OK)
        fail_msg("%s", err.text);
}

/* Drawn twice, seconds may pass between: same bytes. The signatures are those of the three standards. */
static void check_format(const scenario *s, const char *ending, const char *signature, size_t most)
{
    char folder[64], name[32], again[32];
    new_folder(folder);
    (void)snprintf(name, sizeof name, "a.%s", ending);
    (void)snprintf(again, sizeof again, "b.%s", ending);
    draw(s, at(folder, name));
    if (strcmp(ending, "pdf") == 0)
        (void)sleep(1); /* a date to the second would differ */
    draw(s, at(folder, again));
    size_t n, m;
    char *a = read_all(at(folder, name), &n), *b = read_all(at(folder, again), &m);
    if (n != m || memcmp(a, b, n) != 0)
        fail_msg("%s: two runs differ (%zu and %zu bytes)", ending, n, m);
    if (n < 2000 || n > most || !holds(a, 200, signature))
        fail_msg("%s: %zu bytes, at most %zu wanted, beginning with %s", ending, n, most, signature);
    assert_false(holds(a, n, "CreationDate"));
    assert_false(holds(a, n, "ModDate"));
    assert_int_equal(files_in(folder), 2);
    free(a);
    free(b);
    (void)unlink(at(folder, name));
    (void)unlink(at(folder, again));
    assert_int_equal(rmdir(folder), 0);
}

static void test_png(void **state)
{
    check_format(*state, "png", "\x89PNG\r\n\x1a\n", 4000000);
}

static void test_svg(void **state)
{
    check_format(*state, "svg", "<svg", 300000);
}

static void test_pdf(void **state)
{
    check_format(*state, "pdf", "%PDF-", 300000);
}

/* Width and height stand in a PNG's first chunk. */
static void test_one_panel_size(void **state)
{
    scenario *s = *state;
    char folder[64];
    new_folder(folder);
    s->picture.n_panel = 1;
    draw(s, at(folder, "one.PNG"));
    s->picture.n_panel = PANELS;
    size_t n;
    char *a = read_all(at(folder, "one.PNG"), &n);
    const unsigned char *u = (const unsigned char *)a;
    assert_int_equal(u[18] * 256 + u[19], 1600);
    assert_in_range(u[22] * 256 + u[23], 1050, 1200);
    free(a);
    (void)unlink(at(folder, "one.PNG"));
    assert_int_equal(rmdir(folder), 0);
}

static void test_unwritable(void **state)
{
    const scenario *s = *state;
    mw_error err;
    char folder[64];
    new_folder(folder);
    assert_int_equal(mw_map_draw(&s->picture, at(folder, "missing/map.svg"), true, &err), MW_CANNOT_WRITE);
    assert_non_null(strstr(err.text, "missing/map.svg"));
    assert_int_equal(mkdir(at(folder, "map.png"), 0700), 0);
    assert_int_equal(mw_map_draw(&s->picture, at(folder, "map.png"), true, &err), MW_CANNOT_WRITE);
    assert_int_equal(files_in(folder), 1);
    (void)rmdir(at(folder, "map.png"));
    assert_int_equal(rmdir(folder), 0);
}

/* A limit on the size of files stands in for a full disk. */
static void test_cut_short(void **state)
{
    const scenario *s = *state;
    static const char *const names[] = {"map.png", "map.svg", "map.pdf"};
    char folder[64];
    new_folder(folder);
    struct rlimit old;
    assert_int_equal(getrlimit(RLIMIT_FSIZE, &old), 0);
    void (*handler)(int) = signal(SIGXFSZ, SIG_IGN);
    for (size_t k = 0; k < 3; k++) {
        mw_error err;
        const struct rlimit small = {.rlim_cur = 9000, .rlim_max = old.rlim_max};
        assert_int_equal(setrlimit(RLIMIT_FSIZE, &small), 0);
        const mw_status status = mw_map_draw(&s->picture, at(folder, names[k]), true, &err);
        assert_int_equal(setrlimit(RLIMIT_FSIZE, &old), 0);
        assert_int_equal(status, MW_CANNOT_WRITE);
        assert_int_equal(files_in(folder), 0);
    }
    (void)signal(SIGXFSZ, handler);
    assert_int_equal(rmdir(folder), 0);
}

static void test_existing_kept(void **state)
{
    const scenario *s = *state;
    char folder[64];
    new_folder(folder);
    FILE *f = fopen(at(folder, "map.svg"), "w");
    assert_non_null(f);
    (void)fputs("mine", f);
    (void)fclose(f);
    mw_error err;
    assert_int_equal(mw_map_draw(&s->picture, at(folder, "map.svg"), false, &err), MW_CANNOT_WRITE);
    size_t n;
    char *kept = read_all(at(folder, "map.svg"), &n);
    assert_string_equal(kept, "mine");
    free(kept);
    assert_int_equal(files_in(folder), 1);
    draw(s, at(folder, "map.svg"));
    kept = read_all(at(folder, "map.svg"), &n);
    assert_true(holds(kept, n, "<svg"));
    free(kept);
    (void)unlink(at(folder, "map.svg"));
    assert_int_equal(rmdir(folder), 0);
}

static void test_endings(void **state)
{
    const scenario *s = *state;
    static const char *const bad[] = {"map.bmp", "map", "map.svg.txt", ".png"};
    for (size_t k = 0; k < sizeof bad / sizeof bad[0]; k++) {
        mw_error err;
        assert_int_equal(mw_map_draw(&s->picture, bad[k], true, &err), MW_BAD_USAGE);
        assert_true(strstr(err.text, "png") != NULL && strstr(err.text, "svg") != NULL && strstr(err.text, "pdf") != NULL);
        assert_int_not_equal(access(bad[k], F_OK), 0);
    }
}

static void test_bad_pictures(void **state)
{
    const scenario *s = *state;
    mw_map_picture p = s->picture;
    mw_error err;
    p.n_panel = 0;
    assert_int_equal(mw_map_draw(&p, "/tmp/mw-none.svg", true, &err), MW_BAD_VALUE);
    p.n_panel = MW_MAP_MOST_PANELS + 1;
    assert_int_equal(mw_map_draw(&p, "/tmp/mw-none.svg", true, &err), MW_TOO_LARGE);
    p = s->picture;
    p.n_speed = 1;
    assert_int_equal(mw_map_draw(&p, "/tmp/mw-none.svg", true, &err), MW_BAD_VALUE);
    const double falling[] = {2, 1};
    p.n_speed = 2;
    p.speed_mm_per_s = falling;
    assert_int_equal(mw_map_draw(&p, "/tmp/mw-none.svg", true, &err), MW_BAD_VALUE);
    assert_int_not_equal(access("/tmp/mw-none.svg", F_OK), 0);
}

/* Nothing but blanks, and a ring-shaped window with contours of a constant: drawn all the same. */
static void test_odd_fields(void **state)
{
    const scenario *s = *state;
    enum { M = 17 };
    double axis[M], blank[M * M], ring[M * M], flat[M * M];
    for (size_t i = 0; i < M; i++)
        axis[i] = (double)i - 8;
    for (size_t i = 0; i < M * M; i++) {
        const double r = hypot(axis[i % M], axis[i / M]);
        blank[i] = NAN;
        ring[i] = (r - 3) * (r - 6);
        flat[i] = 7;
    }
    const mw_map_contours flat_set = {.name = "flat", .field = flat};
    const mw_map_panel panels[] = {{.hatch_um = 1, .layer_um = 1, .lof = blank},
                                   {.hatch_um = 2, .layer_um = 1, .lof = ring, .n_contour = 1, .contours = &flat_set},
                                   {.hatch_um = 3, .layer_um = 1, .lof = ring, .over = blank, .melt = ring, .balling = ring}};
    mw_map_picture p = s->picture;
    p.title = NULL;
    p.footer = NULL;
    p.n_subtitle = 0;
    p.n_power = p.n_speed = M;
    p.power_W = p.speed_mm_per_s = axis;
    p.n_panel = 3;
    p.panels = panels;
    char folder[64];
    new_folder(folder);
    mw_error err;
    if (mw_map_draw(&p, at(folder, "odd.svg"), false, &err) != MW_OK)
        fail_msg("%s", err.text);
    (void)unlink(at(folder, "odd.svg"));
    assert_int_equal(rmdir(folder), 0);
}

/* Linear fields over the unit square: areas by elementary geometry, exact on any grid. */
static void test_shares(void **state)
{
    (void)state;
    enum { M = 9 };
    double axis[M], lof[M * M], over[M * M], melt[M * M];
    for (size_t i = 0; i < M; i++)
        axis[i] = (double)i / (M - 1);
    for (size_t i = 0; i < M * M; i++) {
        const double x = axis[i % M], y = axis[i / M];
        lof[i] = y - x - 0.3;      /* above the line: a triangle with legs of 0.7 */
        over[i] = x - y - 0.6;     /* below it: legs of 0.4 */
        melt[i] = x + 1 - y - 0.2; /* upper left corner: legs of 0.2, cut out of the first */
    }
    const mw_map_panel p = {.hatch_um = 100, .layer_um = 40, .lof = lof, .over = over, .melt = melt};
    mw_map_share share;
    assert_int_equal(mw_map_shares(&p, M, axis, M, axis, &share, NULL), MW_OK);
    CHECK_NEAR(share.no_track, 0.5 * 0.04, 1e-14);
    CHECK_NEAR(share.lack_of_fusion, 0.5 * 0.49 - 0.5 * 0.04, 1e-14);
    CHECK_NEAR(share.keyhole, 0.5 * 0.16, 1e-14);
    CHECK_NEAR(share.nominal, 1 - 0.5 * 0.49 - 0.5 * 0.16, 1e-14);
}

/* The definition to the letter: ties go to lack of fusion, zero is nominal. Each field is constant, so a share is 0 or 1. */
static void test_ties(void **state)
{
    (void)state;
    static const double axis[] = {1, 2};
    static const struct {
        double lof, over, melt, nominal, lack_of_fusion, keyhole, no_track;
    } want[] = {{0, 0, 1, 1, 0, 0, 0},
                {0.5, 0.5, 0, 0, 1, 0, 0},
                {0, 0.5, 1, 0, 0, 1, 0},
                {-1, 2, -1, 0, 0, 0, 1},
                {INFINITY, -INFINITY, 1, 0, 1, 0, 0},
                {INFINITY, INFINITY, 1, 0, 1, 0, 0}};
    for (size_t k = 0; k < sizeof want / sizeof want[0]; k++) {
        double lof[4], over[4], melt[4];
        for (int i = 0; i < 4; i++) {
            lof[i] = want[k].lof;
            over[i] = want[k].over;
            melt[i] = want[k].melt;
        }
        const mw_map_panel p = {.lof = lof, .over = over, .melt = melt};
        mw_map_share share;
        assert_int_equal(mw_map_shares(&p, 2, axis, 2, axis, &share, NULL), MW_OK);
        CHECK_NEAR(share.nominal, want[k].nominal, 0);
        CHECK_NEAR(share.lack_of_fusion, want[k].lack_of_fusion, 0);
        CHECK_NEAR(share.keyhole, want[k].keyhole, 0);
        CHECK_NEAR(share.no_track, want[k].no_track, 0);
    }
}

static void test_shares_sum(void **state)
{
    const scenario *s = *state;
    for (size_t k = 0; k < PANELS; k++) {
        mw_map_share share;
        assert_int_equal(mw_map_shares(&s->panel[k], N, s->power, N, s->speed, &share, NULL), MW_OK);
        CHECK_NEAR(share.nominal + share.lack_of_fusion + share.keyhole + share.no_track, 1, 1e-12);
    }
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_png),          cmocka_unit_test(test_svg),
        cmocka_unit_test(test_pdf),          cmocka_unit_test(test_one_panel_size),
        cmocka_unit_test(test_unwritable),   cmocka_unit_test(test_existing_kept),
        cmocka_unit_test(test_cut_short),    cmocka_unit_test(test_endings),
        cmocka_unit_test(test_bad_pictures), cmocka_unit_test(test_odd_fields),
        cmocka_unit_test(test_shares),       cmocka_unit_test(test_ties),
        cmocka_unit_test(test_shares_sum),
    };
    return cmocka_run_group_tests(tests, make, drop);
}
