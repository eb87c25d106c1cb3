// When to leave: flights on a row of dates, computed by workers as one looks on, as curves or as a map.
import { CONTROLS } from "../controls";
import { h, part } from "../dom";
import type { FigurePanel } from "../engine/core";
import type { StudyName } from "../engine/protocol";
import type { StudyReport, StudyRow } from "../engine/report";
import { StudyRun, type Progress } from "../engine/study";
import { field } from "../field";
import { Figure, place, token } from "../figure";
import { fixed, significant, typed } from "../format";
import type { Shown } from "../state";
import { Picks, RowTable, dayOf, wordsOf } from "../study-tables";
import type { Page } from "./page";

/** A row and the flight that it opens are the same flight within this, relative. */
const AGREES = 1e-8;
/** The pointer finds a point from this far, CSS pixels. */
const REACH_PX = 22;
/** Pause between two pictures of a study that runs, ms. */
const SHOWN_MS = 250;

/** The study's keys under their headings. */
const GROUPS: readonly (readonly [string, readonly string[]])[] = [
  ["Dates", ["span", "step_d"]],
  ["Sails of the map, by acceleration", ["ac_range"]],
  ["Or by area, at the mass given", ["area_range"]],
];

const WORDS: Record<Progress["is"], string> = { running: "working", stopped: "stopped", finished: "finished", refused: "refused" };

