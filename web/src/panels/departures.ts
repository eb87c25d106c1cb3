// When to leave: flights on a row of dates, computed by workers as one looks on, as a curve or as a map.
import { CONTROLS } from "../controls";
import { h, part, table } from "../dom";
import { collect, plan, type Told } from "../engine/dates";
import type { StudyName } from "../engine/protocol";
import { StudyRun, type Progress } from "../engine/study";
import { field } from "../field";
import { Figure, place, token } from "../figure";
import { NONE, fixed, significant } from "../format";
import { valueOf } from "../link";
import type { Shown } from "../state";
import type { Page } from "./page";

/** A row and the flight that it opens are the same flight within this, relative. */
const AGREES = 1e-8;
/** The pointer finds a point from this far, CSS pixels. */
const REACH_PX = 22;
/** Pause between two renewals of the table while rows come in, ms. */
const LISTED_MS = 250;

export function mountDepartures({ state, client, studies }: Page): void {
  let run: StudyRun | undefined;
  let rows: Told[] = [];
  let base = "";
  let marked: Told | undefined;
  let opened: Told | undefined;

  const infos = new Map(client.about.link_keys().map((info) => [info.key, info]));
  const fields = CONTROLS.filter((control) => control.group === "departures").map((control) => field(state, control, infos.get(control.key)));
  const dates = h("button", { type: "button", onclick: () => begin("dates") }, "Sweep the dates");
  const map = h("button", { type: "button", onclick: () => begin("map") }, "Map dates and accelerations");
  const stop = h("button", { type: "button", onclick: () => run?.stop() }, "Stop");
  const resume = h("button", { type: "button", onclick: () => run?.start() }, "Go on");
  const bar = h("progress", { "aria-label": "Dates computed", max: 1, value: 0 });
  const said = h("p", { class: "help" });
  const spoken = h("p", { class: "unseen", role: "status" });
  const working = h("div", { class: "working", hidden: true }, bar, stop, resume);
  const verdict = h("p", { class: "note", role: "status", hidden: true });
  const chosen = h("select", { id: "departures-ac", onchange: () => run && list(run) });
  const choice = h("p", { class: "entry", hidden: true }, h("label", { for: "departures-ac" }, "Listed at"), chosen, h("span", { class: "unit" }, "mm/s²"));
  const framed = h("div");
  const beside = h("div", { class: "beside" }, choice, framed);
  let listing: ReturnType<typeof setTimeout> | undefined;
  let begun: StudyRun | undefined;

  const figure = new Figure(state, {
    name: "departures",
    height: (width) => (run?.plan.name === "map" ? Math.min(520, 140 + 16 * run.plan.ac_mm_s2.length) : width < 500 ? 420 : 460),
    stale: () => {
      const link = state.verdict.get().link ?? "";
      return base !== baseOf(link) && (!opened || flightOf(link) !== flightOf(opened.link));
    },
    overlay: (context, panels) => {
      for (const row of [opened, marked])
        for (const panel of panels) {
          const [left, top] = row ? spot(row, panel) : [Number.NaN, Number.NaN];
          if (!Number.isFinite(top)) continue;
          context.strokeStyle = token("ink");
          context.lineWidth = row === opened ? 2.5 : 1.5;
          context.beginPath();
          context.arc(left, top, 8, 0, 2 * Math.PI);
          context.stroke();
        }
    },
  });
  const spot = (row: Told, panel: (typeof figure.panels)[number]): [number, number] => {
    if (panel.column === "ac") return place(panel, row.depart_d, row.ac);
    return place(panel, row.depart_d, row.time_d === null ? Number.NaN : panel.column === "time_d" ? row.time_d : row.depart_d + row.time_d);
  };
  const nearest = (event: PointerEvent): Told | undefined => {
    const bounds = figure.frame.getBoundingClientRect();
    const [left, top] = [event.clientX - bounds.left, event.clientY - bounds.top];
    let [best, found]: [number, Told | undefined] = [REACH_PX, undefined];
    for (const panel of figure.panels)
      for (const row of rows) {
        const [x, y] = spot(row, panel);
        const distance = Math.hypot(x - left, y - top);
        if (distance < best) [best, found] = [distance, row];
      }
    return found;
  };
  figure.frame.addEventListener("pointermove", (event) => mark(nearest(event)));
  figure.frame.addEventListener("pointerleave", () => mark(undefined));
  figure.frame.addEventListener("click", (event) => {
    const row = nearest(event as PointerEvent);
    if (row) openRow(row);
  });
  const mark = (row: Told | undefined) => {
    if (row === marked) return;
    marked = row;
    figure.frame.title = row ? wordsOf(row) : "";
    figure.redrawOverlay();
  };

  function begin(name: StudyName): void {
    offer();
    const { texts } = state.scenario.get();
    const link = state.verdict.get().link;
    if (link === null) return;
    run?.stop();
    const [low, high, count] = ["ac_range_low", "ac_range_high", "ac_range_count"].map((key) => Number(texts[key]));
    const ac_mm_s2 = Array.from({ length: count ?? 0 }, (_, i) => (low ?? 0) + ((high ?? 0) - (low ?? 0)) * (i / Math.max(1, (count ?? 0) - 1)));
    const asked = { name, link, first: texts.span_first ?? "", last: texts.span_last ?? "", step_d: Number(texts.step_d), ac_mm_s2 };
    base = baseOf(link);
    opened = marked = undefined;
    verdict.hidden = true;
    const mine = new StudyRun(plan(asked), studies);
    run = mine;
    mine.progress.watch((progress) => {
      if (run === mine) tell(mine, progress);
    });
    mine.start();
  }

  /** Fills the fields that are still empty: one synodic period from the departure date on. */
  function offer(): void {
    const { texts } = state.scenario.get();
    const report = state.shown.get()?.solved.report;
    const first = texts.span_first || texts.depart || "2030-01-01";
    const days = Math.min(1500, report?.impulsive.synodic_d ?? 800);
    const last = new Date(Date.parse(`${first}T00:00:00Z`) + days * 86_400_000);
    const offers: Record<string, string> = {
      span_first: first,
      span_last: Number.isNaN(last.getTime()) ? "" : last.toISOString().slice(0, 10),
      step_d: "10",
      ac_range_low: "0.5",
      ac_range_high: "3",
      ac_range_count: "11",
    };
    for (const [key, text] of Object.entries(offers)) if (!texts[key]) state.edit(key, text);
  }

  function tell(mine: StudyRun, progress: Progress): void {
    rows = collect(mine.plan, mine.rows());
    working.hidden = false;
    bar.max = progress.chunks;
    bar.value = progress.done;
    stop.hidden = progress.is !== "running";
    resume.hidden = progress.is !== "stopped";
    const all = mine.plan.dates * mine.plan.ac_mm_s2.length;
    const left = progress.left_s === null ? "" : `, about ${fixed(Math.ceil(progress.left_s), 0)} s left`;
    const state_words = { running: `working${left}`, stopped: "stopped", finished: "finished", refused: "refused" }[progress.is];
    said.textContent = `${rows.length} of ${all} flights, ${state_words}${progress.lost > 0 ? `; ${progress.lost} parts given up after a crash` : ""}.`;
    if (progress.is !== "running") spoken.textContent = said.textContent;
    show(mine);
  }

  function show(mine: StudyRun): void {
    const { start, step_d, dates, ac_mm_s2, name } = mine.plan;
    const ends = state.shown.get()?.solved.report.ends;
    const words = ends ? `${ends.from.name} to ${ends.to.name}` : "";
    let description = "";
    figure.show({
      words: () => description,
      draw: (canvas, options) => {
        const drawn = client.drawStudy((core) =>
          name === "map"
            ? core.draw_departure_map(canvas, { start, step_d, dates, ac_mm_s2, ends: words, cells: rows }, options)
            : core.draw_departures(canvas, { start, step_d, span_d: step_d * (dates - 1), ends: words, rows }, options),
        );
        description = drawn?.words ?? "";
        figure.say(description);
        return drawn?.panels;
      },
    });
    list(mine);
  }

  /** The table lists one acceleration at a time; while rows pour in it is renewed a few times a second. */
  const list = (mine: StudyRun) => {
    if (listing !== undefined) return;
    listing = setTimeout(
      () => {
        listing = undefined;
        if (run !== mine) return;
        const accelerations = mine.plan.ac_mm_s2;
        if (chosen.options.length !== accelerations.length || begun !== mine) {
          chosen.replaceChildren(...accelerations.map((ac, i) => h("option", { value: i }, significant(ac, 3))));
          begun = mine;
        }
        choice.hidden = accelerations.length < 2;
        const scroll = framed.querySelector(".frame")?.scrollTop ?? 0;
        framed.replaceChildren(listed(rows.filter((row) => row.ac === Number(chosen.value)), openRow));
        const frame = framed.querySelector(".frame");
        if (frame) frame.scrollTop = scroll;
      },
      mine.progress.get().is === "running" ? LISTED_MS : 0,
    );
  };

  function openRow(row: Told): void {
    opened = row;
    verdict.hidden = false;
    verdict.textContent = `Opening the flight of ${row.depart}…`;
    figure.redrawOverlay();
    state.load(client.check(row.link), ["departures"]);
    compare(state.shown.get());
  }

  /** Once the opened flight is there: is it the row's? */
  function compare(shown: Shown | null): void {
    if (!opened || !shown || flightOf(shown.link) !== flightOf(opened.link)) return;
    const { time_d } = shown.solved.report.flight;
    const differs = opened.time_d === null || time_d === null ? Number(opened.time_d !== time_d) : Math.abs(time_d / opened.time_d - 1);
    verdict.className = differs <= AGREES ? "note" : "alarm";
    verdict.textContent =
      differs <= AGREES
        ? `The flight of ${opened.depart} is open above and agrees with the row to ${differs === 0 ? "the last digit" : significant(differs, 1)}.`
        : `The flight of ${opened.depart} is open above but differs from the row: ${fixed(time_d, 3)} d against ${fixed(opened.time_d, 3)} d.`;
  }
  state.shown.watch(compare);
  const asked = h("div", { class: "study-fields" }, ...fields);
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
    asked.hidden = buttons.hidden = !spatial;
  });
  state.verdict.watch(({ link }) => {
    dates.disabled = map.disabled = link === null;
    figure.redraw();
  });
  part("departures").append(
    h("h2", { id: "departures-title" }, "Departures"),
    h("p", {}, "When should it leave?"),
    dateless,
    asked,
    buttons,
    working,
    said,
    spoken,
    verdict,
    h("div", { class: "study" }, figure.frame, beside),
  );
}

