"""Writes spatial_times.json: flights between real orbits and flights with excess speed, direct solution and shooting.

The table is written again after every row, and a row of the same case is replaced: a run that is cut short leaves what
it had, and `make_spatial_times.py orbit mercury` redoes only the rows of that kind and target.
"""

import datetime
import json
import math
import pathlib
import sys

import numpy as np

import coplanar_collocation as plane_direct
import coplanar_indirect as plane_shooting
import elements
import spatial_collocation as direct
import spatial_guesses as guesses
import spatial_indirect as shooting
from constants import SPEED_UNIT_KM_S, SUN_GRAVITY_1AU_MM_S2, TARGETS_AU, TIME_UNIT_D, header
from make_coplanar_times import versions

OUT = pathlib.Path(__file__).resolve().parents[1] / "spatial_times.json"
FIRST_DATE = datetime.date(2030, 1, 1)
ORBIT_CASES = [(name, ac) for name in ("mars", "venus", "mercury") for ac in (1.0, 0.5)]
EXCESS_CASES = [(1.0, 1.0), (1.0, 3.0), (0.5, 5.0)]  # to Mars's circle: mm/s^2, km/s; the last is used in part only


def days_since_j2000(date):
    return (date - datetime.date(2000, 1, 1)).days - 0.5


def sci(value):
    return float(f"{value:.2e}")


def local_solutions(found):
    """Distinct local optima among the guesses, fastest first: time to 0.01 d, longitude swept, how many led there."""
    groups = []
    for flight in sorted(found.values(), key=lambda f: f["t_f"]):
        days, angle = flight["t_f"] * TIME_UNIT_D, flight["longitude_swept"]
        if (
            groups
            and abs(days - groups[-1]["time_d"]) < 0.02
            and abs(angle - groups[-1]["longitude_swept_rad"]) < 0.01
        ):
            groups[-1]["guesses"] += 1
        else:
            groups.append({"time_d": round(days, 2), "longitude_swept_rad": round(angle, 3), "guesses": 1})
    return groups


def grow_shape(program, guess, window):
    """From coplanar circles to the real orbits: eccentricity and inclination grow, each flight guessing the next.

    The departure anomaly stays within `window` of where it began. Steps halve on failure. Returns a flight or None.
    """
    centre = guess["anomaly"][0]
    shape, step, flight = 0.0, 0.1, None
    while True:
        if flight is not None:
            guess = direct.as_guess(flight)
        guess["window"] = max(1e-3, window - abs(guess["anomaly"][0] - centre))
        goal = 0.0 if flight is None else min(1.0, shape + step)
        grown = program.solve(guess, goal, warm=True)
        if grown is not None:
            shape, flight, step = goal, grown, min(0.1, 1.5 * step)
            if shape == 1.0:
                return flight
        elif flight is None or step < 0.02:
            return None
        else:
            step /= 2


def search_orbit(problem):
    """Coplanar flights laid round the whole orbit and grown into the real one, departure held in a window; then freed.

    Flights of three accelerations are laid down, 12 + 6 + 6 of them. Returns (free local optima by name, guesses tried,
    map of the held flights).
    """
    found, tried, held_map = {}, 0, []
    for factor, count in ((1.0, 12), (0.75, 6), (1.4, 6)):
        plane = plane_direct.best_flight(factor * problem.beta, TARGETS_AU[problem.target])
        elements_count = max(30, math.ceil(plane["angle"] / (2 * math.pi) * 20))
        program = direct.Transcription(problem, plane_direct.refined_mesh(plane, elements_count), 5.0)
        window = 1.2 * math.pi / count
        for name, guess in guesses.orbit_guesses(problem, plane, count):
            tried += 1
            held = grow_shape(program, guess, window)
            if held is None:
                continue
            start, name = held["states"][:, 0], f"{factor} x acceleration, {name}"
            held_map.append(
                {
                    "guess": name,
                    "depart_longitude_deg": round(math.degrees(math.atan2(start[1], start[0])) % 360.0, 2),
                    "time_d": round(held["t_f"] * TIME_UNIT_D, 3),
                }
            )
            freed = program.solve(direct.as_guess(held), warm=True)
            if freed is not None:
                found[name] = freed
    return found, tried, held_map