export function mountDepartures({ state, client, studies }: Page): void {
  let run: StudyRun | undefined;
  /** What was typed when the study began. */
  let asked = "";
  let report: StudyReport | undefined;
  let marked: StudyRow | undefined;
  let opened: StudyRow | undefined;
  let timer: ReturnType<typeof setTimeout> | undefined;

  const infos = new Map(client.about.link_keys().map((info) => [info.key, info]));
  const fields = GROUPS.map(([legend, keys]) => {
    const inside = CONTROLS.filter((control) => keys.includes(control.piece?.key ?? control.key));
    return h("fieldset", { class: "elements" }, h("legend", {}, legend), ...inside.map((control) => field(state, control, infos.get(control.key))));
  });
  const begin = (name: StudyName) => {
    // The text as typed: a study needs no departure date, which the flight above may be waiting for.
    const text = state.text();
    const planned = client.attempt((core) => ({ name, ...core.study_items(name, text) }));
    if (planned.is === "refused") return refuse(planned.errors);
    if (planned.is !== "done") return;
    run?.stop();
    asked = text;
    opened = marked = undefined;
    agreement.hidden = true;
    const plan = planned.value;
    const mine = new StudyRun(plan, studies, (points) => client.guard((core) => core.study_mends(name, plan.link, points)) ?? []);
    run = mine;
    mine.progress.watch((progress) => run === mine && tell(progress));
    mine.start();
  };
  const dates = h("button", { type: "button", onclick: () => begin("dates") }, "Sweep the dates");
  const map = h("button", { type: "button", onclick: () => begin("map") }, "Map dates and sails");
  const stop = h("button", { type: "button", onclick: () => run?.stop() }, "Stop");
  const resume = h("button", { type: "button", onclick: () => run?.start() }, "Go on");
  const bar = h("progress", { "aria-label": "Flights computed", max: 1, value: 0 });
  const working = h("div", { class: "working", hidden: true }, bar, stop, resume);
  const said = h("p", { class: "help", id: "departures-said" });
  const spoken = h("p", { class: "unseen", role: "status" });
  const refused = h("div", { class: "errors" });
  const agreement = h("p", { class: "note", id: "departures-agreement", role: "status", hidden: true });
  const notes = h("ul", { class: "help" });
  const rows = new RowTable((row) => open(row));
  const picks = new Picks((row) => open(row));

  const isMap = () => report?.study === "map";
  const sails = () => (report?.axes[1]?.values ?? []) as number[];
  const figure = new Figure(state, {
    name: "departures",
    height: (width) => (isMap() ? Math.min(520, Math.max(260, 120 + 20 * sails().length)) : width < 500 ? 400 : 460),
    stale: () => {
      const link = state.verdict.get().link;
      if (link !== null && opened && flightOf(link) === flightOf(opened.link)) return false;
      return baseOf(state.text(), isMap()) !== baseOf(asked, isMap());
    },
    overlay: (context, panels) => {
      for (const row of [opened, marked])
        for (const panel of row ? panels : []) {
          const [left, top] = spot(row as StudyRow, panel);
          if (!Number.isFinite(top)) continue;
          context.strokeStyle = token("ink");
          context.lineWidth = row === opened ? 2.5 : 1.5;
          context.beginPath();
          context.arc(left, top, 8, 0, 2 * Math.PI);
          context.stroke();
        }
    },
  });
  const spot = (row: StudyRow, panel: FigurePanel): [number, number] => {
    const day = dayOf(row.depart) - dayOf(String(report?.axes[0]?.values[0] ?? ""));
    if (panel.column === "time_d") return place(panel, day, row.time_d ?? Number.NaN);
    if (panel.column === "arrive_d") return place(panel, day, day + (row.time_d ?? Number.NaN));
    return place(panel, day, sails().indexOf((panel.column === "area_m2" ? row.area_m2 : row.ac_mm_s2) ?? Number.NaN));
  };
  const nearest = (event: PointerEvent): StudyRow | undefined => {
    const bounds = figure.frame.getBoundingClientRect();
    const [left, top] = [event.clientX - bounds.left, event.clientY - bounds.top];
    let [best, found]: [number, StudyRow | undefined] = [Number.POSITIVE_INFINITY, undefined];
    for (const panel of figure.panels) {
      // A cell of the map is found all over.
      const [columns, lines] = (report?.axes ?? []).map((axis) => axis.values.length);
      best = Math.min(best, lines ? Math.hypot(panel.width / (columns ?? 1), panel.height / lines) / 2 : REACH_PX);
      for (const row of report?.rows ?? []) {
        const [x, y] = spot(row, panel);
        const distance = Math.hypot(x - left, y - top);
        if (distance < best) [best, found] = [distance, row];
      }
    }
    return found;
  };
  const mark = (row: StudyRow | undefined) => {
    if (row === marked) return;
    marked = row;
    figure.frame.title = row ? `${wordsOf(row)}${isMap() ? ` at ${significant(row.ac_mm_s2, 3)} mm/s²` : ""}` : "";
    figure.redrawOverlay();
  };
  figure.frame.addEventListener("pointermove", (event) => mark(nearest(event)));
  figure.frame.addEventListener("pointerleave", () => mark(undefined));
  figure.frame.addEventListener("click", (event) => {
    const row = nearest(event as PointerEvent);
    if (row) open(row);
  });

  const refuse = (errors: Progress["errors"]) =>
    refused.replaceChildren(...errors.map(({ key, value, rule }) => h("p", {}, h("code", {}, key), value === "" ? ": " : ` \u201c${typed(value)}\u201d: `, rule)));

  function tell(progress: Progress): void {
    refuse(progress.errors);
    working.hidden = false;
    bar.max = progress.items;
    bar.value = progress.done;
    stop.hidden = progress.is !== "running";
    resume.hidden = progress.is !== "stopped";
    if (progress.is !== "running") {
      clearTimeout(timer);
      timer = undefined;
      show(progress);
      spoken.textContent = said.textContent;
    } else if (timer === undefined) {
      timer = setTimeout(() => {
        timer = undefined;
        if (run) show(run.progress.get());
      }, SHOWN_MS);
    }
  }

  function show(progress: Progress): void {
    const mine = run;
    if (!mine) return;
    const { name, link } = mine.plan;
    const told = client.guard((core) => core.study_report(name, link, mine.points()));
    if (!told) return;
    report = told;
    pair.hidden = false;
    const all = told.axes.reduce((product, axis) => product * axis.values.length, 1);
    const left = progress.left_s === null ? "" : `, about ${fixed(Math.ceil(progress.left_s), 0)} s left`;
    const lost = progress.lost > 0 ? `; ${progress.lost} parts given up after a crash` : "";
    said.textContent = `${told.rows.length} of ${all} flights, ${WORDS[progress.is]}${left}${lost}.`;
    figure.show({
      words: () => "",
      draw: (canvas, options) => {
        const drawn = client.guard((core) => core.draw_study(canvas, told, options));
        figure.say(drawn?.words ?? "");
        return drawn?.panels;
      },
    });
    rows.show(told);
    picks.show(told);
    notes.replaceChildren(...told.notes.map((note) => h("li", {}, note)));
  }

  function open(row: StudyRow): void {
    opened = row;
    agreement.hidden = false;
    agreement.className = "note";
    agreement.textContent = `Opening the flight of ${row.depart}…`;
    figure.redrawOverlay();
    state.load(client.check(row.link), ["departures"]);
    compare(state.shown.get());
  }

  /** Once the opened flight is there: is it the row's? */
  function compare(shown: Shown | null): void {
    if (!opened || !shown || flightOf(shown.link) !== flightOf(opened.link)) return;
    const { time_d } = shown.solved.report.flight;
    const none = opened.time_d === null || time_d === null;
    const differs = none ? Number(opened.time_d !== time_d) : Math.abs(time_d / (opened.time_d ?? 1) - 1);
    const agrees = differs <= AGREES;
    agreement.className = agrees ? "note" : "alarm";
    agreement.textContent = agrees
      ? `The flight of ${opened.depart} is open above; it agrees with the row ${differs === 0 ? "to the last digit" : `to ${significant(differs, 1)}`}.`
      : `The flight of ${opened.depart} is open above and differs from the row: ${fixed(time_d, 3)} d there, ${fixed(opened.time_d, 3)} d here.`;
  }
  state.shown.watch(compare);

  const pair = h("div", { class: "study", hidden: true }, figure.frame, rows.element);
  const inputs = h("div", { class: "study-fields" }, ...fields);
  const buttons = h("div", { class: "tools" }, dates, map);
  const dateless = h(
    "p",
    { class: "note" },
    "Circles have no dates. ",
    h("button", { type: "button", onclick: () => state.edit("geometry", "spatial") }, "Use orbits as they are"),
  );
  state.scenario.watch(({ texts }) => {
    const spatial = texts.geometry === "spatial";
    dateless.hidden = spatial;
    inputs.hidden = buttons.hidden = !spatial;
    refused.replaceChildren();
  });
  part("departures").append(
    h("h2", { id: "departures-title" }, "Departures"),
    h("p", {}, "When should it leave?"),
    dateless,
    inputs,
    buttons,
    refused,
    working,
    said,
    spoken,
    agreement,
    pair,
    picks.element,
    notes,
  );
}

/** A link without some of its keys. */
function stripped(link: string, dropped: readonly string[]): string {
  const keys = new URLSearchParams(link);
  for (const key of dropped) keys.delete(key);
  return String(keys);
}

const STUDY_KEYS = ["span", "step_d", "ac_range", "area_range"];
/** What a study varies counts for nothing in it. */
const baseOf = (link: string, isMap: boolean) => stripped(link, ["depart", "title", ...(isMap ? ["ac_mm_s2", "area_m2"] : [])]);
/** The flight that a link means, whatever study it carries. */
const flightOf = (link: string) => stripped(link, STUDY_KEYS);
