"""Writes planet_positions.json: heliocentric states of the eight planets from the numerical ephemeris DE421.

DE421 (Folkner, Williams & Boggs, JPL 2008) comes as the PyPI package de421 and is read with jplephem. Its axes are those
of the ICRF; they are turned about x by the J2000 obliquity 84381.448 arcsec (IAU 1976) into the mean ecliptic and
equinox of J2000. "earth" is the Earth-Moon barycentre, the giants are their systems' barycentres. Time is TDB.
"""

import importlib.metadata
import json
import math
import pathlib

import de421
import numpy as np
from jplephem import Ephemeris

from constants import AU_M, DAY_S
from elements import J2000_JD_TDB, state_at

OUT = pathlib.Path(__file__).resolve().parents[1] / "planet_positions.json"
OBLIQUITY_RAD = math.radians(84381.448 / 3600.0)
NAMES = {
    "mercury": "mercury",
    "venus": "venus",
    "earth": "earthmoon",
    "mars": "mars",
    "jupiter": "jupiter",
    "saturn": "saturn",
    "uranus": "uranus",
    "neptune": "neptune",
}
# 1900-01-01 to 2047 in equal steps of 5.095 years, so that the Earth is met in every season, and J2000 itself.
EPOCHS_JD_TDB = [2415020.5 + 1861.0 * k for k in range(30)] + [2451545.0]


# Errors that JPL states for the approximate elements over 1800-2050: longitude ["], latitude ["], distance [1000 km].
STATED_ERRORS = {
    "mercury": [15, 1, 1],
    "venus": [20, 1, 4],
    "earth": [20, 8, 6],
    "mars": [40, 2, 25],
    "jupiter": [400, 10, 600],
    "saturn": [600, 25, 1500],
    "uranus": [50, 2, 1000],
    "neptune": [10, 1, 200],
}


def to_ecliptic(vector):
    cos, sin = math.cos(OBLIQUITY_RAD), math.sin(OBLIQUITY_RAD)
    x, y, z = vector
    return [x, cos * y + sin * z, -sin * y + cos * z]


def state(ephemeris, name, jd_tdb):
    """Heliocentric ecliptic position [km] and velocity [km/s]."""
    body = ephemeris.position_and_velocity(NAMES[name], jd_tdb)
    sun = ephemeris.position_and_velocity("sun", jd_tdb)
    position, velocity = (np.ravel(b) - np.ravel(s) for b, s in zip(body, sun))
    return to_ecliptic(position), to_ecliptic(velocity / DAY_S)


def spherical(vector):
    x, y, z = (float(c) for c in vector)
    return math.atan2(y, x), math.atan2(z, math.hypot(x, y)), math.sqrt(x * x + y * y + z * z)


def largest_difference(ephemeris, name):
    """Longitude ["], latitude ["] and distance [1000 km] of the approximate elements against DE421."""
    worst = np.zeros(3)
    for jd in np.linspace(2415021.0, 2469000.0, 3000):
        found = spherical(state_at(name, jd - J2000_JD_TDB)[:3])
        true = spherical(np.array(state(ephemeris, name, jd)[0]) * 1000.0 / AU_M)
        turn = math.remainder(found[0] - true[0], 2 * math.pi)
        gap = [math.degrees(turn) * 3600, math.degrees(found[1] - true[1]) * 3600, (found[2] - true[2]) * AU_M / 1e6]
        worst = np.maximum(worst, np.abs(gap))
    return [round(float(w), 1) for w in worst]


def main():
    ephemeris = Ephemeris(de421)
    rows = []
    for jd in EPOCHS_JD_TDB:
        for name in NAMES:
            position, velocity = state(ephemeris, name, jd)
            rows.append(
                {
                    "planet": name,
                    "jd_tdb": jd,
                    "position_au": [round(float(x) * 1000.0 / AU_M, 11) for x in position],
                    "velocity_km_s": [round(float(v), 8) for v in velocity],
                }
            )
    table = {
        "about": "Heliocentric states, mean ecliptic and equinox of J2000, TDB, from DE421; earth is the Earth-Moon barycentre",
        "source": "DE421 (Folkner, Williams, Boggs, JPL IOM 343R-08-003, 2008), numerical ephemeris",
        "mark": "published",
        "versions": {p: importlib.metadata.version(p) for p in ("de421", "jplephem")},
        "au_m": AU_M,
        "obliquity_arcsec": 84381.448,
        "approximate_elements": {
            "about": "Largest difference between the approximate elements (elements.py) and DE421, 3000 dates 1900-2047: "
            "longitude and latitude in arcsec, distance in 1000 km; beside the errors stated with the elements, which are "
            "typical. The outer planets' elements follow the motion about the barycentre of the solar system: about the "
            "Sun they miss by the Sun's own shift of up to 0.01 au",
            "rows": [
                {"planet": name, "stated": STATED_ERRORS[name], "largest": largest_difference(ephemeris, name)}
                for name in NAMES
            ],
        },
    }
    body = ",\n".join("  " + json.dumps(row) for row in rows)
    OUT.write_text(json.dumps(table, indent=1)[:-2] + ',\n "states": [\n' + body + "\n ]\n}\n")


if __name__ == "__main__":
    main()
