/* SPDX-License-Identifier: GPL-3.0-or-later
 * Outlines against shapes whose area is known from elementary geometry. */
#include <stdarg.h>
#include <setjmp.h>
#include <stddef.h>
#include <stdint.h>
#include <cmocka.h>

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "present/outline.h"

static const double pi = 3.14159265358979323846;

typedef double (*shape)(double x, double y);

static double half_plane(double x, double y)
{
    return 0.3 + 0.5 * x - y;
}
static double circle(double x, double y)
{
    return 0.49 - x * x - y * y;
}
static double annulus(double x, double y)
{
    const double r = hypot(x, y);
    return (0.8 - r) * (r - 0.4);
}
static double saddle(double x, double y)
{
    return x * (y - 0.013);
}
static double minus_saddle(double x, double y)
{
    return -saddle(x, y);
}

typedef struct sampled {
    double *x, *y, *f;
    mw_outline_grid grid;
} sampled;

/* A shape over [-1, 1] x [-1, 1]; the axes are stretched a little so that the spacing is uneven. */
static sampled sample(shape s, size_t nx, size_t ny)
{
    sampled a = {malloc(nx * sizeof(double)), malloc(ny * sizeof(double)), malloc(nx * ny * sizeof(double)), {0}};
    assert_true(a.x != NULL && a.y != NULL && a.f != NULL);
    for (size_t i = 0; i < nx; i++)
        a.x[i] = sin(1.2 * (2.0 * (double)i / (double)(nx - 1) - 1)) / sin(1.2);
    for (size_t j = 0; j < ny; j++)
        a.y[j] = 2.0 * (double)j / (double)(ny - 1) - 1;
    for (size_t j = 0; j < ny; j++)
        for (size_t i = 0; i < nx; i++)
            a.f[j * nx + i] = s(a.x[i], a.y[j]);
    a.grid = (mw_outline_grid){nx, ny, a.x, a.y};
    return a;
}

static void drop(sampled *a)
{
    free(a->x);
    free(a->y);
    free(a->f);
}

static double traced_area(shape s, size_t n, size_t *rings)
{
    sampled a = sample(s, n, n + 3);
    const double *const f[] = {a.f};
    mw_outline o;
    assert_int_equal(mw_outline_trace(&a.grid, 1, f, &o, NULL), MW_OK);
    const double area = mw_outline_area(&o);
    const double cut = mw_outline_overlap(&a.grid, 1, f);
    if (!(fabs(area - cut) <= 1e-12))
        fail_msg("ring area %.17g, sum of cut triangles %.17g", area, cut);
    *rings = o.n_ring;
    mw_outline_free(&o);
    drop(&a);
    return area;
}

/* A linear field is met exactly, whatever the grid. */
static void test_half_plane(void **state)
{
    (void)state;
    size_t rings;
    /* Under the line y = 0.3 + 0.5 x over [-1, 1]: mean height 0.3 + 1, width 2. It stays inside the square. */
    const double want = 2 * 1.3;
    for (size_t n = 2; n < 40; n += 7) {
        const double got = traced_area(half_plane, n, &rings);
        if (!(fabs(got - want) <= 1e-13))
            fail_msg("half plane, n = %zu: area %.17g, want %.17g", n, got, want);
        assert_int_equal(rings, 1);
    }
}

/* Chords of a smooth line: the error falls with the square of the spacing. */
static void check_second_order(const char *name, shape s, double want, size_t want_rings)
{
    double error[3];
    size_t n = 33, rings;
    for (int k = 0; k < 3; k++, n = 2 * n - 1) {
        error[k] = fabs(traced_area(s, n, &rings) - want);
        if (rings != want_rings)
            fail_msg("%s: %zu rings, want %zu", name, rings, want_rings);
    }
    const double order = log2(error[0] / error[2]) / 2;
    if (!(order > 1.7 && error[2] < 1e-3))
        fail_msg("%s: errors %.3g %.3g %.3g, order %.2f, want 2", name, error[0], error[1], error[2], order);
}

static void test_curves(void **state)
{
    (void)state;
    check_second_order("circle", circle, pi * 0.49, 1);
    check_second_order("annulus", annulus, pi * (0.64 - 0.16), 2);
}

/* Two quarters that meet in a point, on a grid with and without a node there. */
static void test_saddle(void **state)
{
    (void)state;
    for (size_t n = 6; n < 30; n += 3) {
        size_t rings;
        const double a = traced_area(saddle, n, &rings), b = traced_area(minus_saddle, n, &rings);
        /* Left and right lose and gain the same strip, so each part is half of the square of side 2; only the cell in the middle
         * is approximate. */
        const double h = 2.0 / (double)(n + 2), w = 2 * 1.2 / sin(1.2) / (double)(n - 1), bound = h * w;
        if (!(fabs(a - 2) <= bound && fabs(b - 2) <= bound && fabs(a + b - 4) <= 1e-12))
            fail_msg("saddle, n = %zu: areas %.17g and %.17g, want 2 and 2 within %.3g", n, a, b, bound);
    }
}

/* No stretch of a ring is longer than a cell's diagonal, the last to the first included: rings are closed and unbroken.
 * Every point is on the zero line of the piecewise linear field or on the rim. */
