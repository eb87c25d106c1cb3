"""Minimum-time flight of an ideal flat sail between coplanar circles, by direct collocation (CasADi + IPOPT).

States r, u, v (distance, radial and transverse speed) in canonical units, start (1, 0, 1), end (r_f, 0, r_f^-1/2),
arrival angle free. Control: the force vector (f_r, f_t) divided by the head-on force, inside the convex bubble
|f|^(3/2) <= f_r. A flat mirror reaches exactly its surface (f_r = cos^3 a, f_t = cos^2 a sin a, |f| = cos^2 a); since
the Hamiltonian is linear in f, an optimum lies on the surface, and the edge-on traps that the cone angle
has as a control do not exist. No costates, no formula of the optimal angle: nothing here is shared with an indirect
method.
"""

import argparse
import math
import sys
import time

import casadi as ca
import numpy as np
from scipy.integrate import solve_ivp

from constants import SUN_GRAVITY_1AU_MM_S2, TARGETS_AU, TIME_UNIT_D
from legendre import gauss

DEGREE = 5
IPOPT = {
    "print_time": False,
    "ipopt.print_level": 0,
    "ipopt.sb": "yes",
    "ipopt.tol": 1e-11,
    "ipopt.constr_viol_tol": 1e-12,
    "ipopt.acceptable_tol": 1e-9,
    "ipopt.max_iter": 1500,
    "ipopt.mu_strategy": "adaptive",
}


def solve(beta, r_f, guess, mesh, excess=0.0):
    """One local solve. excess: largest departure speed over the circular one, direction free, may be used in part.

    guess: function of an array of fractions in 0..1 giving rows (r, u, v, f_r, f_t); guess(None) is the total time.
    mesh: increasing fractions from 0 to 1. Returns a dict, or None when IPOPT does not report success.
    """
    points, derivative, end, weights = gauss(DEGREE)
    n = len(mesh) - 1
    width = np.diff(mesh)
    nodes = ca.SX.sym("nodes", 3, n + 1)
    inner = ca.SX.sym("inner", 3, n * DEGREE)
    force = ca.SX.sym("force", 2, n * DEGREE)
    t_f = ca.SX.sym("t_f")
    leave = ca.SX.sym("leave", 2)

    def rate(x, f):
        r, u, v = x[0, :], x[1, :], x[2, :]
        push = beta / r**2
        return ca.vertcat(u, v**2 / r - 1 / r**2 + push * f[0, :], -u * v / r + push * f[1, :])

    rates = rate(inner, force)
    start = nodes[:, 0] - ca.vertcat(1.0, leave[0], 1.0 + leave[1])
    arrival = nodes[:, n] - ca.DM([r_f, 0.0, 1.0 / math.sqrt(r_f)])
    defects, angle = [], 0
    for i in range(n):
        column = slice(i * DEGREE, (i + 1) * DEGREE)
        x = ca.horzcat(nodes[:, i], inner[:, column])
        slope = x @ ca.DM(derivative[:, 1:])
        defects.append(ca.vec(slope - width[i] * t_f * rates[:, column]))
        defects.append(x @ ca.DM(end) - nodes[:, i + 1])
        angle += width[i] * t_f * ((inner[2, column] / inner[0, column]) @ ca.DM(weights))
    bubble = (force[0, :] ** 2 + force[1, :] ** 2 + 1e-14) ** 0.75 - force[0, :]

    z = ca.vertcat(t_f, leave, ca.vec(nodes), ca.vec(inner), ca.vec(force))
    equal = ca.vertcat(start, arrival, *defects)
    unequal = [bubble.T] if excess == 0.0 else [bubble.T, ca.sumsqr(leave) - excess**2]
    g = ca.vertcat(equal, *unequal)
    n_equal, n_bubble = equal.shape[0], n * DEGREE
    n_unequal = g.shape[0] - n_equal
    solver = ca.nlpsol("solver", "ipopt", {"x": z, "f": t_f, "g": g}, IPOPT)

    s_inner = (mesh[:-1, None] + width[:, None] * points[None, 1:]).ravel()
    at_inner = guess(s_inner)
    z0 = np.concatenate(
        [
            [guess(None), 0.0, 0.0],
            guess(mesh)[:3].ravel(order="F"),
            at_inner[:3].ravel(order="F"),
            at_inner[3:].ravel(order="F"),
        ]
    )
    low_r = 0.3 * min(1.0, r_f)
    lower = (
        [1e-2, -excess, -excess]
        + [low_r, -3, 0.02] * (n + 1)
        + [low_r, -3, 0.02] * (n * DEGREE)
        + [0, -1] * (n * DEGREE)
    )
    high_r = 3.0 * max(1.0, r_f)
    upper = [1e4, excess, excess] + [high_r, 3, 5] * (n + 1) + [high_r, 3, 5] * (n * DEGREE) + [1, 1] * (n * DEGREE)
    clock = time.process_time()
    out = solver(x0=z0, lbx=lower, ubx=upper, lbg=[0] * n_equal + [-10] * n_unequal, ubg=[0] * (n_equal + n_unequal))
    if not solver.stats()["success"]:
        return None
    values = np.array(out["x"]).ravel()
    k = 3 + 3 * (n + 1)
    nodes_v = values[3:k].reshape(3, -1, order="F")
    inner_v = values[k : k + 3 * n * DEGREE].reshape(3, -1, order="F")
    force_v = values[-2 * n * DEGREE :].reshape(2, -1, order="F")
    return {
        "t_f": float(values[0]),
        "angle": float(ca.Function("angle", [z], [angle])(out["x"])),
        # Multiplier of the start condition = sensitivity of the time, so an estimate of the first costate, scaled
        # to a Hamiltonian of +1 in a maximum principle. Only used to seed the indirect solve.
        "first_costate": np.array(out["lam_g"]).ravel()[:3].tolist(),
        "leave": values[1:3].tolist(),
        "mesh": mesh,
        "s_inner": s_inner,
        "nodes": nodes_v,
        "inner": inner_v,
        "force": force_v,
        "slack": float(np.max(-np.array(out["g"]).ravel()[n_equal : n_equal + n_bubble])),
        "iterations": solver.stats()["iter_count"],
        "cpu_s": time.process_time() - clock,
    }


