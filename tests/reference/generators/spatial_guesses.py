"""First guesses for the spatial flights: plain curves between the two orbits, and coplanar flights turned about."""

import math

import numpy as np

import elements
from constants import TIME_UNIT_D

CONE_RAD = math.radians(35.264)  # of the constant force that every guess carries, forward or backward


def curve(first, last, turn, bulge):
    """A path from one position to another through `turn` radians of longitude.

    Distance eases from the first to the last with an additional half sine of height `bulge` [au]; height over the
    ecliptic grows linearly; velocity is circular. Returns a function of fractions in 0..1 giving 9 rows.
    """
    r_0, r_1 = np.linalg.norm(first[:2]), np.linalg.norm(last[:2])
    longitude = math.atan2(first[1], first[0])

    def path(at):
        at = np.asarray(at, dtype=float)
        ease = at * at * (3 - 2 * at)
        r = r_0 + (r_1 - r_0) * ease + bulge * np.sin(np.pi * at)
        theta = longitude + turn * at
        c, s = np.cos(theta), np.sin(theta)
        speed = r**-0.5
        radial, along = (
            math.cos(CONE_RAD) ** 3,
            math.copysign(math.cos(CONE_RAD) ** 2 * math.sin(CONE_RAD), r_1 - r_0),
        )
        return np.array(
            [
                r * c,
                r * s,
                first[2] + (last[2] - first[2]) * at,
                -speed * s,
                speed * c,
                0 * at,
                radial * c - along * s,
                radial * s + along * c,
                0 * at,
            ]
        )

    return path


def natural_turn(first, last, bulge, t_f):
    """Longitude that circular speed along such a curve would sweep [rad]."""
    at = np.linspace(0, 1, 201)
    states = curve(first, last, 0.0, bulge)(at)
    return t_f * np.trapezoid(np.linalg.norm(states[:2], axis=0) ** -1.5, at)


def lifted(flight, longitude):
    """A coplanar direct solution laid into the ecliptic, starting at a longitude [rad]."""
    s, (r, u, v) = flight["s_inner"], flight["inner"]
    pace = v / r * flight["t_f"]
    theta = longitude + np.concatenate([[0.0], np.cumsum(0.5 * (pace[1:] + pace[:-1]) * np.diff(s))])
    rows = np.vstack([r, u, v, theta, flight["force"]])

    def path(at):
        r, u, v, theta, radial, along = (np.interp(at, s, row) for row in rows)
        c, d = np.cos(theta), np.sin(theta)
        flat = np.zeros(len(r))
        return np.array(
            [
                r * c,
                r * d,
                flat,
                u * c - v * d,
                u * d + v * c,
                flat,
                radial * c - along * d,
                radial * d + along * c,
                flat,
            ]
        )

    return path, float(theta[-1])


def orbit_guesses(problem, plane, longitudes):
    """A coplanar flight (`plane`) laid from points all round the orbit."""
    _, _, _, _, arg, node = elements.elements_at("earth", 0.0)
    _, _, _, _, arg_target, node_target = elements.elements_at(problem.target, 0.0)
    for k in range(longitudes):
        longitude = 2 * math.pi * k / longitudes
        path, arrival = lifted(plane, longitude)
        yield (
            f"from {math.degrees(longitude):.0f} deg",
            {
                "t_f": plane["t_f"],
                "anomaly": np.array([longitude - arg - node, arrival - arg_target - node_target]),
                "path": path,
            },
        )


def rendezvous_guesses(problem, t_plane, stretches=(0.9, 1.2, 1.6, 2.1, 2.7), bulges=(0.0, 0.25, -0.2)):
    """Arrival dates over more than a synodic period; for each the turns that meet the target near circular pace."""
    first = elements.state_at("earth", problem.depart_d)[:3]
    for stretch in stretches:
        t_f = stretch * t_plane
        days = problem.depart_d + t_f * TIME_UNIT_D
        last = elements.state_at(problem.target, days)[:3]
        _, e, _, mean, _, _ = elements.elements_at(problem.target, days)
        gap = math.atan2(last[1], last[0]) - math.atan2(first[1], first[0])
        for bulge, more in [(b, 0) for b in bulges] + [(0.0, -1), (0.0, 1)]:
            natural = natural_turn(first, last, bulge, t_f)
            turn = gap + 2 * math.pi * (round((natural - gap) / (2 * math.pi)) + more)
            if turn <= 0.5:
                continue
            yield (
                f"time x {stretch}, bulge {bulge} au, {more:+d} turns",
                {
                    "t_f": t_f,
                    "anomaly": np.array([0.0, elements.eccentric_anomaly(mean, e)]),
                    "path": curve(first, last, turn, bulge),
                },
            )
