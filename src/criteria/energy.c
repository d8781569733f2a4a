/* SPDX-License-Identifier: GPL-3.0-or-later
 * Energy densities, plain and normalised. They know neither beam nor pool: shown because the trade asks for them. */
#include "meltwright/criteria.h"

double mw_linear_energy(double power_W, double speed_m_per_s)
{
    return power_W / speed_m_per_s;
}

double mw_areal_energy(double power_W, double speed_m_per_s, double hatch_m)
{
    return power_W / (speed_m_per_s * hatch_m);
}

double mw_volumetric_energy(double power_W, double speed_m_per_s, double hatch_m, double layer_m)
{
    return power_W / (speed_m_per_s * hatch_m * layer_m);
}

double mw_build_rate(double speed_m_per_s, double hatch_m, double layer_m)
{
    return speed_m_per_s * hatch_m * layer_m;
}

void mw_normalise_energy(double absorbed_W, double speed_m_per_s, double hatch_m, double layer_m, double d4sigma_m,
                         const mw_medium *melt, mw_normalised_energy *out)
{
    const double radius = d4sigma_m / 2, rise = melt->isotherm_K - melt->ambient_K;
    const double diffusivity = melt->conductivity_W_per_mK / melt->volumetric_heat_J_per_m3K;
    out->power = absorbed_W / (radius * melt->conductivity_W_per_mK * rise);
    out->speed = speed_m_per_s * radius / diffusivity;
    out->layer = 2 * layer_m / radius;
    out->hatch = hatch_m / radius;
    out->minimum = out->power / (out->speed * out->layer);
    out->volume = out->minimum / out->hatch;
}

double mw_melt_energy_ratio(double absorbed_W, double speed_m_per_s, double hatch_m, double layer_m, double melt_enthalpy_J_per_m3)
{
    return absorbed_W / (speed_m_per_s * hatch_m * layer_m * melt_enthalpy_J_per_m3);
}
