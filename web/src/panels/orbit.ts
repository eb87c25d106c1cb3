// The orbit picture: zoom, move and tilt by wheel, drag, keys and buttons; the craft at the time cursor.
import { drawCraft } from "../craft-mark";
import { h, part, table } from "../dom";
import type { Histories } from "../engine/histories";
import { flightFigure, project } from "../figure";
import { fixed } from "../format";
import { valueOf } from "../link";
import type { Page } from "./page";

interface View {
  zoom: number;
  pan_x_au: number;
  pan_y_au: number;
  tilt_deg: number;
  turn_deg: number;
}

/** In space the whole is seen from a little aside, so that heights show. */
const WHOLE: View = { zoom: 1, pan_x_au: 0, pan_y_au: 0, tilt_deg: 35, turn_deg: 0 };
const ZOOM_STEP = 1.4;
const LARGEST_ZOOM = 60;
/** Part of the picture's width that one press moves it by. */
const PAN_STEP = 0.15;
/** Degrees that one press tilts or turns by. */
const TILT_STEP_DEG = 10;
/** Degrees for each pixel of a drag. */
const TILT_DRAG_DEG = 0.4;
/** The pointer takes the cursor to the path from this far, CSS pixels. */
const REACH_PX = 26;

const WAYS = [
  ["tilt", "Tilt", "Drag and arrows tilt and turn the picture; with Shift they move it"],
  ["move", "Move", "Drag and arrows move the picture; with Shift they tilt and turn it"],
] as const;

