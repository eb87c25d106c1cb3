// The orbit picture: zoom and pan by wheel, drag, keys and buttons; the craft at the time cursor.
import { h, part, table } from "../dom";
import type { Histories } from "../engine/histories";
import { Figure, place, token, type View } from "../figure";
import { fixed } from "../format";
import type { Page } from "./page";

const WHOLE: View = { zoom: 1, pan_x_au: 0, pan_y_au: 0 };
const ZOOM_STEP = 1.4;
const LARGEST_ZOOM = 60;
/** Part of the picture's width that one press moves it by. */
const PAN_STEP = 0.15;
/** The pointer takes the cursor to the path from this far, CSS pixels. */
const REACH_PX = 26;

export function mountOrbit({ state, client }: Page): void {
  let view = WHOLE;
  const figure = new Figure(state, client, {
    name: "orbit",
    height: (width) => Math.min(width, Math.max(320, innerHeight - 120)),
    view: () => view,
    overlay: (context, panels) => {
      const panel = panels[0];
      const shown = state.shown.get();
      if (!panel || !shown || shown.histories.rows === 0) return;
      const day = state.cursor_d.get();
      const [x, y] = [shown.histories.at("x_au", day), shown.histories.at("y_au", day)];
      const [left, top] = place(panel, x, y);
      const [sunLeft, sunTop] = place(panel, 0, 0);
      context.save();
      context.beginPath();
      context.rect(panel.left, panel.top, panel.width, panel.height);
      context.clip();
      context.lineWidth = 1;
      context.strokeStyle = token("edge");
      context.globalAlpha = 0.6;
      context.beginPath();
      context.moveTo(sunLeft, sunTop);
      context.lineTo(left, top);
      context.stroke();
      context.globalAlpha = 1;
      const cone = shown.histories.at("cone_deg", day);
      if (Number.isFinite(cone)) drawSail(context, left, top, Math.atan2(y, x) + (cone * Math.PI) / 180);
      context.fillStyle = token("sail");
      context.strokeStyle = token("sheet");
      context.lineWidth = 2;
      context.beginPath();
      context.arc(left, top, 5, 0, 2 * Math.PI);
      context.fill();
      context.stroke();
      context.restore();
    },
  });
  const auPerPixel = () => {
    const panel = figure.panels[0];
    return panel ? (panel.x_max - panel.x_min) / panel.width : 0;
  };
  const change = (next: Partial<View>) => {
    view = { ...view, ...next };
    figure.redraw();
  };
  const zoomBy = (factor: number) => change({ zoom: Math.min(LARGEST_ZOOM, Math.max(1, view.zoom * factor)) });
  const panBy = (right_px: number, up_px: number) =>
    change({ pan_x_au: view.pan_x_au + right_px * auPerPixel(), pan_y_au: view.pan_y_au + up_px * auPerPixel() });
  const stepPan = (right: number, up: number) => {
    const step = PAN_STEP * (figure.panels[0]?.width ?? 0);
    panBy(right * step, up * step);
  };
  const moves: readonly [string, string, string, () => void][] = [
    ["+", "Zoom in", "+", () => zoomBy(ZOOM_STEP)],
    ["−", "Zoom out", "-", () => zoomBy(1 / ZOOM_STEP)],
    ["←", "Move the view left", "ArrowLeft", () => stepPan(-1, 0)],
    ["→", "Move the view right", "ArrowRight", () => stepPan(1, 0)],
    ["↑", "Move the view up", "ArrowUp", () => stepPan(0, 1)],
    ["↓", "Move the view down", "ArrowDown", () => stepPan(0, -1)],
    ["Whole", "Show the whole picture", "0", () => change(WHOLE)],
  ];
  const frame = figure.frame;
  frame.tabIndex = 0;
  frame.setAttribute("role", "group");
  frame.setAttribute("aria-label", "Orbit picture. Plus and minus zoom, arrow keys move, 0 shows the whole.");
  frame.addEventListener("keydown", (event) => {
    const move = moves.find(([, , key]) => key === event.key || (key === "+" && event.key === "="));
    if (!move || event.ctrlKey || event.metaKey || event.altKey) return;
    event.preventDefault();
    move[3]();
  });
  // The wheel scrolls the page unless the picture has the focus.
  frame.addEventListener(
    "wheel",
    (event) => {
      if (document.activeElement !== frame && !event.ctrlKey) return;
      event.preventDefault();
      zoomBy(Math.exp(-event.deltaY / 400));
    },
    { passive: false },
  );

  const nearest = (event: PointerEvent): number | undefined => {
    const panel = figure.panels[0];
    const histories = state.shown.get()?.histories;
    if (!panel || !histories) return undefined;
    const bounds = frame.getBoundingClientRect();
    const [left, top] = [event.clientX - bounds.left, event.clientY - bounds.top];
    const [x, y, times] = [histories.column("x_au"), histories.column("y_au"), histories.column("t_d")];
    let [best, day]: [number, number | undefined] = [REACH_PX, undefined];
    for (let i = 0; i < histories.rows; i++) {
      const [px, py] = place(panel, x[i] ?? 0, y[i] ?? 0);
      const distance = Math.hypot(px - left, py - top);
      if (distance < best) [best, day] = [distance, times[i]];
    }
    return day;
  };
  let grabbed: { x: number; y: number } | null = null;
  frame.addEventListener("pointerdown", (event) => {
    if (event.button !== 0) return;
    grabbed = { x: event.clientX, y: event.clientY };
    frame.setPointerCapture(event.pointerId);
  });
  frame.addEventListener("pointermove", (event) => {
    if (grabbed) {
      panBy(grabbed.x - event.clientX, event.clientY - grabbed.y);
      grabbed = { x: event.clientX, y: event.clientY };
      return;
    }
    const day = nearest(event);
    if (day !== undefined) state.cursor_d.set(day);
  });
  frame.addEventListener("pointerup", (event) => {
    grabbed = null;
    const day = nearest(event);
    if (day !== undefined) state.cursor_d.set(day);
  });
  frame.addEventListener("pointercancel", () => (grabbed = null));

  const buttons = h(
    "div",
    { class: "tools", role: "group", "aria-label": "View of the orbit picture" },
    ...moves.map(([sign, words, , move]) => h("button", { type: "button", "aria-label": words, title: words, onclick: move }, sign)),
  );
  const behind = h("details", { class: "behind" }, h("summary", {}, "Table behind this picture"));
  const fill = () => {
    if (!behind.open) return;
    behind.querySelector(".frame")?.remove();
    const histories = state.shown.get()?.histories;
    if (histories) behind.append(positions(histories));
  };
  behind.addEventListener("toggle", fill);
  state.shown.watch(fill);
  part("orbit").append(h("div", { class: "head" }, h("h2", { id: "orbit-title" }, "Orbit picture"), buttons), frame, behind);
}

/** The sail edge-on as a bar, with its normal. */
function drawSail(context: CanvasRenderingContext2D, left: number, top: number, normal_rad: number): void {
  const [nx, ny] = [Math.cos(normal_rad), -Math.sin(normal_rad)];
  context.strokeStyle = token("sail");
  context.lineWidth = 3;
  context.beginPath();
  context.moveTo(left - 15 * ny, top + 15 * nx);
  context.lineTo(left + 15 * ny, top - 15 * nx);
  context.stroke();
  context.lineWidth = 1.5;
  context.beginPath();
  context.moveTo(left, top);
  context.lineTo(left + 20 * nx, top + 20 * ny);
  context.stroke();
}

function positions(histories: Histories): HTMLElement {
  const cell = (name: string, i: number) => h("td", {}, fixed(histories.column(name)[i], 4));
  const rows = histories
    .sampled(25)
    .map((i) =>
      h("tr", {}, h("th", { scope: "row" }, fixed(histories.column("t_d")[i], 1)), cell("x_au", i), cell("y_au", i), cell("distance_au", i)),
    );
  return table("Positions along the flight", ["day", "x, au", "y, au", "Sun distance, au"], rows);
}
