"""Checks a spatial flight by shooting on Pontryagin's conditions in Cartesian coordinates (SciPy), own derivation.

With costates (q, p) of position and velocity and a flat sail of normal n,

    H = q.v - p.x/r^3 + beta (n.x)^2 (n.p) / r^4,

n in the plane of x and p at the cone angle a = (psi - asin(sin(psi)/3))/2, psi the angle from x to p. At fixed n:

    q' = p/r^3 - 3 (p.x) x/r^5 - beta (n.p) (2 (n.x) n/r^4 - 4 (n.x)^2 x/r^6),        p' = -q.

The costates' scale is free: |(q, p)| = 1 at the start. Orbit match: costate normal to both orbits' tangents. Excess of size
W fully used: along p at departure, against p at arrival. Seeded by the multipliers of the direct solution.
"""

import math

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import root

import elements
from constants import SPEED_UNIT_KM_S, TIME_UNIT_D

RTOL, ATOL = 1e-12, 1e-13


def normal(x, p):
    """Sail normal with the largest force along p."""
    radial = x / np.linalg.norm(x)
    along = float(p @ radial)
    across = p - along * radial
    size = float(np.linalg.norm(across))
    psi = math.atan2(size, along)
    cone = 0.5 * (psi - math.asin(math.sin(psi) / 3.0))
    return math.cos(cone) * radial + math.sin(cone) * across / size


def rate(_, y, beta):
    x, v, q, p = y[:3], y[3:6], y[6:9], y[9:12]
    r2 = float(x @ x)
    r = math.sqrt(r2)
    n = normal(x, p)
    nx, np_ = float(n @ x), float(n @ p)
    push = beta / (r2 * r2)
    return np.concatenate(
        [
            v,
            -x / (r2 * r) + push * nx * nx * n,
            p / (r2 * r) - 3.0 * float(p @ x) * x / (r2 * r2 * r) - push * np_ * (2 * nx * n - 4 * nx * nx * x / r2),
            -q,
        ]
    )


def hamiltonian(y, beta):
    x, v, q, p = y[:3], y[3:6], y[6:9], y[9:12]
    r = np.linalg.norm(x)
    n = normal(x, p)
    return float(q @ v - p @ x / r**3 + beta * (n @ x) ** 2 * (n @ p) / r**4)


def frozen(body, eccentric):
    """State of a body on its ellipse of J2000, and the state's derivative along that ellipse (per unit time)."""
    a, e, inclination, _, arg, node = elements.elements_at(body, 0.0)
    position, velocity = elements.state_on_ellipse(a, e, inclination, arg, node, float(eccentric))
    x, v = np.array([float(c) for c in position]), np.array([float(c) for c in velocity])
    return np.concatenate([x, v]), np.concatenate([v, -x / np.linalg.norm(x) ** 3])


def solve(problem, flight):
    """Shoot from a direct solution. Returns time and residual, or None where an excess is only partly used."""
    sizes = [problem.vinf_km_s / SPEED_UNIT_KM_S, problem.vinf_arrive_km_s / SPEED_UNIT_KM_S]
    used = [np.linalg.norm(flight["leave"]), np.linalg.norm(flight["meet"])]
    if any(size > 0 and use < 0.9999 * size for size, use in zip(sizes, used)):
        return None
    costate = flight["first_costate"] / np.linalg.norm(flight["first_costate"])
    seed = np.concatenate([costate, [flight["t_f"]], [] if problem.rendezvous else flight["anomaly"]])

    def begin(z):
        if problem.rendezvous:
            state, tangent = elements.state_at("earth", problem.depart_d), None
        else:
            state, tangent = frozen("earth", z[7])
        state = state.copy()
        state[3:] += sizes[0] * z[3:6] / np.linalg.norm(z[3:6])
        return np.concatenate([state, z[:6]]), tangent

    def finish(z, y):
        if problem.rendezvous:
            state, tangent = elements.state_at(problem.target, problem.depart_d + z[6] * TIME_UNIT_D), None
        else:
            state, tangent = frozen(problem.target, z[8])
        state = state.copy()
        state[3:] -= sizes[1] * y[9:12] / np.linalg.norm(y[9:12])
        return state, tangent

    def fly(z):
        return solve_ivp(rate, (0, z[6]), begin(z)[0], method="DOP853", rtol=RTOL, atol=ATOL, args=(problem.beta,))

    def miss(z):
        first, leave = begin(z)
        y = fly(z).y[:, -1]
        last, meet = finish(z, y)
        rows = [*(y[:6] - last), z[:6] @ z[:6] - 1.0]
        if not problem.rendezvous:
            rows += [first[6:] @ leave, y[6:] @ meet / np.linalg.norm(y[6:])]
        return np.array(rows)

    found = root(miss, seed, method="hybr", options={"xtol": 1e-13, "eps": 1e-11})
    residual = float(np.max(np.abs(miss(found.x))))
    flown = fly(found.x)
    values = [hamiltonian(y, problem.beta) for y in flown.y.T]
    last = flown.y[:, -1]
    # Waiting must not pay: H at arrival, less what the target's own motion earns, is positive.
    if problem.rendezvous:
        moving = elements.state_at(problem.target, problem.depart_d + found.x[6] * TIME_UNIT_D)
        drift = np.concatenate([moving[3:], -moving[:3] / np.linalg.norm(moving[:3]) ** 3])
        gain = values[-1] - float(last[6:] @ drift)
    else:
        gain = values[-1]
    return {
        "t_f": float(found.x[6]),
        "residual": residual,
        "hamiltonian_drift": (max(values) - min(values)) / max(abs(v) for v in values),
        "positive_at_arrival": gain > 0,
        "first_costate": found.x[:6].tolist(),
    }