export function mountOrbit({ state, client }: Page): void {
  let view = WHOLE;
  let way: "tilt" | "move" = "tilt";
  const inSpace = () => valueOf(state.shown.get()?.link ?? "", "geometry") === "spatial";
  const isDated = () => (state.shown.get()?.solved.report.flight.depart ?? null) !== null;
  const figure = flightFigure(state, client, "orbit", {
    height: (width) => Math.min(width, Math.max(320, innerHeight - 120)),
    view: () => {
      const { tilt_deg, turn_deg, ...flat } = view;
      return inSpace() ? { ...view, ...(isDated() ? { cursor_t_d: state.cursor_d.get() } : {}) } : flat;
    },
    overlay: (context, panels) => {
      const panel = panels[0];
      const histories = state.shown.get()?.histories;
      const flies = (histories?.column("t_d").at(-1) ?? 0) > 0;
      if (panel && histories && flies) drawCraft(context, panel, histories, state.cursor_d.get());
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
  const tiltBy = (turn_deg: number, tilt_deg: number) =>
    change({ turn_deg: (view.turn_deg + turn_deg) % 360, tilt_deg: Math.min(90, Math.max(0, view.tilt_deg + tilt_deg)) });
  const tilts = (shifted: boolean) => inSpace() && (way === "tilt") !== shifted;
  const step = (right: number, up: number) => (shifted: boolean) => {
    if (tilts(shifted)) return tiltBy(right * TILT_STEP_DEG, up * TILT_STEP_DEG);
    const length = PAN_STEP * (figure.panels[0]?.width ?? 0);
    panBy(right * length, up * length);
  };
  interface Move {
    sign: string;
    words: string;
    /** Words where arrows tilt. */
    tilting?: string;
    key: string;
    go: (shifted: boolean) => void;
  }
  const moves: readonly Move[] = [
    { sign: "+", words: "Zoom in", key: "+", go: () => zoomBy(ZOOM_STEP) },
    { sign: "−", words: "Zoom out", key: "-", go: () => zoomBy(1 / ZOOM_STEP) },
    { sign: "←", words: "Move the view left", tilting: "Turn the picture clockwise", key: "ArrowLeft", go: step(-1, 0) },
    { sign: "→", words: "Move the view right", tilting: "Turn the picture counter-clockwise", key: "ArrowRight", go: step(1, 0) },
    { sign: "↑", words: "Move the view up", tilting: "Tilt towards edge-on", key: "ArrowUp", go: step(0, 1) },
    { sign: "↓", words: "Move the view down", tilting: "Tilt towards the view from north", key: "ArrowDown", go: step(0, -1) },
    { sign: "Whole", words: "Show the whole picture", key: "0", go: () => change(WHOLE) },
  ];
  const north = h("button", { type: "button", title: "Look down from ecliptic north", onclick: () => change({ tilt_deg: 0, turn_deg: 0 }) }, "From north");
  const frame = figure.frame;
  frame.tabIndex = 0;
  frame.setAttribute("role", "group");
  frame.addEventListener("keydown", (event) => {
    const move = moves.find(({ key }) => key === event.key || (key === "+" && event.key === "="));
    if (!move || event.ctrlKey || event.metaKey || event.altKey) return;
    event.preventDefault();
    move.go(event.shiftKey);
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
    const [x, y, z, times] = ["x_au", "y_au", "z_au", "t_d"].map((name) => histories.column(name));
    let [best, day]: [number, number | undefined] = [REACH_PX, undefined];
    for (let i = 0; i < histories.rows; i++) {
      const [px, py] = project(panel, [x?.[i] ?? 0, y?.[i] ?? 0, z?.[i] ?? 0]);
      const distance = Math.hypot(px - left, py - top);
      if (distance < best) [best, day] = [distance, times?.[i]];
    }
    return day;
  };
  let grabbed: { x: number; y: number } | null = null;
  let dragged = 0;
  frame.addEventListener("pointerdown", (event) => {
    if (event.button !== 0) return;
    grabbed = { x: event.clientX, y: event.clientY };
    dragged = 0;
    frame.setPointerCapture(event.pointerId);
  });
  frame.addEventListener("pointermove", (event) => {
    if (grabbed) {
      const [right, down] = [event.clientX - grabbed.x, event.clientY - grabbed.y];
      dragged += Math.abs(right) + Math.abs(down);
      if (tilts(event.shiftKey)) tiltBy(TILT_DRAG_DEG * right, -TILT_DRAG_DEG * down);
      else panBy(-right, down);
      grabbed = { x: event.clientX, y: event.clientY };
      return;
    }
    const day = nearest(event);
    if (day !== undefined) state.cursor_d.set(day);
  });
  frame.addEventListener("pointerup", (event) => {
    grabbed = null;
    // Letting go after a drag is no click on the path.
    const day = dragged < 4 ? nearest(event) : undefined;
    if (day !== undefined) state.cursor_d.set(day);
  });
  frame.addEventListener("pointercancel", () => (grabbed = null));

  const radios = WAYS.map(([value, words, title]) => {
    const radio = h("input", { type: "radio", name: "orbit-drag", value, title });
    radio.addEventListener("change", () => {
      way = value;
      name();
    });
    radio.checked = value === way;
    return h("label", { class: "choice" }, radio, words);
  });
  const ways = h("fieldset", { class: "ways" }, h("legend", { class: "unseen" }, "What drag and arrows do; with Shift they do the other"), ...radios);
  const buttons = moves.map(({ sign, go }) => h("button", { type: "button", onclick: () => go(false) }, sign));
  const name = () => {
    const spatial = inSpace();
    ways.hidden = north.hidden = !spatial;
    moves.forEach(({ words, tilting }, i) => {
      const said = tilting && tilts(false) ? tilting : words;
      buttons[i]?.setAttribute("aria-label", said);
      buttons[i]?.setAttribute("title", said);
    });
    const arrows = spatial ? `arrow keys ${way}, with Shift ${way === "tilt" ? "move" : "tilt"}` : "arrow keys move";
    frame.setAttribute("aria-label", `Orbit picture. Plus and minus zoom, ${arrows}, 0 shows the whole.`);
    frame.classList.toggle("spatial", spatial);
  };
  const tools = h("div", { class: "tools", role: "group", "aria-label": "View of the orbit picture" }, ways, ...buttons, north);
  const behind = h("details", { class: "behind" }, h("summary", {}, "Table behind this picture"));
  const fill = () => {
    if (!behind.open) return;
    behind.querySelector(".frame")?.remove();
    const histories = state.shown.get()?.histories;
    if (histories) behind.append(positions(histories, inSpace()));
  };
  behind.addEventListener("toggle", fill);
  state.shown.watch(() => {
    name();
    fill();
  });
  part("orbit").append(h("div", { class: "head" }, h("h2", { id: "orbit-title" }, "Orbit picture"), tools), frame, behind);
}

function positions(histories: Histories, spatial: boolean): HTMLElement {
  const columns = ["x_au", "y_au", ...(spatial ? ["z_au"] : []), "distance_au"];
  const heads = ["day", "x, au", "y, au", ...(spatial ? ["z, au"] : []), "Sun distance, au"];
  const rows = histories
    .sampled(25)
    .map((i) =>
      h(
        "tr",
        {},
        h("th", { scope: "row" }, fixed(histories.column("t_d")[i], 1)),
        ...columns.map((name) => h("td", {}, fixed(histories.column(name)[i], 4))),
      ),
    );
  return table("Positions along the flight", heads, rows);
}
