/* SPDX-License-Identifier: GPL-3.0-or-later
 * A graded warning that a track breaks up into balls. */
#include <math.h>

#include "meltwright/criteria.h"

double mw_balling_index(const mw_pool *conduction, double speed_m_per_s, double layer_m, double density_kg_per_m3,
                        double surface_tension_N_per_m)
{
    const mw_balling_limits *limit = mw_balling_constants();
    if (conduction->width_m == 0)
        return 0;
    if (layer_m == 0)
        return conduction->length_m / conduction->width_m / limit->bare_ratio;
    const double weber = density_kg_per_m3 * speed_m_per_s * speed_m_per_s * conduction->width_m / surface_tension_N_per_m;
    /* The layer's part of the logit, moved into the index so that 1 stays the even-odds point. */
    return weber / limit->weber * exp(limit->layer_slope * layer_m / limit->layer_reference_m / limit->weber_slope);
}

double mw_balling_probability(double index, double layer_m)
{
    const mw_balling_limits *limit = mw_balling_constants();
    const double slope = layer_m == 0 ? limit->bare_slope : limit->weber_slope;
    if (index == 0)
        return 0;
    return 1 / (1 + pow(index, -slope));
}

double mw_stable_length_ratio(double contact_angle_rad)
{
    static const double pi = 3.14159265358979323846;
    if (!(contact_angle_rad > 0) || contact_angle_rad > pi)
        return NAN;
    if (contact_angle_rad <= pi / 2)
        return INFINITY;
    const double f = contact_angle_rad, c = cos(2 * f), s = sin(2 * f);
    return pi / (sqrt(2) * sqrt((f * (1 + c) - s) / (2 * f * (2 + c) - 3 * s)));
}
