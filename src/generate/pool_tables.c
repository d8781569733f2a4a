/* SPDX-License-Identifier: GPL-3.0-or-later
 * Build tool: writes the tables of the Gaussian pool as a C header, from the exact solver. Fixed order of work and hexadecimal numbers: the same
 * bytes on every run. usage: pool_tables > gaussian_table_data.h */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>

#include "meltwright/gaussian.h"
#include "meltwright/keyhole.h"
#include "model/gaussian_table.h"
#include "model/series.h"

enum { NU = MW_TABLE_U, NY = MW_TABLE_Y, MOST_PATCHES = 4000, MOST_STRIPS = 400, MOST_DEPTH = 9, SERIES = 16, PIECES = 16 };
static const double pi = 3.14159265358979323846;
/* Asked of each patch at points between the nodes; the tables promise 1e-5. */
static const double wanted = 3e-6;

/* ---- exact values ---- */

static void fail(const char *what, double a, double b)
{
    (void)fprintf(stderr, "pool_tables: %s at %.17g, %.17g\n", what, a, b);
    exit(1);
}

static double s_of_t(double t)
{
    const double z = MW_TABLE_HALF * t / (1 - t);
    return 1 + z * z;
}

static double t_of_s(double s)
{
    const double z = sqrt(s - 1);
    return z / (z + MW_TABLE_HALF);
}

static mw_pool pool_at(double y, double t)
{
    const double peclet = exp(y);
    mw_pool p;
    if (mw_gaussian_pool_scaled(s_of_t(t) / mw_gaussian_peak(peclet, NULL), peclet, &p) != MW_OK)
        fail("no pool", y, t);
    return p;
}

static double target(mw_table_quantity q, double y, double t)
{
    const mw_pool p = pool_at(y, t);
    const double z = MW_TABLE_HALF * t / (1 - t);
    return q == MW_TABLE_DEPTH ? p.depth_m / (z * z) : (q == MW_TABLE_WIDTH ? p.width_m : p.length_m) / z;
}

/* ---- the switch between two widest places ---- */

/* Above this ln P two places compete; below, the curve goes on level so that every strip has the same shape. */
static const double cusp_y = 1.0578;
static double switch_series[PIECES], switch_lo, switch_hi;

/* Bisection on the jump of the widest place. */
static double find_switch(double y)
{
    const double guess = 1.622 + 0.674 * y;
    double lo = t_of_s(exp(guess - 0.25)), hi = t_of_s(exp(guess + 0.25));
    const double at_lo = pool_at(y, lo).width_at_m, at_hi = pool_at(y, hi).width_at_m;
    for (int i = 0; i < 60; i++) {
        const double mid = (lo + hi) / 2, at = pool_at(y, mid).width_at_m;
        if (log(at / at_lo) < log(at_hi / at))
            lo = mid;
        else
            hi = mid;
    }
    return (lo + hi) / 2;
}

static double node(int i, int n)
{
    return cos(pi * (i + 0.5) / n);
}

/* Chebyshev coefficients from values at the nodes. */
static void series_of(const double *value, int n, double *c)
{
    for (int k = 0; k < n; k++) {
        double sum = 0;
        for (int i = 0; i < n; i++)
            sum += value[i] * cos(pi * k * (i + 0.5) / n);
        c[k] = (k == 0 ? 1.0 : 2.0) * sum / n;
    }
}

static void make_switch(void)
{
    double value[PIECES];
    switch_lo = cusp_y;
    switch_hi = log(MW_TABLE_MOST_PECLET) + 1e-3;
    for (int i = 0; i < PIECES; i++)
        value[i] = find_switch(switch_lo + (switch_hi - switch_lo) * (1 + node(i, PIECES)) / 2);
    series_of(value, PIECES, switch_series);
}

static double switch_at(double y)
{
    const double x = fmax(-1, 2 * (y - switch_lo) / (switch_hi - switch_lo) - 1);
    return mw_series_at(switch_series, PIECES, x);
}

/* u in 0..1 up to the switch, 1..2 beyond it; depth and length take the whole range as 0..2. */
static double t_of_u(mw_table_quantity q, double y, double u)
{
    const double most = t_of_s(MW_TABLE_MOST_S * 1.001), turn = q == MW_TABLE_WIDTH ? switch_at(y) : most / 2;
    return u <= 1 ? u * turn : turn + (u - 1) * (most - turn);
}

/* ---- patches ---- */

typedef struct patch {
    double u0, u1, c[NY][NU];
} patch;

typedef struct strip {
    double y0, y1;
    int first, n;
} strip;

static patch patches[MOST_PATCHES];
static strip strips[MOST_STRIPS];
static int n_patch, n_strip;

static void fit(mw_table_quantity q, double y0, double y1, patch *p)
{
    double value[NY][NU], by_u[NY][NU], column[NY], c[NY];
    for (int j = 0; j < NY; j++) {
        const double y = y0 + (y1 - y0) * (1 + node(j, NY)) / 2;
        for (int i = 0; i < NU; i++)
            value[j][i] = target(q, y, t_of_u(q, y, p->u0 + (p->u1 - p->u0) * (1 + node(i, NU)) / 2));
        series_of(value[j], NU, by_u[j]);
    }
    for (int i = 0; i < NU; i++) {
        for (int j = 0; j < NY; j++)
            column[j] = by_u[j][i];
        series_of(column, NY, c);
        for (int j = 0; j < NY; j++)
            p->c[j][i] = c[j];
    }
}

