/* SPDX-License-Identifier: GPL-3.0-or-later
 * Reads the reference pools. */
#include "pool_set.h"

#include "../csv_cells.h"
#include "bench.h"

void pool_set_load(pool_set *out)
{
    mw_csv_reader *r;
    mw_error err;
    bool end = false;
    bench_stop_on(mw_csv_open("tests/data/gaussian_pools.csv", &r, &err), &err);
    out->n = 0;
    while (out->n < POOL_SET_MOST) {
        bench_stop_on(mw_csv_next(r, &end, &err), &err);
        if (end)
            break;
        if (!(cell_number(r, "melt") > 0))
            continue;
        const size_t i = out->n++;
        out->source[i] = (mw_source){cell_number(r, "P_W") * cell_number(r, "A"), cell_number(r, "v_m_s"), cell_number(r, "d4sigma_m") / 4};
        out->medium[i] = (mw_medium){cell_number(r, "k_W_mK"), cell_number(r, "rho_kg_m3") * cell_number(r, "cp_J_kgK"), cell_number(r, "T0_K"),
                                     cell_number(r, "Tm_K")};
        out->width_m[i] = cell_number(r, "width_m");
        out->depth_m[i] = cell_number(r, "depth_m");
        out->length_m[i] = cell_number(r, "length_m");
    }
    mw_csv_close(r);
}

void pool_set_drop(pool_set *set, size_t i)
{
    set->n--;
    memmove(&set->source[i], &set->source[i + 1], (set->n - i) * sizeof *set->source);
    memmove(&set->medium[i], &set->medium[i + 1], (set->n - i) * sizeof *set->medium);
    memmove(&set->width_m[i], &set->width_m[i + 1], (set->n - i) * sizeof *set->width_m);
    memmove(&set->depth_m[i], &set->depth_m[i + 1], (set->n - i) * sizeof *set->depth_m);
    memmove(&set->length_m[i], &set->length_m[i + 1], (set->n - i) * sizeof *set->length_m);
}

double pool_set_error(const pool_set *set, size_t i, double width_m, double depth_m, double length_m)
{
    const double error[3] = {width_m / set->width_m[i] - 1, depth_m / set->depth_m[i] - 1,
                             length_m / set->length_m[i] - 1};
    double worst = 0;
    for (int q = 0; q < 3; q++)
        worst = isnan(error[q]) ? INFINITY : fmax(worst, fabs(error[q]));
    return worst;
}
