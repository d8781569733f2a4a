/* SPDX-License-Identifier: GPL-3.0-or-later
 * Rosenthal's pool for many operating parameters at once, as sweeps ask for it. */
#ifndef MELTWRIGHT_MODEL_ROSENTHAL_LINE_H
#define MELTWRIGHT_MODEL_ROSENTHAL_LINE_H

#include <stddef.h>

/* Largest half width (= depth) in units of 2 alpha / v for n[i] > 0, as mw_rosenthal_half_width, within 5e-8 for every n. (The trailing length is n
 * itself and the leading one a Lambert W: both are closed forms already.) */
void mw_rosenthal_half_widths(const double *n, size_t count, double *out);

#endif
