"""Minimum-time sail flight between real orbits, by direct collocation in Cartesian coordinates (CasADi + IPOPT).

Heliocentric mean ecliptic of J2000, canonical units. The control is the force vector over the head-on force, three
inertial components inside the convex set |f|^(3/2) <= f . r/|r|, whose surface a flat mirror reaches. Three kinds of end:

- orbit: both ellipses frozen at J2000, eccentric anomalies of departure and arrival free;
- rendezvous: departure date given, arrival state from the target's elements at the arrival date (rates applied);
- either with a velocity offset of at most a given size at departure or arrival (hyperbolic excess, direction free).
"""

import math
import time
from dataclasses import dataclass

import casadi as ca
import numpy as np

import elements
from constants import SPEED_UNIT_KM_S, TIME_UNIT_D
from legendre import gauss

DEGREE = 5
IPOPT = {
    "print_time": False,
    "ipopt.print_level": 0,
    "ipopt.sb": "yes",
    "ipopt.tol": 1e-10,
    "ipopt.constr_viol_tol": 1e-11,
    "ipopt.max_iter": 400,
    "ipopt.mu_strategy": "adaptive",
}
WARM = {
    "ipopt.mu_strategy": "monotone",
    "ipopt.mu_init": 1e-4,
    "ipopt.bound_push": 1e-6,
    "ipopt.bound_frac": 1e-6,
    "ipopt.max_iter": 150,
}


@dataclass(frozen=True)
class Problem:
    """One flight from the Earth's orbit. depart_d: days of TDB since J2000, None for an orbit match."""

    target: str
    beta: float
    depart_d: float | None = None
    vinf_km_s: float = 0.0
    vinf_arrive_km_s: float = 0.0

    @property
    def rendezvous(self):
        return self.depart_d is not None


def end_state(problem, body, eccentric, t_f, shape):
    """State (6 x 1 symbol) of a body at departure (t_f None) or arrival, and Kepler's equation as a residual or None.

    shape scales eccentricity and inclination in an orbit match: 1 is the problem itself, 0 coplanar circles.
    """
    if not problem.rendezvous:
        a, e, inclination, _, arg, node = elements.elements_at(body, 0.0)
        e, inclination = shape * e, shape * inclination
        position, velocity = elements.state_on_ellipse(a, e, inclination, arg, node, eccentric)
        return ca.vertcat(*position, *velocity), None
    days = problem.depart_d + t_f * TIME_UNIT_D
    a, e, inclination, mean, arg, node = elements.elements_at(body, days)
    position, velocity = elements.state_on_ellipse(a, e, inclination, arg, node, eccentric)
    return ca.vertcat(*position, *velocity), eccentric - e * ca.sin(eccentric) - mean