static void test_rings_closed(void **state)
{
    (void)state;
    sampled a = sample(annulus, 41, 37);
    const double *const f[] = {a.f};
    mw_outline o;
    assert_int_equal(mw_outline_trace(&a.grid, 1, f, &o, NULL), MW_OK);
    const double diagonal = hypot(2 * 1.2 / sin(1.2) / 40, 2.0 / 36);
    for (size_t r = 0; r < o.n_ring; r++)
        for (size_t i = o.start[r]; i < o.start[r + 1]; i++) {
            const size_t k = i + 1 < o.start[r + 1] ? i + 1 : o.start[r];
            const double step = hypot(o.x[k] - o.x[i], o.y[k] - o.y[i]);
            if (!(step <= diagonal))
                fail_msg("ring %zu jumps by %g, a cell's diagonal is %g", r, step, diagonal);
            assert_false(o.rim[i]);
        }
    assert_true(mw_outline_inside(&o, 0.6, 0.0));
    assert_false(mw_outline_inside(&o, 0.1, 0.1));
    assert_false(mw_outline_inside(&o, 0.9, 0.5));
    mw_outline_free(&o);
    drop(&a);
}

/* Fields of noise, so that every way to cut a triangle comes up: the three regions by two signs fill the square exactly. */
static void test_partition(void **state)
{
    (void)state;
    enum { NX = 23, NY = 19 };
    sampled a = sample(half_plane, NX, NY);
    uint32_t seed = 12345;
    double u[NX * NY], v[NX * NY], minus_u[NX * NY], minus_v[NX * NY], u_v[NX * NY], v_u[NX * NY];
    for (int trial = 0; trial < 20; trial++) {
        for (size_t i = 0; i < NX * NY; i++) {
            seed = seed * 1664525u + 1013904223u;
            u[i] = (double)(seed >> 8) / (1 << 23) - 1;
            seed = seed * 1664525u + 1013904223u;
            v[i] = (double)(seed >> 8) / (1 << 23) - 1;
            minus_u[i] = -u[i];
            minus_v[i] = -v[i];
            u_v[i] = u[i] - v[i];
            v_u[i] = v[i] - u[i];
        }
        const double *const set[3][2] = {{u, u_v}, {v, v_u}, {minus_u, minus_v}};
        double sum = 0;
        for (int k = 0; k < 3; k++) {
            mw_outline o;
            assert_int_equal(mw_outline_trace(&a.grid, 2, set[k], &o, NULL), MW_OK);
            const double area = mw_outline_area(&o), cut = mw_outline_overlap(&a.grid, 2, set[k]);
            if (!(fabs(area - cut) <= 1e-12))
                fail_msg("trial %d, region %d: rings %.17g, triangles %.17g", trial, k, area, cut);
            sum += area;
            mw_outline_free(&o);
        }
        if (!(fabs(sum - 4) <= 1e-11))
            fail_msg("trial %d: the regions sum to %.17g, want 4", trial, sum);
    }
    drop(&a);
}

/* A blank node takes the triangles that touch it out of the region, and the ring still closes around the hole. */
static void test_blank(void **state)
{
    (void)state;
    sampled a = sample(half_plane, 5, 5);
    for (size_t i = 0; i < 25; i++)
        a.f[i] = 1;
    a.f[12] = NAN; /* the middle: half of each of its four cells remains */
    const double *const f[] = {a.f};
    mw_outline o;
    assert_int_equal(mw_outline_trace(&a.grid, 1, f, &o, NULL), MW_OK);
    const double want = 4 - 0.5 * (a.x[3] - a.x[1]) * (a.y[3] - a.y[1]), got = mw_outline_area(&o);
    if (!(fabs(got - want) <= 1e-14) || o.n_ring != 2)
        fail_msg("area %.17g in %zu rings, want %.17g in 2", got, o.n_ring, want);
    for (size_t i = 0; i < o.n_point; i++)
        assert_true(o.rim[i]);
    mw_outline_free(&o);
    drop(&a);
}

/* Thinned outlines keep within the tolerance: the area changes by less than length x tolerance. */
static void test_simplify(void **state)
{
    (void)state;
    sampled a = sample(circle, 129, 129);
    const double *const f[] = {a.f};
    mw_outline o;
    assert_int_equal(mw_outline_trace(&a.grid, 1, f, &o, NULL), MW_OK);
    const double before = mw_outline_area(&o), tolerance = 2e-4 * 2;
    const size_t points = o.n_point;
    mw_outline_simplify(&o, tolerance, tolerance);
    const double after = mw_outline_area(&o), bound = 2 * pi * 0.7 * tolerance;
    if (!(fabs(after - before) <= bound) || o.n_ring != 1 || !(o.n_point < points / 4))
        fail_msg("area %.12g after %.12g, bound %.3g; %zu points of %zu", after, before, bound, o.n_point, points);
    mw_outline_free(&o);
    drop(&a);
}

static void test_refusals(void **state)
{
    (void)state;
    const double x[] = {0, 1}, falling[] = {1, 0}, f[] = {1, 1, 1, 1};
    const double *const field[] = {f};
    mw_outline o;
    mw_error err;
    const mw_outline_grid bad = {2, 2, x, falling}, thin = {1, 2, x, x};
    assert_int_equal(mw_outline_trace(&bad, 1, field, &o, &err), MW_BAD_VALUE);
    assert_int_equal(mw_outline_trace(&thin, 1, field, &o, &err), MW_BAD_VALUE);
    mw_outline_free(&o);
}

int main(void)
{
    const struct CMUnitTest tests[] = {
        cmocka_unit_test(test_half_plane),   cmocka_unit_test(test_curves),    cmocka_unit_test(test_saddle),
        cmocka_unit_test(test_rings_closed), cmocka_unit_test(test_partition), cmocka_unit_test(test_blank),
        cmocka_unit_test(test_simplify),     cmocka_unit_test(test_refusals),
    };
    return cmocka_run_group_tests(tests, NULL, NULL);
}
