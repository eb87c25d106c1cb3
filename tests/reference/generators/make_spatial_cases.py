"""Lists of spatial cases: inputs only, seeded, so that success rates mean the same every time.

Writes ../cases_spatial.json: two hundred target orbits for flights with both ends free (mild and wide), and the pairs,
accelerations and dates of 504 rendezvous.
"""

import json
import math
import pathlib
import random

HERE = pathlib.Path(__file__).resolve().parent


def log_uniform(rng, low, high):
    return math.exp(rng.uniform(math.log(low), math.log(high)))


def targets(rng, count, e_max, i_max, ac_low, ac_high):
    rows = []
    for _ in range(count):
        rows.append(
            {
                "a_au": round(log_uniform(rng, 0.3, 5.0), 6),
                "e": round(rng.uniform(0.0, e_max), 6),
                "i_deg": round(rng.uniform(0.0, i_max), 6),
                "node_deg": round(rng.uniform(0.0, 360.0), 6),
                "arg_peri_deg": round(rng.uniform(0.0, 360.0), 6),
                "ac_mm_s2": round(log_uniform(rng, ac_low, ac_high), 6),
            }
        )
    return rows


def main():
    rng = random.Random(20310517)
    cases = {
        "about": "Inputs of spatial cases, seeded (20310517); log-uniform in size and acceleration, uniform otherwise",
        "mild": targets(rng, 100, 0.3, 15.0, 0.3, 3.0),
        "wide": targets(rng, 100, 0.6, 60.0, 0.6, 3.0),
        "rendezvous": {
            "targets": ["mars", "venus", "mercury"],
            "ac_mm_s2": [0.2, 0.3, 0.5, 1.0, 2.0, 4.0, 6.0],
            "dates": 24,
            "first": "2025-01-01",
            "synodic_d": {"mars": 779.9, "venus": 583.9, "mercury": 115.9},
        },
    }
    path = HERE.parent / "cases_spatial.json"
    path.write_text(json.dumps(cases, indent=1) + "\n")


if __name__ == "__main__":
    main()