static double value_of(const patch *p, double fy, double fu)
{
    double row[NU];
    for (int i = 0; i < NU; i++) {
        double column[NY];
        for (int j = 0; j < NY; j++)
            column[j] = p->c[j][i];
        row[i] = mw_series_at(column, NY, fy);
    }
    return mw_series_at(row, NU, fu);
}

/* Largest relative error at points between the nodes and on the edges. */
static double error_of(mw_table_quantity q, double y0, double y1, const patch *p)
{
    static const double at[] = {-0.999, -0.83, -0.41, 0.07, 0.52, 0.9, 0.999};
    double worst = 0;
    for (int j = 0; j < 7; j += 2)
        for (int i = 0; i < 7; i++) {
            const double y = y0 + (y1 - y0) * (1 + at[j]) / 2, u = p->u0 + (p->u1 - p->u0) * (1 + at[i]) / 2;
            const double want = target(q, y, t_of_u(q, y, u));
            worst = fmax(worst, fabs(value_of(p, at[j], at[i]) / want - 1));
        }
    return worst;
}

/* Weight of the highest terms along y and along u: which direction lacks terms. */
static bool lacks_y(const patch *p)
{
    double along_y = 0, along_u = 0;
    for (int i = 0; i < NU; i++)
        along_y += fabs(p->c[NY - 1][i]) + fabs(p->c[NY - 2][i]);
    for (int j = 0; j < NY; j++)
        along_u += fabs(p->c[j][NU - 1]) + fabs(p->c[j][NU - 2]);
    return along_y > along_u;
}

/* Covers u0..u1 of a strip with patches; false when the strip must be cut along y. */
static bool cover(mw_table_quantity q, double y0, double y1, double u0, double u1, int depth, int cuts_y)
{
    patch p = {.u0 = u0, .u1 = u1};
    fit(q, y0, y1, &p);
    if (error_of(q, y0, y1, &p) < wanted) {
        if (n_patch == MOST_PATCHES)
            fail("too many patches", y0, u0);
        patches[n_patch++] = p;
        return true;
    }
    if ((lacks_y(&p) && cuts_y < 12) || depth == MOST_DEPTH)
        return false;
    const double middle = (u0 + u1) / 2;
    return cover(q, y0, y1, u0, middle, depth + 1, cuts_y) && cover(q, y0, y1, middle, u1, depth + 1, cuts_y);
}

static void cover_strip(mw_table_quantity q, double y0, double y1, int cuts)
{
    const int first = n_patch;
    if (cover(q, y0, y1, 0, 1, 0, cuts) && cover(q, y0, y1, 1, 2, 0, cuts)) {
        if (n_strip == MOST_STRIPS || n_patch - first > MW_TABLE_SEGMENTS)
            fail("too many strips or segments", y0, y1);
        strips[n_strip++] = (strip){y0, y1, first, n_patch - first};
        return;
    }
    n_patch = first;
    if (cuts > 16)
        fail("does not converge", y0, y1);
    const double middle = (y0 + y1) / 2;
    cover_strip(q, y0, middle, cuts + 1);
    cover_strip(q, middle, y1, cuts + 1);
}

/* Chebyshev to powers of x, in place: on -1..1 and for so few terms the rounding stays below 1e-12 of the sum. */
static void to_powers(double *c, int n)
{
    double older[32] = {1}, newer[32] = {0, 1}, sum[32] = {0};
    for (int k = 0; k < n; k++) {
        const double *t = k == 0 ? older : newer;
        for (int i = 0; i <= k; i++)
            sum[i] += c[k] * t[i];
        if (k == 0)
            continue;
        double next[32] = {0};
        for (int i = 0; i <= k + 1; i++)
            next[i] = (i > 0 ? 2 * newer[i - 1] : 0) - older[i];
        for (int i = 0; i < 32; i++) {
            older[i] = newer[i];
            newer[i] = next[i];
        }
    }
    for (int i = 0; i < n; i++)
        c[i] = sum[i];
}

static void patch_to_powers(patch *p)
{
    for (int j = 0; j < NY; j++)
        to_powers(p->c[j], NU);
    for (int i = 0; i < NU; i++) {
        double column[NY];
        for (int j = 0; j < NY; j++)
            column[j] = p->c[j][i];
        to_powers(column, NY);
        for (int j = 0; j < NY; j++)
            p->c[j][i] = column[j];
    }
}

/* ---- the check of each build ---- */

/* Random points of the whole range, the same on every run: a third close to the edge of melting (s - 1 from about 1e-6, where the exact
 * solver still has all its digits), a third around the switch. */
