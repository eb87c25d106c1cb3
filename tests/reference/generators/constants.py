"""Constants and target radii shared by every generator in this folder.

Canonical units: length 1 au, gravitational parameter of the Sun 1, hence time sqrt(au^3 / mu).
"""

import math

MU_SUN_M3_S2 = 1.32712440018e20
AU_M = 149_597_870_700.0  # IAU 2012 Resolution B2
DAY_S = 86_400.0

TIME_UNIT_D = math.sqrt(AU_M**3 / MU_SUN_M3_S2) / DAY_S  # 58.132441 d
SPEED_UNIT_KM_S = AU_M / (TIME_UNIT_D * DAY_S) / 1000.0
SUN_GRAVITY_1AU_MM_S2 = MU_SUN_M3_S2 / AU_M**2 * 1000.0  # 5.930084 mm/s^2

# Semi-major axes of JPL's approximate elements (Standish, table 1, 1800-2050); the start is exactly 1 au.
TARGETS_AU = {
    "mercury": 0.38709927,
    "venus": 0.72333566,
    "mars": 1.52371034,
    "jupiter": 5.20288700,
}


def header(about, versions):
    """Fields that open every generated table: what it is, the constants and the tool versions."""
    return {
        "about": about,
        "mark": "computed",
        "constants": {
            "mu_sun_m3_s2": MU_SUN_M3_S2,
            "au_m": AU_M,
            "day_s": DAY_S,
            "time_unit_d": TIME_UNIT_D,
            "speed_unit_km_s": SPEED_UNIT_KM_S,
            "sun_gravity_1au_mm_s2": SUN_GRAVITY_1AU_MM_S2,
        },
        "versions": versions,
    }
