// Tables of a study of departure dates: every row, and the departures worth looking at with what slipping costs.
import { h, table } from "./dom";
import type { Pick, StudyReport, StudyRow } from "./engine/report";
import { NONE, fixed, significant } from "./format";

const DAY_MS = 86_400_000;

type Open = (row: StudyRow) => void;

/** Days since 1970 of a calendar date. */
export function dayOf(date: string): number {
  return Date.parse(`${date.slice(0, 10)}T00:00:00Z`) / DAY_MS;
}

export function wordsOf({ depart, time_d, arrive }: StudyRow): string {
  return time_d === null ? `${depart}: no flight found` : `${depart}: ${fixed(time_d, 2)} d, arriving ${arrive?.slice(0, 10) ?? NONE}`;
}

/** Opens a row's flight. */
function opener(row: StudyRow, open: Open): HTMLElement {
  return h("button", { type: "button", class: "plain", "aria-label": `Open the flight of ${row.depart}`, onclick: () => open(row) }, row.depart);
}

/** Every row; of a map, those of one sail at a time. */
export class RowTable {
  private readonly choice = h("select", { id: "departures-sail" });
  private readonly unit = h("span", { class: "unit" });
  private readonly chooser = h("p", { class: "entry", hidden: true }, h("label", { for: "departures-sail" }, "Listed at"), this.choice, this.unit);
  private readonly body = h("div");
  readonly element = h("div", { class: "beside" }, this.chooser, this.body);
  private report: StudyReport | undefined;

  constructor(private readonly open: Open) {
    this.choice.addEventListener("change", () => this.list());
  }

  show(report: StudyReport): void {
    const axis = report.axes[1];
    const values = (axis?.values ?? []) as number[];
    if (report.link !== this.report?.link || report.study !== this.report.study)
      this.choice.replaceChildren(...values.map((value) => h("option", { value }, significant(value, 3))));
    this.chooser.hidden = values.length < 2;
    this.unit.textContent = axis?.unit ?? "";
    this.report = report;
    this.list();
  }

  private list(): void {
    const report = this.report;
    if (!report) return;
    const field = report.axes[1]?.field === "area_m2" ? "area_m2" : "ac_mm_s2";
    const rows = report.axes[1] ? report.rows.filter((row) => row[field] === Number(this.choice.value)) : report.rows;
    const picked = new Map<string, string>();
    for (const { kind, depart, ac_mm_s2 } of report.best) picked.set(`${depart} ${ac_mm_s2} ${kind}`, kind);
    const scroll = this.body.querySelector(".frame")?.scrollTop ?? 0;
    this.body.replaceChildren(
      table(
        "Departures",
        ["departure: open", "flight, d", "arrival", "turns", "remarks"],
        rows.map((row) => {
          const kinds = ["shortest", "earliest"].filter((kind) => picked.has(`${row.depart} ${row.ac_mm_s2} ${kind}`));
          const wrong = [row.status !== "converged" && row.status.replace("_", " "), row.law === "broken" && "× a later departure arrives earlier"].filter(Boolean);
          return h(
            "tr",
            { class: kinds.length > 0 ? "best" : "" },
            h("th", { scope: "row" }, opener(row, this.open)),
            h("td", {}, fixed(row.time_d, 2)),
            h("td", {}, row.arrive?.slice(0, 10) ?? NONE),
            h("td", {}, fixed(row.revolutions, 2)),
            h("td", { class: wrong.length > 0 ? "words bad" : "words" }, [...wrong, ...kinds].join(", ")),
          );
        }),
        "departures",
      ),
    );
    const frame = this.body.querySelector(".frame");
    if (frame) frame.scrollTop = scroll;
  }
}

/** The departures worth looking at; for curves only, since a map has too many. */
export class Picks {
  readonly element = h("div");

  constructor(private readonly open: Open) {}

  show(report: StudyReport): void {
    this.element.replaceChildren();
    if (report.axes.length > 1 || report.best.length === 0) return;
    const slips = [...new Set(report.best.flatMap((pick) => pick.slips.map((slip) => slip.slip_d)))].sort((a, b) => a - b);
    const later = (pick: Pick, slip_d: number) => pick.slips.find((slip) => slip.slip_d === slip_d)?.arrive_later_d ?? null;
    const rowOf = (pick: Pick) => report.rows.find((row) => row.depart === pick.depart);
    this.element.append(
      h("h3", {}, "Best departures, and what slipping costs"),
      table(
        "Best departures",
        ["departure: open", "why", "flight, d", "arrival", "same day until", ...slips.map((days) => `${days} d late: arrives later, d`)],
        report.best.map((pick) => {
          const row = rowOf(pick);
          const why = `${pick.kind === "shortest" ? "shorter than its neighbours" : "earliest arrival"}${pick.at_edge ? ", at the edge of the span" : ""}`;
          return h(
            "tr",
            {},
            h("th", { scope: "row" }, row ? opener(row, this.open) : pick.depart),
            h("td", { class: "words" }, why),
            h("td", {}, fixed(pick.time_d, 2)),
            h("td", {}, pick.arrive?.slice(0, 10) ?? NONE),
            h("td", {}, pick.leave_by),
            ...slips.map((days) => h("td", {}, fixed(later(pick, days), 1))),
          );
        }),
        "departures picks",
      ),
    );
  }
}