def search_rendezvous(problem, t_plane):
    """Local optima by name from plain curves to many arrival dates, and the number of guesses tried."""
    program = direct.Transcription(problem, np.linspace(0, 1, 31), 2.5)
    found, tried = {}, 0
    for name, guess in guesses.rendezvous_guesses(problem, t_plane):
        tried += 1
        flight = program.solve(guess)
        if flight is not None:
            found[name] = flight
    return found, tried


def spatial_row(problem, found, tried):
    """Refine the fastest of the local optima, shoot from it, and say it as a table row."""
    for name in sorted(found, key=lambda k: found[k]["t_f"]):
        flight = direct.refine(problem, found[name])
        if flight is not None:
            break
    else:
        raise RuntimeError(f"no guess converged: {problem}")
    shot = shooting.solve(problem, flight)
    depart = None
    if problem.rendezvous:
        depart = (datetime.date(2000, 1, 1) + datetime.timedelta(days=problem.depart_d + 0.5)).isoformat()
    start = flight["states"][:, 0]
    row = {
        "kind": "rendezvous" if problem.rendezvous else "orbit",
        "target": problem.target,
        "ac_mm_s2": round(problem.beta * SUN_GRAVITY_1AU_MM_S2, 9),
        "lightness": problem.beta,
        "depart": depart,
        "depart_jd_tdb": elements.J2000_JD_TDB + problem.depart_d if problem.rendezvous else None,
        "vinf_km_s": problem.vinf_km_s,
        "vinf_arrive_km_s": problem.vinf_arrive_km_s,
        "time_d_collocation": round(flight["t_f"] * TIME_UNIT_D, 7),
        "time_d_indirect": round(shot["t_f"] * TIME_UNIT_D, 7),
        "relative_difference": sci(flight["t_f"] / shot["t_f"] - 1.0),
        "vinf_used_km_s": round(float(np.linalg.norm(flight["leave"])) * SPEED_UNIT_KM_S, 6),
        "vinf_arrive_used_km_s": round(float(np.linalg.norm(flight["meet"])) * SPEED_UNIT_KM_S, 6),
        "depart_longitude_deg": round(math.degrees(math.atan2(start[1], start[0])) % 360.0, 5),
        "longitude_swept_rad": round(flight["longitude_swept"], 7),
        "distance_min_au": round(flight["distance_min"], 5),
        "mesh": {
            "elements": flight["elements"],
            "degree": direct.DEGREE,
            "relative_change_when_halved": sci(flight["halved_mesh_change"]),
            "bubble_slack_max": sci(flight["slack"]),
        },
        "indirect": {
            "residual": sci(shot["residual"]),
            "hamiltonian_drift": sci(shot["hamiltonian_drift"]),
            "positive_at_arrival": shot["positive_at_arrival"],
        },
        "guesses": {"tried": tried, "converged": len(found), "used": name},
        "local_optima": local_solutions(found),
    }
    return row


def excess_row(ac, vinf_km_s):
    """Coplanar circle to Mars's circle with a departure excess of at most the given size."""
    beta, excess, r_f = ac / SUN_GRAVITY_1AU_MM_S2, vinf_km_s / SPEED_UNIT_KM_S, TARGETS_AU["mars"]
    flight = plane_direct.best_flight(beta, r_f, None, excess)
    shot = plane_shooting.solve(beta, r_f, flight["first_costate"], flight["t_f"], excess, flight["leave"])
    local = flight["local_times_d"]
    return {
        "kind": "coplanar_excess",
        "target": "mars",
        "r_f_au": r_f,
        "ac_mm_s2": ac,
        "lightness": beta,
        "vinf_km_s": vinf_km_s,
        "time_d_collocation": round(flight["t_f"] * TIME_UNIT_D, 7),
        "time_d_indirect": round(shot["t_f"] * TIME_UNIT_D, 7),
        "relative_difference": sci(flight["t_f"] / shot["t_f"] - 1.0),
        "vinf_used_km_s": round(math.hypot(*shot["leave"]) * SPEED_UNIT_KM_S, 6),
        "vinf_radial_km_s": round(shot["leave"][0] * SPEED_UNIT_KM_S, 6),
        "vinf_transverse_km_s": round(shot["leave"][1] * SPEED_UNIT_KM_S, 6),
        "swept_angle_rad": round(shot["angle"], 8),
        "mesh": {
            "elements": flight["elements"],
            "degree": plane_direct.DEGREE,
            "relative_change_when_halved": sci(flight["halved_mesh_change"]),
            "bubble_slack_max": sci(flight["slack"]),
        },
        "indirect": {"residual": sci(shot["residual"]), "hamiltonian_drift": sci(shot["hamiltonian_drift"])},
        "guesses": {
            "converged": len(local),
            "time_d_min": round(min(local.values()), 4),
            "time_d_max": round(max(local.values()), 4),
        },
    }


