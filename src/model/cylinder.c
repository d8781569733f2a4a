/* SPDX-License-Identifier: GPL-3.0-or-later
 * Heat given off by a moving cylinder at constant temperature (formula and source: see the header).
 *
 * With the Wronskian of I_n and K_n and I_0^2 + 2 Sum (-1)^n I_n^2 = 1 the series of the header is the same as
 *     F = 2 pi Sum_n eps_n (-1)^n I_n(Pe)/K_n(Pe),
 * which needs no derivative. It alternates and its terms grow as exp(2 Pe) while F grows as 4 Pe: in double precision
 * it has lost 1e-9 at Pe = 10 and everything at 20. So it is summed below Pe = 2 only. Above, F/(4 Pe) is a smooth
 * function of t = Pe^(-2/3) (the heated layer at the shoulders is of that order), tends to 1 (all the metal that the
 * cylinder sweeps, a strip 2 radii wide, is heated through), and is taken from a Chebyshev sum. */
#include "meltwright/keyhole.h"

#include <gsl/gsl_sf_bessel.h>
#include <math.h>

static const double pi = 3.14159265358979323846;

enum { TERMS = 24, CHEBYSHEV = 18 };

/* (F/(4 Pe) - 1)/t in Chebyshev polynomials of 2 t/t_max - 1, t_max = 2^(-2/3). Obtained from the series itself,
 * summed in floating point of 60 + 0.9 Pe digits (mpmath 1.3.0) at 48 Chebyshev nodes over Pe 2..400; the sum kept
 * here agrees with that series to 3e-18 at Pe 2, 3.3, 7, 33, 150, 1000. At t = 0 it is 0.9962, twice the 0.498 (from
 * memory) of the first correction to the scattering of short waves by a cylinder: the same series at imaginary Pe. */
static const double chebyshev[CHEBYSHEV] = {
    1.00479560183000255,      9.03614819123915232e-3,   3.86860752533473781e-4,   -4.30756844297239963e-5,
    3.43942935749409842e-6,   -1.94250138951762976e-7,  -8.52568654446789479e-10, 2.45238547487940779e-9,
    -4.63256687578913431e-10, 5.56356754513579628e-11,  -3.56762722203211504e-12, -3.46660965619070602e-13,
    1.67732759766977086e-13,  -3.48497008344536140e-14, 4.74939403093868790e-15,  -2.88029986242849256e-16,
    -5.36965602050158838e-17, 2.78823031249378354e-17,
};

static double by_chebyshev(double peclet)
{
    const double t = 1 / cbrt(peclet * peclet), t_max = 0.62996052494743658238;
    const double x = 2 * (2 * t / t_max - 1);
    double b = 0, b_next = 0;
    for (int k = CHEBYSHEV - 1; k > 0; k--) {
        const double b_k = chebyshev[k] + x * b - b_next;
        b_next = b;
        b = b_k;
    }
    return 4 * peclet * (1 + t * (chebyshev[0] + x / 2 * b - b_next));
}

/* Each term from the one before: I_n/I_(n-1) by the continued fraction downward, K_n/K_(n-1) upward, both stable. The
 * terms fall as (Pe/2)^(2n)/(n!)^2; at Pe = 2 the first one left out is below 1e-45. */
static double by_series(double peclet)
{
    double i_ratio[TERMS + 1]; /* [n] = I_n/I_(n-1) */
    double ratio = 0;
    for (int n = TERMS; n > 0; n--)
        i_ratio[n] = ratio = 1 / (2 * n / peclet + ratio);
    const double i0 = gsl_sf_bessel_I0_scaled(peclet), k0 = gsl_sf_bessel_K0_scaled(peclet);
    double k_ratio = 1 / (peclet * i0 * k0) - i_ratio[1]; /* K_1/K_0, from I_0 K_1 + I_1 K_0 = 1/Pe */
    double term = i0 / k0 * exp(2 * peclet), sum = term;
    for (int n = 1; n <= TERMS; n++) {
        term *= -i_ratio[n] / k_ratio;
        sum += 2 * term;
        k_ratio = 2 * n / peclet + 1 / k_ratio;
    }
    return 2 * pi * sum;
}

double mw_cylinder_heat(double peclet)
{
    if (!(peclet > 0))
        return NAN;
    if (isinf(peclet))
        return peclet;
    return peclet < 2 ? by_series(peclet) : by_chebyshev(peclet);
}