class Transcription:
    """The nonlinear program of one problem on one mesh."""

    def __init__(self, problem, mesh, limit_s=30.0):
        self.problem, self.mesh = problem, mesh
        points, derivative, end, self.weights = gauss(DEGREE)
        n = self.n = len(mesh) - 1
        width = np.diff(mesh)
        self.s_inner = (mesh[:-1, None] + width[:, None] * points[None, 1:]).ravel()
        t_f, anomaly = ca.SX.sym("t_f"), ca.SX.sym("anomaly", 2)
        shape = ca.SX.sym("shape")
        leave, meet = ca.SX.sym("leave", 3), ca.SX.sym("meet", 3)
        nodes = ca.SX.sym("nodes", 6, n + 1)
        inner = ca.SX.sym("inner", 6, n * DEGREE)
        force = ca.SX.sym("force", 3, n * DEGREE)

        r2 = ca.sum1(inner[:3, :] ** 2)
        r = ca.sqrt(r2)
        rates = ca.vertcat(
            inner[3:, :],
            -inner[:3, :] / ca.repmat(r2 * r, 3, 1) + problem.beta * force / ca.repmat(r2, 3, 1),
        )
        bubble = (ca.sum1(force**2) + 1e-14) ** 0.75 - ca.sum1(force * inner[:3, :]) / r

        if problem.rendezvous:
            first, equations = ca.DM(elements.state_at("earth", problem.depart_d)), [anomaly[0]]
        else:
            first, equations = end_state(problem, "earth", anomaly[0], None, shape)[0], []
        last, kepler = end_state(problem, problem.target, anomaly[1], t_f, shape)
        if kepler is not None:
            equations.append(kepler)
        start = nodes[:, 0] - first - ca.vertcat(0, 0, 0, leave)
        arrival = nodes[:, n] - last - ca.vertcat(0, 0, 0, meet)
        defects = []
        for i in range(n):
            column = slice(i * DEGREE, (i + 1) * DEGREE)
            x = ca.horzcat(nodes[:, i], inner[:, column])
            defects.append(ca.vec(x @ ca.DM(derivative[:, 1:]) - width[i] * t_f * rates[:, column]))
            defects.append(x @ ca.DM(end) - nodes[:, i + 1])
        equal = ca.vertcat(start, arrival, *equations, *defects)
        self.limits = [(problem.vinf_km_s, leave), (problem.vinf_arrive_km_s, meet)]
        unequal = [bubble.T]
        for limit, offset in self.limits:
            if limit > 0:
                unequal.append(ca.sumsqr(offset) - (limit / SPEED_UNIT_KM_S) ** 2)
        unequal = ca.vertcat(*unequal)
        self.n_equal, self.n_unequal = equal.shape[0], unequal.shape[0]
        z = ca.vertcat(t_f, anomaly, leave, meet, ca.vec(nodes), ca.vec(inner), ca.vec(force))
        nlp = {"x": z, "p": shape, "f": t_f, "g": ca.vertcat(equal, unequal)}
        options = {**IPOPT, "ipopt.max_cpu_time": limit_s}
        self.cold = ca.nlpsol("cold", "ipopt", nlp, options)
        self.warm = ca.nlpsol("warm", "ipopt", nlp, {**options, **WARM})
        self.bounds()

    def bounds(self):
        free = 6 * (self.n + 1) + (6 + 3) * self.n * DEGREE
        lower, upper = [0.0, 0.0, -1e3], [0.0, 0.0, 1e3]
        for limit, _ in self.limits:
            lower += [-limit / SPEED_UNIT_KM_S] * 3
            upper += [limit / SPEED_UNIT_KM_S] * 3
        self.lower, self.upper = lower + [-10.0] * free, upper + [10.0] * free

    def solve(self, guess, shape=1.0, warm=False):
        """One local solve; None when IPOPT does not report success. warm: the guess is close, stay near it.

        guess: dict with t_f, anomaly (2), leave, meet, path(fractions) -> 9 rows, and window: the departure anomaly may
        move by this much [rad] only (left out: anywhere).
        """
        reach = guess.get("window", 1e3)
        # Without a fence the time of a bad guess can collapse to nothing, where IPOPT spends its iterations for nothing.
        self.lower[0], self.upper[0] = 0.3 * guess["t_f"], 4.0 * guess["t_f"]
        self.lower[1], self.upper[1] = guess["anomaly"][0] - reach, guess["anomaly"][0] + reach
        at_inner = guess["path"](self.s_inner)
        z0 = np.concatenate(
            [
                [guess["t_f"]],
                guess["anomaly"],
                guess.get("leave", np.zeros(3)),
                guess.get("meet", np.zeros(3)),
                guess["path"](self.mesh)[:6].ravel(order="F"),
                at_inner[:6].ravel(order="F"),
                at_inner[6:].ravel(order="F"),
            ]
        )
        clock = time.process_time()
        solver = self.warm if warm else self.cold
        out = solver(
            x0=z0,
            p=shape,
            lbx=self.lower,
            ubx=self.upper,
            lbg=[0.0] * self.n_equal + [-100.0] * self.n_unequal,
            ubg=[0.0] * (self.n_equal + self.n_unequal),
        )
        if not solver.stats()["success"]:
            return None
        z = np.array(out["x"]).ravel()
        k = 9 + 6 * (self.n + 1)
        nodes = z[9:k].reshape(6, -1, order="F")
        inner = z[k : k + 6 * self.n * DEGREE].reshape(6, -1, order="F")
        force = z[k + 6 * self.n * DEGREE :].reshape(3, -1, order="F")
        slack = -np.array(out["g"]).ravel()[self.n_equal : self.n_equal + self.n * DEGREE]
        s = np.concatenate([self.mesh, self.s_inner])
        order = np.argsort(s, kind="stable")
        states = np.concatenate([nodes, inner], axis=1)[:, order]
        flat = np.unwrap(np.arctan2(states[1], states[0]))
        return {
            "t_f": float(z[0]),
            "anomaly": z[1:3],
            "leave": z[3:6],
            "meet": z[6:9],
            # Multiplier of the start condition: the first costate scaled to a Hamiltonian of +1 (seed of a shooting).
            "first_costate": np.array(out["lam_g"]).ravel()[:6],
            "s": s[order],
            "states": states,
            "longitude_swept": float(flat[-1] - flat[0]),
            "distance_min": float(np.min(np.linalg.norm(states[:3], axis=0))),
            "s_inner": self.s_inner,
            "force": force,
            "slack": float(np.max(slack)),
            "elements": self.n,
            "cpu_s": time.process_time() - clock,
        }


