// The compiled core behind typed calls, and the one place that tells wrong input from a crash.
import { openGlue } from "../../pkg/glue";
import { evaluate } from "./dates";
import type { Outcome, Question, Solved } from "./protocol";
import type { CheckRow, Example, KeyInfo, LinkError, Program, Report } from "./report";

/** What a scenario text says: `entries` hold every key's value, of the default scenario if it does not decode. */
export interface Checked {
  decoded: boolean;
  link: string | null;
  entries: [string, string][];
  errors: LinkError[];
}

export type Theme = "light" | "dark";
export type FigureName = "orbit" | "histories";

/** Sizes in CSS pixels; `scale` is device pixels per CSS pixel, at least 2 for smooth lines. Left out: the whole
 * picture seen from ecliptic north, the usual panels. */
export interface FigureOptions {
  width: number;
  height: number;
  scale: number;
  theme: Theme;
  stale: boolean;
  zoom?: number;
  pan_x_au?: number;
  pan_y_au?: number;
  /** 0 from ecliptic north to 90 edge-on. */
  tilt_deg?: number;
  turn_deg?: number;
  /** When the bodies of a dated flight are shown besides. */
  cursor_t_d?: number;
  /** Columns of the histories, from top to bottom. */
  panels?: string[];
}

/** Where a panel's data area is, in CSS pixels, and what its edges mean. */
export interface FigurePanel {
  column: string;
  unit: string;
  left: number;
  top: number;
  width: number;
  height: number;
  x_min: number;
  x_max: number;
  y_min: number;
  y_max: number;
  /** Equal heights are equal ratios. */
  y_log: boolean;
  /** Orbit picture: pixels to the right and down for each au along ecliptic x, y and z, row by row. */
  project: [number, number, number, number, number, number] | null;
  /** Orbit picture: where the Sun is drawn. */
  center_x: number | null;
  center_y: number | null;
}

/** A study of departure dates, as its figure takes it. */
export interface Departures {
  start: string;
  span_d: number;
  step_d: number;
  ends: string;
  rows: {
    depart: string;
    depart_d: number;
    time_d: number | null;
    arrive: string | null;
    breaks_law: boolean;
    best: boolean;
    earliest: boolean;
  }[];
}

/** A study over dates and accelerations, as its figure takes it. */
export interface DepartureMap {
  start: string;
  step_d: number;
  dates: number;
  ac_mm_s2: number[];
  ends: string;
  cells: { date: number; ac: number; time_d: number | null; breaks_law: boolean; best: boolean }[];
}

export interface DrawnStudy {
  panels: FigurePanel[];
  words: string;
}

export interface Figures {
  draw(canvas: HTMLCanvasElement, name: FigureName, options: FigureOptions): { panels: FigurePanel[] };
  describe(name: FigureName): string;
  free(): void;
}

export interface Core {
  check_link(text: string): Checked;
  solve(link: string): Solved;
  published_checks(): CheckRow[];
  column_names(): string[];
  link_keys(): KeyInfo[];
  program(): Program;
  default_link(): string;
  examples(): Example[];
  theme_tokens(theme: Theme): Record<string, string>;
  draw_departures(canvas: HTMLCanvasElement, study: Departures, options: FigureOptions): DrawnStudy;
  draw_departure_map(canvas: HTMLCanvasElement, study: DepartureMap, options: FigureOptions): DrawnStudy;
  Figures: new (report: Report, columns: Float64Array) => Figures;
}

/** A fresh instance; after a trap an instance is in an unknown state, so it is dropped and another opened. */
export function openCore(module: WebAssembly.Module): Core {
  const glue = openGlue();
  glue.initSync({ module });
  return glue as unknown as Core;
}

/** Answers one question and never throws. */
export function answer(core: Pick<Core, "solve" | "published_checks">, question: Question): Outcome {
  try {
    if (question.ask === "study") return { is: "rows", rows: evaluate(core, question.plan, question.chunk) };
    if (question.ask === "checks") return { is: "checked", checks: core.published_checks() };
    const start = performance.now();
    const solved = core.solve(question.link);
    return { is: "solved", solved, took_ms: performance.now() - start };
  } catch (error) {
    const detail = (error as { detail?: { kind?: string; errors?: LinkError[] } }).detail;
    if (detail?.kind === "input" && detail.errors) return { is: "refused", errors: detail.errors };
    return { is: "crashed", message: error instanceof Error ? error.message : String(error) };
  }
}