def as_guess(flight):
    """Turn a solved flight into a guess for another mesh or a neighbouring case."""
    s = np.concatenate([flight["mesh"], flight["s_inner"]])
    x = np.concatenate([flight["nodes"], flight["inner"]], axis=1)
    order = np.argsort(s, kind="stable")
    s, x = s[order], x[:, order]

    def guess(at):
        if at is None:
            return flight["t_f"]
        rows = [np.interp(at, s, row) for row in x]
        rows += [np.interp(at, flight["s_inner"], row) for row in flight["force"]]
        return np.array(rows)

    return guess


def spiral_guess(beta, r_f, cone_deg):
    """Fly a constant cone angle until the semi-major axis is the target's; hold the last state if it never is."""
    cone = math.copysign(math.radians(cone_deg), r_f - 1.0)
    f = (math.cos(cone) ** 3, math.cos(cone) ** 2 * math.sin(cone))

    def rate(_, x):
        r, u, v = x
        push = beta / r**2
        return [u, v**2 / r - 1 / r**2 + push * f[0], -u * v / r + push * f[1]]

    def axis_reached(_, x):
        return 1.0 / (2.0 / x[0] - x[1] ** 2 - x[2] ** 2) - r_f if x[0] < 2 / (x[1] ** 2 + x[2] ** 2) else 1.0

    axis_reached.terminal = True
    flown = solve_ivp(
        rate, (0, 4000), [1, 0, 1], method="DOP853", rtol=1e-8, atol=1e-10, dense_output=True, events=axis_reached
    )

    def guess(at):
        if at is None:
            return flown.t[-1]
        x = flown.sol(np.asarray(at) * flown.t[-1])
        return np.vstack([x, np.full(len(at), f[0]), np.full(len(at), f[1])])

    return guess


def straight_guess(r_f, turns):
    """Distance growing linearly with the fraction, circular speed throughout, a time that fits the turns asked for."""
    mean = 0.5 * (1.0 + r_f)

    def guess(at):
        if at is None:
            return 2 * math.pi * turns * mean**1.5
        at = np.asarray(at)
        r = 1 + (r_f - 1) * at
        ones = np.ones(len(at))
        return np.vstack([r, 0 * ones, r**-0.5, 0.54 * ones, math.copysign(0.38, r_f - 1) * ones])

    return guess


