// Sail beside impulsive, line by line, and what each side covers.
import { h, part, row, table } from "../dom";
import type { DatedTransfer, Impulsive, ImpulsiveWay, Report } from "../engine/report";
import { NONE, fixed, withUnit } from "../format";
import { valueOf } from "../link";
import type { Page } from "./page";

export function mountCompare({ state }: Page): void {
  const [beside, below] = [h("div"), h("div")];
  part("compare").append(h("h2", { id: "compare-title" }, "Sail beside impulsive"), beside);
  part("covers").append(h("h2", { id: "covers-title" }, "What each side covers"), below);
  state.shown.watch((shown) => {
    if (!shown) return;
    const { report } = shown.solved;
    const dated = transfers(report.impulsive);
    // Dates compare like with like: the circles then stand back.
    beside.replaceChildren(dated.length > 0 ? onDates(report, dated) : onCircles(report, true));
    below.replaceChildren(covered(report, dated), ...(dated.length > 0 ? [h("h3", {}, "Impulsive between circles, on no date"), onCircles(report, false)] : []));
  });
}

/** Whether a speed, km/s, shows in the table's digits; what a solver leaves over does not. */
const isSeen = (speed_km_s: number | null) => (speed_km_s ?? 0) >= 0.0005;

function ways(impulsive: Impulsive): [string, ImpulsiveWay][] {
  const all: [string, ImpulsiveWay | null][] = [
    ["same start, same end", impulsive.same_start_same_end],
    ["helio\u00adcentric", impulsive.heliocentric],
    ["from parking orbit", impulsive.from_parking],
  ];
  return all.filter((pair): pair is [string, ImpulsiveWay] => pair[1] !== null);
}

function transfers(impulsive: Impulsive): [string, DatedTransfer][] {
  const all: [string, DatedTransfer | null][] = [
    ["two impulses, least Δv", impulsive.dated],
    ["two impulses, the sail’s dates", impulsive.dated_same_dates],
  ];
  return all.filter((pair): pair is [string, DatedTransfer] => pair[1] !== null);
}

/** Transfers between the orbits as they are. */
function onDates(report: Report, columns: [string, DatedTransfer][]): HTMLElement {
  const { flight, craft } = report;
  const seen = flight.earth_view;
  const each = (text: (way: DatedTransfer) => string) => columns.map(([, way]) => text(way));
  const day = (text: string | null) => h("span", { class: "date" }, text?.slice(0, 10) ?? NONE);
  const sailOnly = (name: string, text: string) => row(name, text, ...columns.map(() => NONE));
  const light_min = seen ? seen.light_time_max_s / 60 : null;
  const rows = [
    row("Departure, TDB", day(flight.depart), ...columns.map(([, way]) => day(way.depart))),
    row("Arrival, TDB", day(flight.arrive), ...columns.map(([, way]) => day(way.arrive))),
    row("Flight time, d", fixed(flight.time_d, 2), ...each((way) => fixed(way.time_d, 2))),
    row("C3, km²/s²", fixed(flight.c3_km2_s2, 2), ...each((way) => fixed(way.c3_km2_s2, 2))),
    row("Excess at departure, km/s", fixed(flight.vinf_used_km_s, 3), ...each((way) => fixed(Math.sqrt(way.c3_km2_s2), 3))),
    row("Excess at arrival, km/s", fixed(flight.vinf_arrive_km_s, 3), ...each((way) => fixed(way.vinf_arrive_km_s, 3))),
    row("First impulse, km/s", "none", ...each((way) => fixed(way.dv_depart_km_s, 3))),
    row("Second impulse, km/s", "none", ...each((way) => fixed(way.dv_arrive_km_s, 3))),
    row("Total Δv, km/s", fixed(flight.sail_dv_km_s, 3), ...each((way) => fixed(way.dv_total_km_s, 3))),
    row("Propellant, %", "none", ...each((way) => fixed(100 * way.propellant_fraction, 1))),
    row("Delivered mass, kg", fixed(craft.delivered_kg, 2), ...each((way) => fixed(way.delivered_kg, 2))),
    row("Revolutions", fixed(flight.revolutions, 3), ...each((way) => `${fixed(way.revolutions, 3)}${way.direction === "retrograde" ? ", retrograde" : ""}`)),
    row("Phase of the target at departure, °", fixed(seen?.phase_depart_deg, 1), ...each((way) => fixed(way.phase_depart_deg, 1))),
    sailOnly("Phase of the target at arrival, °", fixed(seen?.phase_arrive_deg, 1)),
    sailOnly("Closest to the Sun, au", fixed(flight.sun_distance_min_au, 4)),
    sailOnly("Farthest from the Sun, au", fixed(flight.sun_distance_max_au, 4)),
    sailOnly("Earth distance at arrival, au", fixed(seen?.range_arrive_au, 4)),
    sailOnly("Largest Earth distance, au", fixed(seen?.range_max_au, 4)),
    sailOnly("Light time there, min", fixed(light_min, 2)),
    sailOnly("Least Sun–Earth–craft angle, °", fixed(seen?.sun_earth_craft_min_deg, 1)),
  ];
  return table("Sail beside impulsive, on dates", ["", "sail", ...columns.map(([name]) => name)], rows, "compare dated");
}

