// The same answers from the command line and from WebAssembly.
import assert from "node:assert/strict";
import { execFileSync } from "node:child_process";
import test from "node:test";
import { openCore, path } from "../support.mjs";

const core = await openCore();
const cli = path(process.env.SUNREACH ?? "target/quick/sunreach");
const native = (link) => JSON.parse(execFileSync(cli, ["solve", link], { encoding: "utf8", maxBuffer: 1e8 }));
const LINKS = ["", "to=venus&ac_mm_s2=0.3", "to=mercury&ac_mm_s2=2", "steer=local", "steer=fixed&cone_deg=30", "to=earth", "vinf_km_s=2", "geometry=spatial&arrive=rendezvous&depart=2031-02-01&ac_mm_s2=1"];

/** Numbers that are residuals: rounding alone decides them. */
const RESIDUALS = ["position_error_km", "speed_error_m_s", "hamiltonian_drift", "final_eccentricity"];

// sin, cos, exp and atan2 differ in the last place between the two targets, hence a tolerance: measured spread of
// flight times below 1e-10, kept at 1e-9; angles and turn rates at jumps are more sensitive.
function compare(a, b, where) {
  if (typeof a === "number" && typeof b === "number") {
    const name = where.split(".").at(-1);
    if (RESIDUALS.includes(name)) return;
    // The largest turn rate is read at the samples, whose times move with the integrator's steps.
    // A least is flat: what it lies at is known to the square root of what it is.
    const isLeast = where.includes(".dated.");
    const allowed = name === "time_d" && !isLeast ? 1e-9 : name === "turn_rate_max_deg_d" ? 1e-4 : 1e-6;
    assert.ok(Math.abs(a - b) <= allowed * Math.max(1, Math.abs(a)), `${where}: ${a} and ${b}`);
  } else if (a && b && typeof a === "object") {
    assert.deepEqual(Object.keys(a).sort(), Object.keys(b).sort(), where);
    for (const key of Object.keys(a)) compare(a[key], b[key], `${where}.${key}`);
  } else assert.equal(a, b, where);
}

for (const link of LINKS)
  test(`command line and page agree on '${link}'`, () => compare(native(link), core.solve(link).report, "report"));