def refined_mesh(flight, elements):
    """Spread element edges evenly over a mix of angle swept, turning of the force vector and elapsed fraction."""
    s = flight["s_inner"]
    r, _, v = flight["inner"]
    turning = np.abs(np.gradient(np.unwrap(np.arctan2(flight["force"][1], flight["force"][0])), s))
    density = flight["t_f"] * v / r + 1.5 * turning
    density = density + 0.3 * np.trapezoid(density, s)
    smooth = np.convolve(np.pad(density, 4, mode="edge"), np.ones(9) / 9, mode="valid")
    total = np.concatenate([[0], np.cumsum(0.5 * (smooth[1:] + smooth[:-1]) * np.diff(s))])
    total = (total - total[0]) / total[-1]
    grid = np.interp(np.linspace(0, 1, elements + 1), total, s)
    grid[0], grid[-1] = 0.0, 1.0
    return grid


def refine(beta, r_f, flight, excess=0.0):
    """Two adapted meshes, the second twice as fine: their difference is the error estimate. None when either fails."""
    elements = max(40, math.ceil(flight["angle"] / (2 * math.pi) * 24))
    coarse = solve(beta, r_f, as_guess(flight), refined_mesh(flight, elements), excess)
    if coarse is None:
        return None
    fine = solve(beta, r_f, as_guess(coarse), refined_mesh(coarse, 2 * elements), excess)
    if fine is None:
        return None
    fine["elements"] = 2 * elements
    fine["halved_mesh_change"] = fine["t_f"] / coarse["t_f"] - 1.0
    fine["cpu_s"] += coarse["cpu_s"]
    return fine


def first_solves(beta, r_f, neighbour, excess=0.0):
    """Local solves from unlike first guesses on a plain mesh: {name: flight}; failed ones are left out."""
    guesses = {
        "spiral 35.26 deg": spiral_guess(beta, r_f, 35.264),
        "spiral 20 deg": spiral_guess(beta, r_f, 20.0),
    }
    for turns in (0.4, 0.8, 1.5, 2.5, 4.0):
        guesses[f"straight, {turns} turns"] = straight_guess(r_f, turns)
    if neighbour is not None:
        guesses["continued from a higher acceleration"] = as_guess(neighbour)
    found = {}
    for name, guess in guesses.items():
        turns_guess = guess(None) / (2 * math.pi)
        elements = int(min(max(30, 20 * turns_guess * max(1.0, r_f**-1.5) / max(1.0, r_f)), 160))
        flight = solve(beta, r_f, guess, np.linspace(0, 1, elements + 1), excess)
        if flight is not None:
            found[name] = flight
    return found


def best_flight(beta, r_f, neighbour=None, excess=0.0):
    """The fastest local optimum over all guesses, refined, with the list of times that the guesses led to."""
    found = first_solves(beta, r_f, neighbour, excess)
    if not found:
        raise RuntimeError(f"no guess converged for r_f {r_f}, beta {beta}")
    for name in sorted(found, key=lambda k: found[k]["t_f"]):
        flight = refine(beta, r_f, found[name], excess)
        if flight is not None:
            break
    else:
        raise RuntimeError(f"refinement failed for r_f {r_f}, beta {beta}")
    flight["guess"] = name
    flight["local_times_d"] = {k: v["t_f"] * TIME_UNIT_D for k, v in found.items()}
    return flight


def main():
    args = argparse.ArgumentParser(description="Print the minimum time of one case.")
    args.add_argument("target", help="a planet's name or a radius in au")
    args.add_argument("ac_mm_s2", type=float)
    args = args.parse_args()
    r_f = TARGETS_AU.get(args.target) or float(args.target)
    flight = best_flight(args.ac_mm_s2 / SUN_GRAVITY_1AU_MM_S2, r_f)
    print(
        f"{flight['t_f'] * TIME_UNIT_D:.6f} d, {flight['angle']:.6f} rad, mesh change "
        f"{flight['halved_mesh_change']:.1e}, {flight['elements']} elements x degree {DEGREE}, {flight['cpu_s']:.2f} s"
    )
    for name, days in flight["local_times_d"].items():
        print(f"  {name}: {days:.4f} d")
    return 0


if __name__ == "__main__":
    sys.exit(main())