/** A link without some of its keys. */
function without(link: string | null, dropped: readonly string[]): string {
  const keys = new URLSearchParams(link ?? "");
  for (const key of dropped) keys.delete(key);
  return String(keys);
}

/** The scenario that a study varies, and the flight that a link means whatever study it carries. */
const STUDY_KEYS = ["span", "step_d", "ac_range"];
const baseOf = (link: string | null) => without(link, ["depart", "title", ...STUDY_KEYS]);
const flightOf = (link: string) => without(link, STUDY_KEYS);

function wordsOf(row: Told): string {
  const accel = valueOf(row.link, "ac_mm_s2");
  return `${row.depart}: ${row.time_d === null ? "no flight found" : `${fixed(row.time_d, 2)} d, arriving ${row.arrive?.slice(0, 10) ?? NONE}`}${accel ? ` at ${accel} mm/s²` : ""}`;
}

function listed(rows: readonly Told[], open: (row: Told) => void): HTMLElement {
  const marks = (row: Told) =>
    [row.time_d === null && row.status.replace("_", " "), row.best && "best", row.earliest && "earliest", row.breaks_law && "× arrives before an earlier departure"]
      .filter(Boolean)
      .join(", ");
  return table(
    "Departures",
    ["departure: open", "flight, d", "arrival", "turns", "remarks"],
    rows.map((row) =>
      h(
        "tr",
        { class: row.best ? "best" : "" },
        h("th", { scope: "row" }, h("button", { type: "button", class: "plain", "aria-label": `Open the flight of ${row.depart}`, onclick: () => open(row) }, row.depart)),
        h("td", {}, fixed(row.time_d, 2)),
        h("td", {}, row.arrive?.slice(0, 10) ?? NONE),
        h("td", {}, fixed(row.revolutions, 2)),
        h("td", { class: row.breaks_law || row.time_d === null ? "words bad" : "words" }, marks(row)),
      ),
    ),
    "departures",
  );
}
