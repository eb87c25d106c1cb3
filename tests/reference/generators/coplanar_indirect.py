"""Minimum-time flight of an ideal flat sail between coplanar circles, by shooting on Pontryagin's conditions (SciPy).

Derived here from scratch, polar coordinates, canonical units. With costates q of (r, u, v) in a maximum principle,

    H = q_r u + q_u (v^2/r - 1/r^2) - q_v u v/r + (beta/r^2) (q_u f_r + q_v f_t),      H = 1 along a minimum-time flight,

and f = cos^2 a (cos a, sin a). For a primer at angle psi from the outward radius, stationarity of
cos^2 a cos(psi - a) reads 2 tan a = tan(psi - a), that is sin(psi - 2a) = sin(psi)/3, hence

    a = (psi - asin(sin(psi) / 3)) / 2        for every psi in -pi..pi.

Unknowns: the three first costates and the time; conditions: the three arrival conditions and H = 1. The seed comes from
the collocation solution, so shooting cannot pick another branch; the equations share nothing with it.

With a departure excess of at most W: along the primer with size W; or, where less is used, the primer vanishes at the
start and the two components of the excess are unknown instead.
"""

import math

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import root

RTOL, ATOL = 1e-12, 1e-13


def best_force(q_u, q_v):
    """Force per head-on force that has the largest component along the primer (q_u, q_v), and the cone angle."""
    psi = math.atan2(q_v, q_u)
    cone = 0.5 * (psi - math.asin(math.sin(psi) / 3.0))
    cos = math.cos(cone)
    return cos**3, cos**2 * math.sin(cone), cone


def rate(_, y, beta):
    r, u, v, _, q_r, q_u, q_v = y
    f_r, f_t, _ = best_force(q_u, q_v)
    push = beta / r**2
    return [
        u,
        v * v / r - 1.0 / r**2 + push * f_r,
        -u * v / r + push * f_t,
        v / r,
        q_u * (v * v / r**2 - 2.0 / r**3 + 2.0 * push * f_r / r) + q_v * (-u * v / r**2 + 2.0 * push * f_t / r),
        -q_r + q_v * v / r,
        -2.0 * q_u * v / r + q_v * u / r,
    ]


def hamiltonian(y, beta):
    r, u, v, _, q_r, q_u, q_v = y
    f_r, f_t, _ = best_force(q_u, q_v)
    return q_r * u + q_u * (v * v / r - 1.0 / r**2) - q_v * u * v / r + beta / r**2 * (q_u * f_r + q_v * f_t)


def fly(beta, first_costate, t_f, times=None, leave=(0.0, 0.0)):
    start = [1.0, leave[0], 1.0 + leave[1], 0.0, *first_costate]
    return solve_ivp(rate, (0.0, t_f), start, method="DOP853", rtol=RTOL, atol=ATOL, args=(beta,), t_eval=times)


def unpack(z, excess, part):
    """(first costate, time, departure excess) from the unknowns; part: the excess is used in part."""
    if part:
        # The primer leaves zero along -q_r: start a hair along it, so that its direction is defined.
        return [z[0], -1e-13 * z[0], 0.0], z[3], z[1:3]
    size = math.hypot(z[1], z[2])
    return z[:3], z[3], (excess * z[1] / size, excess * z[2] / size)


def solve(beta, r_f, first_costate, t_f, excess=0.0, leave=(0.0, 0.0)):
    """Shoot from a seed. Returns time, angle, residual and drift of H; raises when root finding fails."""
    arrival = np.array([r_f, 0.0, r_f**-0.5])
    part = excess > 0.0 and math.hypot(*leave) < 0.9999 * excess
    seed = np.array([first_costate[0], *leave, t_f] if part else [*first_costate, t_f])
    scale = np.maximum(np.abs(seed), 1e-3 * np.max(np.abs(seed[:3])))

    def start(z):
        costate, _, (w_u, w_v) = unpack(z, excess, part)
        return [1.0, w_u, 1.0 + w_v, 0.0, *costate]

    def flight(z):
        costate, time, w = unpack(z, excess, part)
        return fly(beta, costate, time, leave=w)

    def miss(z):
        z = z * scale
        gap = (flight(z).y[:3, -1] - arrival) / [r_f, arrival[2], arrival[2]]
        return [*gap, hamiltonian(start(z), beta) - 1.0]

    found = root(miss, seed / scale, method="hybr", options={"xtol": 1e-13, "eps": 1e-11})
    residual = float(np.max(np.abs(miss(found.x))))
    if residual > 1e-8:
        raise RuntimeError(f"shooting stopped at residual {residual:.1e} (r_f {r_f}, beta {beta})")
    z = found.x * scale
    flown = flight(z)
    drift = max(abs(hamiltonian(y, beta) - 1.0) for y in flown.y.T)
    costate, time, w = unpack(z, excess, part)
    return {
        "t_f": float(time),
        "angle": float(flown.y[3, -1]),
        "first_costate": [float(q) for q in costate],
        "leave": [float(c) for c in w],
        "residual": residual,
        "hamiltonian_drift": float(drift),
    }


def cone_history(beta, solution, count):
    """Signed cone angles at equally spaced times of a solved flight [rad]."""
    flown = fly(beta, solution["first_costate"], solution["t_f"], np.linspace(0.0, solution["t_f"], count))
    return [best_force(y[5], y[6])[2] for y in flown.y.T]
