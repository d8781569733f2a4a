# SPDX-License-Identifier: GPL-3.0-or-later
"""The pool of a moving Gaussian source (Eagar and Tsai 1983) as a careful user would write it with SciPy: quad for
the integral, brentq for the isotherm, a bounded minimiser over x inside it. Lengths in sigma.

usage: pool_scipy.py time|root-time < settings

Reads one pool a line: absorbed power W, speed m/s, sigma m, conductivity W/mK, volumetric heat J/m3K, ambient K,
isotherm K. Prints width, depth and length in m, one pool a line, then the seconds a pool took, start-up left out."""
import math
import sys
import time

from scipy.integrate import quad
from scipy.optimize import brentq, minimize_scalar

QUADRATURE, SIZE, PLACE = 1e-9, 1e-8, 1e-4
SCALING = sys.argv[1]


def density(w2, x, y, z, peclet):
    s = 1 + w2
    reach = x + peclet * w2
    return math.exp(-(reach * reach + y * y) / (2 * s) - (z * z / (2 * w2) if z > 0 else 0)) / s


def by_time(tau, x, y, z, peclet):  # tau = alpha t / sigma^2
    return density(2 * tau, x, y, z, peclet) / math.sqrt(2 * tau)


def by_root_time(w, x, y, z, peclet):  # 2 alpha t = sigma^2 w^2
    return density(w * w, x, y, z, peclet)


FORM = by_time if SCALING == "time" else by_root_time


def first_solid(excess):
    """A bracket of the distance at which the excess over melting passes through 0."""
    low, high = 0.0, 1.0
    while excess(high) > 0:
        low, high = high, 2 * high
    return low, high


def pool(power, speed, sigma, k, heat, ambient, isotherm):
    peclet = speed * sigma * heat / (2 * k)
    strength = power / (math.sqrt(2) * math.pi**1.5 * k * sigma * (isotherm - ambient))

    def rise(x, y, z):
        return strength * quad(FORM, 0, math.inf, args=(x, y, z, peclet), epsabs=0, epsrel=QUADRATURE, limit=1000)[0]

    def hottest(of, low, high):
        return minimize_scalar(lambda x: -of(x), bounds=(low, high), method="bounded", options={"xatol": PLACE})

    def edge(excess):
        return brentq(excess, *first_solid(excess), xtol=1e-14, rtol=SIZE)

    peak = hottest(lambda x: rise(x, 0, 0), -2, 1).x
    front = peak + edge(lambda r: rise(peak + r, 0, 0) - 1)
    back = peak - edge(lambda r: rise(peak - r, 0, 0) - 1)
    half = edge(lambda r: -hottest(lambda x: rise(x, r, 0), back, front).fun - 1)
    depth = edge(lambda r: -hottest(lambda x: rise(x, 0, r), back, front).fun - 1)
    return 2 * half * sigma, depth * sigma, (front - back) * sigma


settings = [[float(v) for v in line.split()] for line in sys.stdin]
start = time.perf_counter()
pools = [pool(*s) for s in settings]
elapsed = time.perf_counter() - start
for p in pools:
    print("%.17g %.17g %.17g" % p)
print("%.9g" % (elapsed / len(pools)))