def as_guess(flight):
    """A solved flight as the guess of another mesh."""

    def path(at):
        rows = [np.interp(at, flight["s"], row) for row in flight["states"]]
        return np.array(rows + [np.interp(at, flight["s_inner"], row) for row in flight["force"]])

    return {**{k: flight[k] for k in ("t_f", "anomaly", "leave", "meet")}, "path": path}


def refined_mesh(flight, count):
    """Element edges spread evenly over a mix of angle swept, turning of the force and elapsed fraction."""
    s, f = flight["s_inner"], flight["force"]
    f = f / np.maximum(np.linalg.norm(f, axis=0), 1e-12)
    cosine = np.clip(np.sum(f[:, 1:] * f[:, :-1], axis=0), -1, 1)
    turning = np.gradient(np.concatenate([[0], np.cumsum(np.arccos(cosine))]), s)
    x = np.array([np.interp(s, flight["s"], row) for row in flight["states"]])
    pace = np.linalg.norm(x[3:], axis=0) / np.linalg.norm(x[:3], axis=0) * flight["t_f"]
    density = pace + 1.5 * turning
    density += 0.3 * np.trapezoid(density, s)
    smooth = np.convolve(np.pad(density, 4, mode="edge"), np.ones(9) / 9, mode="valid")
    total = np.concatenate([[0], np.cumsum(0.5 * (smooth[1:] + smooth[:-1]) * np.diff(s))])
    grid = np.interp(np.linspace(0, 1, count + 1), total / total[-1], s)
    grid[0], grid[-1] = 0.0, 1.0
    return grid


def refine(problem, flight):
    """Adapted meshes, each twice as fine as the one before, until the time changes by less than 1e-8 (at most three)."""
    count = max(40, math.ceil(abs(flight["longitude_swept"]) / (2 * math.pi) * 24))
    cpu_s = 0.0
    for _ in range(3):
        finer = Transcription(problem, refined_mesh(flight, count)).solve(as_guess(flight), warm=True)
        if finer is None:
            return None
        finer["halved_mesh_change"] = finer["t_f"] / flight["t_f"] - 1.0
        cpu_s += finer["cpu_s"]
        flight, count = finer, 2 * count
        if abs(flight["halved_mesh_change"]) < 1e-8:
            break
    flight["cpu_s"] = cpu_s
    return flight
