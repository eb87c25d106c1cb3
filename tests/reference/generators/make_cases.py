"""Writes cases_500.json: the seeded list of coplanar cases that the solver must all converge on.

460 cases: target radius log-uniform in 0.2-40 au; 40 cases: within 1 % of the start at 1 au, on both sides.
Characteristic acceleration log-uniform in 0.05-6 mm/s^2 throughout. Inputs only: no answers.
"""

import json
import math
import pathlib
import random

SEED = 20_301_107
OUT = pathlib.Path(__file__).resolve().parents[1] / "cases_500.json"


def six_digits(value):
    return float(f"{value:.6g}")


def log_uniform(rng, low, high):
    return math.exp(rng.uniform(math.log(low), math.log(high)))


def main():
    rng = random.Random(SEED)
    cases = []
    for _ in range(460):
        cases.append((log_uniform(rng, 0.2, 40.0), log_uniform(rng, 0.05, 6.0)))
    for k in range(40):
        side = 1.0 if k % 2 == 0 else -1.0
        cases.append((1.0 + side * log_uniform(rng, 1e-4, 1e-2), log_uniform(rng, 0.05, 6.0)))
    rng.shuffle(cases)
    rows = [{"r_f_au": six_digits(r), "ac_mm_s2": six_digits(a)} for r, a in cases]
    head = {
        "about": "500 coplanar circle-to-circle cases from 1 au, inputs only",
        "seed": SEED,
        "r_f_au": "460 log-uniform 0.2-40; 40 within 1 % of 1 au, |r_f - 1| log-uniform 1e-4..1e-2, both sides",
        "ac_mm_s2": "log-uniform 0.05-6",
    }
    body = ",\n".join("    " + json.dumps(row) for row in rows)
    text = json.dumps(head, indent=2)[:-2] + ',\n  "cases": [\n' + body + "\n  ]\n}\n"
    OUT.write_text(text)


if __name__ == "__main__":
    main()
