/* SPDX-License-Identifier: GPL-3.0-or-later
 * Normalised enthalpy in the forms in print, each with its definition, and the keyhole number. */
#include <math.h>

#include "meltwright/criteria.h"

static const double pi = 3.14159265358979323846;

const char *mw_enthalpy_definition(mw_enthalpy_form form)
{
    static const char *const text[] = {
#define X(name, word, definition, factor) definition,
        MW_ENTHALPY_LIST(X)
#undef X
    };
    return text[form];
}

double mw_normalised_enthalpy(mw_enthalpy_form form, double absorbed_W, double speed_m_per_s, double d4sigma_m,
                              const mw_medium *melt)
{
    const double sigma = d4sigma_m / 4, radius_e = sqrt(2) * sigma, radius_e2 = 2 * sigma;
    const double heat = melt->volumetric_heat_J_per_m3K * (melt->isotherm_K - melt->ambient_K);
    const double alpha_v = melt->conductivity_W_per_mK / melt->volumetric_heat_J_per_m3K * speed_m_per_s;
    double radius = radius_e, pi_power = 1.5;
    switch (form) {
    case MW_ENTHALPY_PI_W0:
        radius = radius_e2;
        pi_power = 1;
        break;
    case MW_ENTHALPY_PI_A:
        pi_power = 1;
        break;
    case MW_ENTHALPY_ROOTPI_W0:
        radius = radius_e2;
        pi_power = 0.5;
        break;
    case MW_ENTHALPY_PI_SIGMA:
        radius = sigma;
        pi_power = 1;
        break;
    case MW_ENTHALPY_ROOTPI_SIGMA:
        radius = sigma;
        pi_power = 0.5;
        break;
    case MW_ENTHALPY_ANCHOR:
    case MW_ENTHALPY_COUNT:
        break;
    }
    return absorbed_W / (pow(pi, pi_power) * heat * sqrt(alpha_v * radius * radius * radius));
}

double mw_keyhole_number(double absorbed_W, double speed_m_per_s, double d4sigma_m, const mw_medium *liquid)
{
    return mw_normalised_enthalpy(MW_ENTHALPY_PI_W0, absorbed_W, speed_m_per_s, d4sigma_m, liquid);
}
