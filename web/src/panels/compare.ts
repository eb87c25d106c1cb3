// Sail beside impulsive, line by line, and what each side covers.
import { h, part, row, table } from "../dom";
import type { Impulsive, ImpulsiveWay, Report } from "../engine/report";
import { fixed, withUnit } from "../format";
import type { Page } from "./page";

export function mountCompare({ state }: Page): void {
  const [beside, below] = [h("div"), h("div")];
  part("compare").append(h("h2", { id: "compare-title" }, "Sail beside impulsive"), beside);
  part("covers").append(h("h2", { id: "covers-title" }, "What each side covers"), below);
  state.shown.watch((shown) => {
    if (!shown) return;
    beside.replaceChildren(lines(shown.solved.report));
    below.replaceChildren(covered(shown.solved.report));
  });
}

function ways(impulsive: Impulsive): [string, ImpulsiveWay][] {
  const all: [string, ImpulsiveWay | null][] = [
    ["same start, same end", impulsive.same_start_same_end],
    ["helio\u00adcentric", impulsive.heliocentric],
    ["from parking orbit", impulsive.from_parking],
  ];
  return all.filter((pair): pair is [string, ImpulsiveWay] => pair[1] !== null);
}

function lines(report: Report): HTMLElement {
  const { flight, craft, impulsive, ends } = report;
  const columns = ways(impulsive);
  const each = (text: (way: ImpulsiveWay) => string) => columns.map(([, way]) => text(way));
  const same = (text: string) => columns.map(() => text);
  const radii = [ends.from.semi_major_axis_au, ends.to.semi_major_axis_au];
  const synodic = impulsive.synodic_d === null ? "equal periods" : `every ${withUnit(fixed(impulsive.synodic_d, 1), "d")}`;
  const rows = [
    row("Flight time, d", fixed(flight.time_d, 2), ...each((way) => fixed(way.time_d, 2))),
    row("First impulse, km/s", "none", ...each((way) => fixed(way.dv_depart_km_s, 3))),
    row("Second impulse, km/s", "none", ...each((way) => fixed(way.dv_arrive_km_s, 3))),
    row("Total Δv, km/s", fixed(flight.sail_dv_km_s, 3), ...each((way) => fixed(way.dv_total_km_s, 3))),
    row("Propellant, %", "none", ...each((way) => fixed(100 * way.propellant_fraction, 1))),
    row("Delivered mass, kg", fixed(craft.delivered_kg, 2), ...each((way) => fixed(way.delivered_kg, 2))),
    row("Closest to the Sun, au", fixed(flight.sun_distance_min_au, 4), ...same(fixed(Math.min(...radii), 4))),
    row("Farthest from the Sun, au", fixed(flight.sun_distance_max_au, 4), ...same(fixed(Math.max(...radii), 4))),
    row("Lead angle of the target, °", fixed(flight.lead_angle_deg, 1), ...same(fixed(impulsive.lead_angle_deg, 1))),
    row("Revolutions", fixed(flight.revolutions, 3), ...same("0.500")),
    row("Leaves, to match the orbit", "any day", ...same("any day")),
    row("Leaves, to meet the body", synodic, ...same(synodic)),
    row("Needs", "sunlight", ...same("engine")),
  ];
  return table("Sail beside impulsive", ["", "sail", ...columns.map(([name]) => name)], rows, "compare");
}

function covered(report: Report): HTMLElement {
  const { impulsive, craft, flight } = report;
  const end = flight.status === "flown" ? "until the semi-major axis, or at a constant cone angle the distance, is the target's" : "until the target orbit is matched";
  const term = (name: string, text: string, side: string) => h("div", {}, h("dt", { class: side }, name), h("dd", {}, text));
  return h(
    "div",
    { class: "covers" },
    h(
      "dl",
      {},
      term(
        "sail",
        `From outside the start's gravity, with no excess speed, ${end}; no capture. Escape from the planet is neither counted nor free. Its Δv is the time integral of the sail's acceleration: sunlight, not propellant.`,
        "of-sail",
      ),
      ...ways(impulsive).map(([name, way]) => term(name, way.phases, "of-impulse")),
    ),
    impulsive.from_parking_note !== null && h("p", { class: "help" }, impulsive.from_parking_note),
    craft.delivered_kg === null && h("p", { class: "help" }, "The sail's delivered mass needs area, mass and the sail assembly's mass per area."),
  );
}