static void check(mw_table_quantity q)
{
    unsigned long long state = 88172645463325252ULL;
    double random[3], worst = 0;
    for (int i = 0; i < 1500; i++) {
        for (int k = 0; k < 3; k++) {
            state ^= state << 13;
            state ^= state >> 7;
            state ^= state << 17;
            random[k] = (double)(state >> 11) * 0x1p-53;
        }
        const double y = log(MW_TABLE_LEAST_PECLET) + random[0] * log(MW_TABLE_MOST_PECLET / MW_TABLE_LEAST_PECLET);
        const double edge = 1e-3 * pow(1e3, random[1]), near = 1 + 0.1 * (2 * random[1] - 1);
        const double u = i % 3 == 0 ? edge : i % 3 == 1 ? near : 2 * random[1];
        for (int j = 0; j < n_strip; j++)
            for (int k = 0; k < strips[j].n && y >= strips[j].y0 && y < strips[j].y1; k++) {
                const patch *p = &patches[strips[j].first + k];
                if (u < p->u0 || u > p->u1)
                    continue;
                const double got = value_of(p, 2 * (y - strips[j].y0) / (strips[j].y1 - strips[j].y0) - 1, 2 * (u - p->u0) / (p->u1 - p->u0) - 1);
                worst = fmax(worst, fabs(got / target(q, y, t_of_u(q, y, u)) - 1));
            }
    }
    if (!(worst < 1e-5))
        fail("a table is not within 1e-5 of the exact solver", (double)q, worst);
}

/* ---- writing ---- */

static void write_quantity(mw_table_quantity q, const char *name)
{
    const double lo = log(MW_TABLE_LEAST_PECLET) - 1e-9, hi = log(MW_TABLE_MOST_PECLET) + 1e-9;
    n_patch = n_strip = 0;
    cover_strip(q, lo, 0, 0);
    cover_strip(q, 0, cusp_y, 0);
    cover_strip(q, cusp_y, hi, 0);
    check(q);
    (void)printf("static const struct table_strip %s_strip[] = {\n", name);
    for (int i = 0; i < n_strip; i++)
        (void)printf("    {%a, %a, %d, %d},\n", strips[i].y0, strips[i].y1, strips[i].first, strips[i].n);
    (void)printf("};\nstatic const struct table_patch %s_patch[] = {\n", name);
    for (int i = 0; i < n_patch; i++) {
        patch_to_powers(&patches[i]);
        (void)printf("    {%a, %a, {", patches[i].u0, patches[i].u1);
        for (int j = 0; j < NY; j++) {
            (void)printf("%s{", j > 0 ? ", " : "");
            for (int k = 0; k < NU; k++)
                (void)printf("%s%a", k > 0 ? ", " : "", patches[i].c[j][k]);
            (void)printf("}");
        }
        (void)printf("}},\n");
    }
    (void)printf("};\n");
}

static double log_peak(double y)
{
    return log(mw_gaussian_peak(exp(y), NULL));
}

static double log_cylinder(double y)
{
    return log(mw_cylinder_heat(exp(y)));
}

static void write_curve(const char *name, double (*f)(double), double lo, double hi)
{
    (void)printf("static const double %s_series[%d][%d] = {\n", name, PIECES, SERIES);
    for (int piece = 0; piece < PIECES; piece++) {
        const double a = lo + (hi - lo) * piece / PIECES, b = lo + (hi - lo) * (piece + 1) / PIECES;
        double value[SERIES], c[SERIES];
        for (int i = 0; i < SERIES; i++)
            value[i] = f(a + (b - a) * (1 + node(i, SERIES)) / 2);
        series_of(value, SERIES, c);
        (void)printf("    {");
        for (int k = 0; k < SERIES; k++)
            (void)printf("%s%a", k > 0 ? ", " : "", c[k]);
        (void)printf("},\n");
    }
    (void)printf("};\n");
}

int main(void)
{
    make_switch();
    const double lo = log(MW_TABLE_LEAST_PECLET / 10), hi = log(MW_TABLE_MOST_PECLET * 2);
    (void)printf("/* Made by src/generate/pool_tables.c from the exact solver. */\n");
    (void)printf("struct table_strip { double y0, y1; int first, n; };\n");
    (void)printf("struct table_patch { double u0, u1, c[%d][%d]; };\n", NY, NU);
    (void)printf("enum { CURVE_PIECES = %d, CURVE_TERMS = %d, SWITCH_TERMS = %d };\n", PIECES, SERIES, PIECES);
    (void)printf("static const double curve_lo = %a, curve_hi = %a, switch_lo = %a, switch_hi = %a, table_most_t = %a;\n", lo, hi, switch_lo, switch_hi,
                 t_of_s(MW_TABLE_MOST_S * 1.001));
    (void)printf("static const double switch_series[%d] = {", PIECES);
    for (int k = 0; k < PIECES; k++)
        (void)printf("%s%a", k > 0 ? ", " : "", switch_series[k]);
    (void)printf("};\n");
    write_curve("peak", log_peak, lo, hi);
    write_curve("cylinder", log_cylinder, lo, hi);
    write_quantity(MW_TABLE_WIDTH, "width");
    write_quantity(MW_TABLE_DEPTH, "depth");
    write_quantity(MW_TABLE_LENGTH, "length");
    return fflush(stdout) != 0;
}
