/* SPDX-License-Identifier: GPL-3.0-or-later
 * The default pool along rising power at one speed, from the tables: what sweeps and surveys run on. Within 3e-5 of
 * mw_keyhole_pool_compute (tables 1e-5, three of them after one another); exact where the tables do not reach. */
#ifndef MELTWRIGHT_MODEL_KEYHOLE_LINE_H
#define MELTWRIGHT_MODEL_KEYHOLE_LINE_H

#include <stddef.h>

#include "meltwright/keyhole.h"

/* One value a power; lengths in m, all zero where nothing melts. */
typedef struct mw_pool_lanes {
    double *width_m, *depth_m;      /* depth on bare plate */
    double *conduction_width_m;     /* of the pool without a cavity, as balling takes it */
    double *onset_index;
    double *melting_index;          /* computed peak temperature rise over the rise to melting, without a cavity; may be NULL, as the next two */
    double *cavity_depth_m, *absorptivity;
} mw_pool_lanes;

/* `input` with its power and layer ignored. Errors: MW_BAD_VALUE, MW_NO_CONVERGENCE; the lanes are then undefined. */
mw_status mw_keyhole_line(const mw_keyhole_input *input, const mw_keyhole_constants *constants, const double *power_W, size_t n, const mw_pool_lanes *out);

#endif