class Table:
    """Rows so far, written after each one."""

    def __init__(self):
        self.content = header("Minimum times with real orbits or with excess speed, ideal flat sail", versions())
        self.content["method"] = {
            "direct": "CasADi/IPOPT, Gauss-Legendre collocation of degree 5, Cartesian, force in a convex bubble",
            "indirect": "SciPy DOP853 at rtol 1e-12 and MINPACK hybr, seeded by the direct flight's multipliers",
            "orbits": "JPL approximate elements, table 1; orbit: frozen at J2000; rendezvous: rates applied, arrival state "
            "of the arrival date; earth is the Earth-Moon barycentre",
            "tolerance": 1e-6,
            "tolerance_reason": "both methods agree to better than 1e-8; best of the local optima that the guesses found",
        }
        self.content["cases"] = json.loads(OUT.read_text())["cases"] if OUT.exists() else []

    def add(self, row):
        key = ("kind", "target", "ac_mm_s2", "depart", "vinf_km_s", "vinf_arrive_km_s")
        rows = [r for r in self.content["cases"] if any(r.get(k) != row.get(k) for k in key)] + [row]
        order = ["coplanar_excess", "orbit", "rendezvous"]
        rows.sort(
            key=lambda r: (
                order.index(r["kind"]),
                r["target"],
                -r["ac_mm_s2"],
                r["vinf_km_s"],
                r.get("vinf_arrive_km_s", 0.0),
                r.get("depart") or "",
            )
        )
        self.content["cases"] = rows
        OUT.write_text(json.dumps(self.content, indent=1) + "\n")
        when = row.get("depart") or ""
        print(
            f"{row['kind']} {row['target']} {row['ac_mm_s2']} {when} {row['time_d_collocation']} "
            f"{row['relative_difference']:+.0e} {row.get('local_optima', '')}",
            flush=True,
        )


def rendezvous_problems(target, beta):
    """Six departure dates over one synodic period; for Mars two more with excess allowed at one end."""
    period = elements.synodic_period_d("earth", target)
    problems = []
    for k in range(6):
        date = FIRST_DATE + datetime.timedelta(days=round(k * period / 6))
        problems.append(direct.Problem(target, beta, days_since_j2000(date)))
    if target == "mars":
        problems.append(direct.Problem(target, beta, days_since_j2000(FIRST_DATE), vinf_km_s=2.0))
        problems.append(direct.Problem(target, beta, days_since_j2000(FIRST_DATE), vinf_arrive_km_s=1.0))
    return problems


def main(kinds, targets):
    table = Table()
    if "coplanar_excess" in kinds:
        for ac, vinf in EXCESS_CASES:
            table.add(excess_row(ac, vinf))
    if "rendezvous" in kinds:
        beta = 1.0 / SUN_GRAVITY_1AU_MM_S2
        for target in [t for t in ("mars", "venus") if t in targets]:
            t_plane = plane_direct.best_flight(beta, TARGETS_AU[target])["t_f"]
            for problem in rendezvous_problems(target, beta):
                table.add(spatial_row(problem, *search_rendezvous(problem, t_plane)))
    if "orbit" in kinds:
        for target, ac in [c for c in ORBIT_CASES if c[0] in targets]:
            problem = direct.Problem(target, ac / SUN_GRAVITY_1AU_MM_S2)
            found, tried, held_map = search_orbit(problem)
            row = spatial_row(problem, found, tried)
            row["held_departures"] = held_map
            table.add(row)


if __name__ == "__main__":
    words = sys.argv[1:]
    all_kinds, all_targets = ["coplanar_excess", "rendezvous", "orbit"], ["mars", "venus", "mercury"]
    main([k for k in all_kinds if k in words] or all_kinds, [t for t in all_targets if t in words] or all_targets)
