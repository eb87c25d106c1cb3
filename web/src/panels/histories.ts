// Histories on one time axis, with the time cursor that the orbit picture shares.
import { h, part, table } from "../dom";
import type { Histories } from "../engine/histories";
import { Figure, place, token } from "../figure";
import { NONE, fixed, significant, withUnit } from "../format";
import type { Page } from "./page";

const READOUT: readonly (readonly [string, string, string, number])[] = [
  ["cone_deg", "cone angle", "°", 2],
  ["distance_au", "Sun distance", "au", 4],
  ["speed_km_s", "speed", "km/s", 3],
  ["turn_rate_deg_d", "turn rate", "°/d", 3],
  ["sail_accel_mm_s2", "sail acceleration", "mm/s²", 4],
];

export function mountHistories({ state, client }: Page): void {
  const figure = new Figure(state, client, {
    name: "histories",
    height: (width) => (width < 600 ? 560 : 520),
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
  const values = READOUT.map(([column, name, unit, decimals]) => ({ column, unit, decimals, name, box: h("dd") }));
  const readout = h("dl", { class: "readout" }, ...values.map(({ name, box }) => h("div", {}, h("dt", {}, name), box)));
  const read = () => {
    const histories = state.shown.get()?.histories;
    const at = state.cursor_d.get();
    day.textContent = histories && histories.rows > 0 ? `day ${fixed(at, 1)}` : NONE;
    range.value = String(at);
    range.setAttribute("aria-valuetext", day.textContent);
    for (const { column, unit, decimals, box } of values)
      box.textContent = withUnit(histories ? fixed(histories.at(column, at), decimals) : NONE, unit);
  };
  const behind = h("details", { class: "behind" }, h("summary", {}, "Table behind these curves"));
  const fill = () => {
    if (!behind.open) return;
    behind.querySelector(".frame")?.remove();
    const histories = state.shown.get()?.histories;
    if (histories) behind.append(samples(histories));
  };
  behind.addEventListener("toggle", fill);
  state.shown.watch((shown) => {
    const last = lastDay(shown?.histories);
    range.max = String(last);
    if (state.cursor_d.get() > last) state.cursor_d.set(last);
    read();
    fill();
  });
  state.cursor_d.watch(read);

  part("histories").append(
    h("h2", { id: "histories-title" }, "Histories"),
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

function samples(histories: Histories): HTMLElement {
  const rows = histories.sampled(40).map((i) =>
    h(
      "tr",
      {},
      h("th", { scope: "row" }, fixed(histories.column("t_d")[i], 1)),
      ...READOUT.map(([column]) => h("td", {}, significant(histories.column(column)[i], 5))),
    ),
  );
  return table("Histories, sampled", ["day", ...READOUT.map(([, name, unit]) => `${name}, ${unit}`)], rows);
}
