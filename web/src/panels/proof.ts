// The evidence for the flight, and the constants and numbers it rests on.
import { h, part, table } from "../dom";
import type { Report } from "../engine/report";
import { NONE, fixed, significant, withUnit } from "../format";
import type { Page } from "./page";

const SECOND_ORDER = { passed: "passed", failed: "failed: not a minimum", not_tested: "not tested" } as const;

export function mountProof({ state }: Page): void {
  const body = h("div");
  part("proof").append(h("h2", { id: "proof-title" }, "Proof"), body);
  state.shown.watch((shown) => {
    if (shown) body.replaceChildren(...evidence(shown.solved.report));
  });
}

function evidence(report: Report): HTMLElement[] {
  const { proof, branches, jumps, status, final_eccentricity } = report.flight;
  const { craft } = report;
  const { constants } = report.program;
  const line = (name: string, text: string) => h("div", {}, h("dt", {}, name), h("dd", {}, text));
  const number = (value: number | null, unit: string, digits = 3) => withUnit(significant(value, digits), unit);
  return [
    h("p", {}, proof.method),
    h(
      "dl",
      { class: "facts" },
      line("Status", status.replace("_", " ")),
      line("Misses the target by, re-flown", `${number(proof.position_error_km, "km")} and ${number(proof.speed_error_m_s, "m/s")}`),
      line("Drift of the Hamiltonian", number(proof.hamiltonian_drift, "")),
      line("Extremals found", String(proof.extremals_found)),
      line("Second-order test", SECOND_ORDER[proof.second_order]),
      line("Eccentricity at the end", significant(final_eccentricity, 3)),
      line(
        "Attitude jumps",
        jumps.length === 0 ? "none" : jumps.map((jump) => `${fixed(jump.angle_deg, 1)}° at day ${fixed(jump.time_d, 1)}`).join(", "),
      ),
    ),
    h(
      "p",
      { class: "help" },
      "Converged means: re-flown at a tolerance of 1e-13, the arrival misses by at most 1e-7 of the target's distance and speed, and the Hamiltonian drifts by at most 1e-8 and is positive at arrival. That is a proven extremal and the best of those found, not a proof that no better flight exists.",
    ),
    branches.length > 1
      ? table(
          "Extremals found",
          ["flight time, d", "revolutions", ""],
          branches.map((branch) =>
            h("tr", {}, h("th", { scope: "row" }, fixed(branch.time_d, 2)), h("td", {}, fixed(branch.revolutions, 3)), h("td", {}, branch.best ? "the one shown" : "")),
          ),
        )
      : h("span", { hidden: true }),
    h("h3", {}, "Force and constants"),
    h(
      "dl",
      { class: "facts" },
      line("Characteristic acceleration", number(craft.ac_mm_s2, "mm/s²", 6)),
      line("Lightness number", number(craft.lightness, "", 6)),
      line("Head-on force over an ideal mirror's", number(craft.efficiency, "", 4)),
      line("Total loading", craft.loading_g_m2 === null ? NONE : number(craft.loading_g_m2, "g/m²", 4)),
      line("Irradiance at 1 au", number(constants.irradiance_w_m2, "W/m²", 5)),
      line("Radiation pressure at 1 au, black surface", number(constants.pressure_n_m2, "N/m²", 5)),
      line("Sun's gravity at 1 au", number(constants.sun_gravity_mm_s2, "mm/s²", 7)),
      line("Sun's gravitational parameter", number(constants.sun_gm_km3_s2, "km³/s²", 12)),
      line("Astronomical unit", withUnit(fixed(constants.au_km, 1), "km")),
      line("Standard gravity, for specific impulse", number(constants.g0_m_s2, "m/s²", 6)),
    ),
  ];
}