/** Transfers between circles; the sail's own column is there unless another table has it. */
function onCircles(report: Report, withSail: boolean): HTMLElement {
  const { flight, craft, impulsive, ends } = report;
  const columns = ways(impulsive);
  const each = (text: (way: ImpulsiveWay) => string) => columns.map(([, way]) => text(way));
  const same = (text: string) => columns.map(() => text);
  const line = (name: string, sail: string, texts: string[]) => (withSail ? row(name, sail, ...texts) : row(name, ...texts));
  const radii = [ends.from.semi_major_axis_au, ends.to.semi_major_axis_au];
  const synodic = impulsive.synodic_d === null ? "equal periods" : `every ${withUnit(fixed(impulsive.synodic_d, 1), "d")}`;
  const onExcess = withSail && (isSeen(flight.vinf_used_km_s) || isSeen(flight.vinf_arrive_km_s));
  const rows = [
    line("Flight time, d", fixed(flight.time_d, 2), each((way) => fixed(way.time_d, 2))),
    onExcess && line("C3, km²/s²", fixed(flight.c3_km2_s2, 2), same(NONE)),
    onExcess && line("Excess at departure, km/s", fixed(flight.vinf_used_km_s, 3), same(NONE)),
    onExcess && line("Excess at arrival, km/s", fixed(flight.vinf_arrive_km_s, 3), same(NONE)),
    line("First impulse, km/s", "none", each((way) => fixed(way.dv_depart_km_s, 3))),
    line("Second impulse, km/s", "none", each((way) => fixed(way.dv_arrive_km_s, 3))),
    line("Total Δv, km/s", fixed(flight.sail_dv_km_s, 3), each((way) => fixed(way.dv_total_km_s, 3))),
    line("Propellant, %", "none", each((way) => fixed(100 * way.propellant_fraction, 1))),
    line("Delivered mass, kg", fixed(craft.delivered_kg, 2), each((way) => fixed(way.delivered_kg, 2))),
    line("Closest to the Sun, au", fixed(flight.sun_distance_min_au, 4), same(fixed(Math.min(...radii), 4))),
    line("Farthest from the Sun, au", fixed(flight.sun_distance_max_au, 4), same(fixed(Math.max(...radii), 4))),
    line("Lead angle of the target, °", fixed(flight.lead_angle_deg, 1), same(fixed(impulsive.lead_angle_deg, 1))),
    line("Revolutions", fixed(flight.revolutions, 3), same("0.500")),
    line("Leaves, to match the orbit", "any day", same("any day")),
    line("Leaves, to meet the body", synodic, same(synodic)),
    line("Needs", "sunlight", same("engine")),
  ].filter((line) => line !== false);
  return table(
    "Sail beside impulsive, between circles",
    ["", ...(withSail ? ["sail"] : []), ...columns.map(([name]) => name)],
    rows,
    withSail ? "compare" : "compare engines",
  );
}

function covered(report: Report, dated: [string, DatedTransfer][]): HTMLElement {
  const { impulsive, craft, flight } = report;
  const met = valueOf(report.link, "arrive") === "rendezvous" ? "until the body is met, place and velocity" : "until the target orbit is matched";
  const end = flight.status === "flown" ? "until the semi-major axis, or at a constant cone angle the distance, is the target's" : met;
  const excess = isSeen(flight.vinf_used_km_s) ? `with ${fixed(flight.vinf_used_km_s, 3)} km/s of excess speed` : "with no excess speed";
  const left = isSeen(flight.vinf_arrive_km_s) ? `, but for ${fixed(flight.vinf_arrive_km_s, 3)} km/s of excess speed` : "";
  const term = (name: string, text: string, side: string) => h("div", {}, h("dt", { class: side }, name), h("dd", {}, text));
  return h(
    "div",
    { class: "covers" },
    h(
      "dl",
      {},
      term(
        "sail",
        `From outside the start's gravity, ${excess}, ${end}${left}; no capture. Escape from the planet is neither counted nor free. Its Δv is the time integral of the sail's acceleration: sunlight, not propellant.`,
        "of-sail",
      ),
      ...dated.map(([name, way]) => term(name, `Searched: ${way.span}. Counted: ${way.phases}.`, "of-impulse")),
      ...ways(impulsive).map(([name, way]) => term(dated.length > 0 ? `between circles, ${name}` : name, way.phases, "of-impulse")),
    ),
    impulsive.from_parking_note !== null && h("p", { class: "help" }, impulsive.from_parking_note),
    craft.delivered_kg === null && h("p", { class: "help" }, "The sail's delivered mass needs area, mass and the sail assembly's mass per area."),
  );
}
