// Histories on one time axis, with the time cursor that the orbit picture shares.
import { h, part, table } from "../dom";
import type { Histories } from "../engine/histories";
import { flightFigure, place, token } from "../figure";
import { NONE, fixed, significant, withUnit } from "../format";
import { valueOf } from "../link";
import type { Page } from "./page";

interface Line {
  column: string;
  name: string;
  unit: string;
  decimals: number;
  /** Drawn as a panel only when asked for. */
  extra?: boolean;
}

/** What the cursor reads out and the table lists, where a flight has it; the figure draws the same in this order. */
const LINES: readonly Line[] = [
  { column: "cone_deg", name: "cone angle", unit: "°", decimals: 2 },
  { column: "clock_deg", name: "clock angle", unit: "°", decimals: 2 },
  { column: "distance_au", name: "Sun distance", unit: "au", decimals: 4 },
  { column: "speed_km_s", name: "speed", unit: "km/s", decimals: 3 },
  { column: "turn_rate_deg_d", name: "turn rate", unit: "°/d", decimals: 3 },
  { column: "sail_accel_mm_s2", name: "sail acceleration", unit: "mm/s²", decimals: 4, extra: true },
  { column: "film_temp_k", name: "film temperature", unit: "K", decimals: 0, extra: true },
  { column: "earth_range_au", name: "Earth distance", unit: "au", decimals: 4, extra: true },
  { column: "sun_earth_craft_deg", name: "Sun–Earth–craft angle", unit: "°", decimals: 1, extra: true },
];

/** Height of a panel with its name, CSS pixels; the time axis comes on top. */
const PANEL_PX = 122;

export function mountHistories({ state, client }: Page): void {
  const wanted = new Set(LINES.filter((line) => !line.extra).map((line) => line.column));
  const tells = ({ column }: Line): boolean => {
    const shown = state.shown.get();
    // On circles the sign of the cone angle says all that a clock angle would.
    if (column === "clock_deg" && valueOf(shown?.link ?? "", "geometry") !== "spatial") return false;
    return shown?.histories.has(column) ?? false;
  };
  const drawn = () => LINES.filter((line) => wanted.has(line.column) && tells(line)).map((line) => line.column);
  const figure = flightFigure(state, client, "histories", {
    height: () => 32 + PANEL_PX * Math.max(1, drawn().length),
    view: () => ({ panels: drawn() }),
    overlay: (context, panels) => {
      const histories = state.shown.get()?.histories;
      if (!histories || histories.rows === 0) return;
      const day = state.cursor_d.get();
      for (const panel of panels) {
        const value = histories.at(panel.column, day);
        const [left, top] = place(panel, day, value);
        context.strokeStyle = token("ink");
        context.lineWidth = 1;
        context.beginPath();
        context.moveTo(left, panel.top);
        context.lineTo(left, panel.top + panel.height);
        context.stroke();
        // A turn rate may leave its panel near a fast swing: no dot outside.
        if (!(value >= panel.y_min && value <= panel.y_max)) continue;
        context.fillStyle = token("sail");
        context.strokeStyle = token("sheet");
        context.lineWidth = 2;
        context.beginPath();
        context.arc(left, top, 4.5, 0, 2 * Math.PI);
        context.fill();
        context.stroke();
      }
    },
  });
  const pick = (event: PointerEvent) => {
    const panel = figure.panels[0];
    if (!panel) return;
    const left = event.clientX - figure.frame.getBoundingClientRect().left;
    const day = panel.x_min + ((left - panel.left) / panel.width) * (panel.x_max - panel.x_min);
    state.cursor_d.set(Math.min(lastDay(state.shown.get()?.histories), Math.max(0, day)));
  };
  figure.frame.addEventListener("pointermove", pick);
  figure.frame.addEventListener("pointerdown", pick);

  const range = h("input", { type: "range", id: "cursor", min: 0, max: 1, step: "any", value: 0 });
  range.addEventListener("input", () => state.cursor_d.set(Number(range.value)));
  range.addEventListener("keydown", (event) => {
    const steps = { ArrowRight: 1, ArrowUp: 1, ArrowLeft: -1, ArrowDown: -1, PageUp: 20, PageDown: -20 }[event.key];
    if (steps === undefined) return;
    event.preventDefault();
    const last = lastDay(state.shown.get()?.histories);
    state.cursor_d.set(Math.min(last, Math.max(0, state.cursor_d.get() + (steps * last) / 200)));
  });
  const day = h("output", { for: "cursor", class: "day" });
  const values = LINES.map((line) => {
    const value = h("dd");
    return { line, value, box: h("div", {}, h("dt", {}, line.name), value) };
  });
  const readout = h("dl", { class: "readout" }, ...values.map(({ box }) => box));
  const picks = LINES.map((line) => {
    const pick = h("input", { type: "checkbox", name: line.column });
    pick.checked = wanted.has(line.column);
    pick.addEventListener("change", () => {
      // One curve stays: without any there is no figure.
      if (drawn().length === 1 && wanted.has(line.column)) pick.checked = true;
      if (pick.checked) wanted.add(line.column);
      else wanted.delete(line.column);
      figure.redraw();
    });
    return { line, box: h("label", { class: "choice" }, pick, line.name) };
  });
  const read = () => {
    const histories = state.shown.get()?.histories;
    const at = state.cursor_d.get();
    day.textContent = histories && histories.rows > 0 ? `day ${fixed(at, 1)}` : NONE;
    range.value = String(at);
    range.setAttribute("aria-valuetext", day.textContent);
    for (const { line, value } of values)
      value.textContent = withUnit(histories ? fixed(histories.at(line.column, at), line.decimals) : NONE, line.unit);
  };
  const behind = h("details", { class: "behind" }, h("summary", {}, "Table behind these curves"));
  const fill = () => {
    if (!behind.open) return;
    behind.querySelector(".frame")?.remove();
    const histories = state.shown.get()?.histories;
    if (histories) behind.append(samples(histories, LINES.filter(tells)));
  };
  behind.addEventListener("toggle", fill);
  state.shown.watch((shown) => {
    const last = lastDay(shown?.histories);
    range.max = String(last);
    if (state.cursor_d.get() > last) state.cursor_d.set(last);
    for (const { line, box } of [...values, ...picks]) box.hidden = !tells(line);
    read();
    fill();
  });
  state.cursor_d.watch(read);

  part("histories").append(
    h(
      "div",
      { class: "head" },
      h("h2", { id: "histories-title" }, "Histories"),
      h("fieldset", { class: "ways" }, h("legend", { class: "unseen" }, "Curves shown"), ...picks.map(({ box }) => box)),
    ),
    figure.frame,
    h("div", { class: "cursor" }, h("label", { for: "cursor" }, "Time cursor"), range, day),
    readout,
    behind,
  );
}

function lastDay(histories: Histories | undefined): number {
  const times = histories?.column("t_d");
  return times?.[times.length - 1] ?? 0;
}

function samples(histories: Histories, lines: readonly Line[]): HTMLElement {
  const rows = histories.sampled(40).map((i) =>
    h(
      "tr",
      {},
      h("th", { scope: "row" }, fixed(histories.column("t_d")[i], 1)),
      ...lines.map(({ column }) => h("td", {}, significant(histories.column(column)[i], 5))),
    ),
  );
  return table("Histories, sampled", ["day", ...lines.map(({ name, unit }) => `${name}, ${unit}`)], rows);
}
