"""Approximate elements of the planets and the states they give; works on floats and on CasADi symbols.

Table: E. M. Standish, JPL, "Keplerian Elements for Approximate Positions of the Major Planets", table 1, 1800-2050,
mean ecliptic and equinox of J2000. Rows: a [au], e, I, L, long. of perihelion, node [deg], then rates per Julian century.
Velocity is the osculating one of the ellipse at that date with the Sun's mu alone: rates move the ellipse, they add
nothing to the velocity.
"""

import math

import casadi as ca
import numpy as np

J2000_JD_TDB = 2451545.0
CENTURY_D = 36525.0

PLANETS = {
    "mercury": (
        (0.38709927, 0.20563593, 7.00497902, 252.25032350, 77.45779628, 48.33076593),
        (0.00000037, 0.00001906, -0.00594749, 149472.67411175, 0.16047689, -0.12534081),
    ),
    "venus": (
        (0.72333566, 0.00677672, 3.39467605, 181.97909950, 131.60246718, 76.67984255),
        (0.00000390, -0.00004107, -0.00078890, 58517.81538729, 0.00268329, -0.27769418),
    ),
    "earth": (
        (1.00000261, 0.01671123, -0.00001531, 100.46457166, 102.93768193, 0.0),
        (0.00000562, -0.00004392, -0.01294668, 35999.37244981, 0.32327364, 0.0),
    ),
    "mars": (
        (1.52371034, 0.09339410, 1.84969142, -4.55343205, -23.94362959, 49.55953891),
        (0.00001847, 0.00007882, -0.00813131, 19140.30268499, 0.44441088, -0.29257343),
    ),
    "jupiter": (
        (5.20288700, 0.04838624, 1.30439695, 34.39644051, 14.72847983, 100.47390909),
        (-0.00011607, -0.00013253, -0.00183714, 3034.74612775, 0.21252668, 0.20469106),
    ),
    "saturn": (
        (9.53667594, 0.05386179, 2.48599187, 49.95424423, 92.59887831, 113.66242448),
        (-0.00125060, -0.00050991, 0.00193609, 1222.49362201, -0.41897216, -0.28867794),
    ),
    "uranus": (
        (19.18916464, 0.04725744, 0.77263783, 313.23810451, 170.95427630, 74.01692503),
        (-0.00196176, -0.00004397, -0.00242939, 428.48202785, 0.40805281, 0.04240589),
    ),
    "neptune": (
        (30.06992276, 0.00859048, 1.77004347, -55.12002969, 44.96476227, 131.78422574),
        (0.00026291, 0.00005105, 0.00035372, 218.45945325, -0.32241464, -0.00508664),
    ),
}


def elements_at(name, days_since_j2000):
    """a [au], e, and in radians I, mean anomaly (not reduced), argument of perihelion, node, at a TDB date."""
    base, per_century = PLANETS[name]
    century = days_since_j2000 / CENTURY_D
    a, e, inclination, longitude, perihelion, node = (b + p * century for b, p in zip(base, per_century))
    deg = math.pi / 180.0
    return a, e, inclination * deg, (longitude - perihelion) * deg, (perihelion - node) * deg, node * deg


def state_on_ellipse(a, e, inclination, arg_perihelion, node, eccentric):
    """Canonical position and velocity (two lists of three) at an eccentric anomaly [rad], mu = 1."""
    sin, cos, sqrt = (ca.sin, ca.cos, ca.sqrt)
    b = sqrt(1 - e * e)
    x, y = a * (cos(eccentric) - e), a * b * sin(eccentric)
    pace = sqrt(1 / a) / (1 - e * cos(eccentric))
    vx, vy = -pace * sin(eccentric), pace * b * cos(eccentric)
    cw, sw, cn, sn, ci, si = (
        cos(arg_perihelion),
        sin(arg_perihelion),
        cos(node),
        sin(node),
        cos(inclination),
        sin(inclination),
    )
    p = (cw * cn - sw * sn * ci, cw * sn + sw * cn * ci, sw * si)
    q = (-sw * cn - cw * sn * ci, -sw * sn + cw * cn * ci, cw * si)
    return [p[k] * x + q[k] * y for k in range(3)], [p[k] * vx + q[k] * vy for k in range(3)]


def eccentric_anomaly(mean, e):
    """Kepler's equation by Newton's method, floats only [rad]; the revolution count of the mean anomaly is kept."""
    eccentric = mean + e * math.sin(mean)
    for _ in range(30):
        step = (eccentric - e * math.sin(eccentric) - mean) / (1 - e * math.cos(eccentric))
        eccentric -= step
        if abs(step) < 1e-15:
            break
    return eccentric


def state_at(name, days_since_j2000):
    """Canonical state of a planet as six floats."""
    a, e, inclination, mean, arg, node = elements_at(name, days_since_j2000)
    position, velocity = state_on_ellipse(a, e, inclination, arg, node, eccentric_anomaly(mean, e))
    return np.array([float(c) for c in position + velocity])


def synodic_period_d(one, other):
    """From the table's mean motions in longitude."""
    rate = abs(PLANETS[one][1][3] - PLANETS[other][1][3]) / 360.0 / CENTURY_D
    return 1.0 / rate
