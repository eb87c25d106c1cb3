// The compiled core behind typed calls, and the one place that tells wrong input from a crash.
import { openGlue } from "../../pkg/glue";
import type { Outcome, Question, Solved, StudyItem, StudyName, StudyPoint } from "./protocol";
import type { CheckRow, Example, KeyInfo, LinkError, Program, Report, StudyReport } from "./report";

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
  study_items(name: StudyName, link: string): { link: string; items: StudyItem[] };
  study_evaluate(name: StudyName, link: string, item: StudyItem): StudyPoint[];
  study_mends(name: StudyName, link: string, points: StudyPoint[]): StudyItem[];
  study_report(name: StudyName, link: string, points: StudyPoint[]): StudyReport;
  draw_study(canvas: HTMLCanvasElement, study: StudyReport, options: FigureOptions): DrawnStudy;
  Figures: new (report: Report, columns: Float64Array) => Figures;
}

/** A fresh instance; after a trap an instance is in an unknown state, so it is dropped and another opened. */
export function openCore(module: WebAssembly.Module): Core {
  const glue = openGlue();
  glue.initSync({ module });
  return glue as unknown as Core;
}

/** Answers one question and never throws. */
export function answer(core: Pick<Core, "solve" | "published_checks" | "study_evaluate">, question: Question): Outcome {
  try {
    if (question.ask === "study") return { is: "points", points: core.study_evaluate(question.name, question.link, question.item) };
    if (question.ask === "checks") return { is: "checked", checks: core.published_checks() };
    const start = performance.now();
    const solved = core.solve(question.link);
    return { is: "solved", solved, took_ms: performance.now() - start };
  } catch (error) {
    const errors = refusal(error);
    if (errors) return { is: "refused", errors };
    return { is: "crashed", message: error instanceof Error ? error.message : String(error) };
  }
}

/** What is wrong with the input, if that is what the core complained of. */
export function refusal(error: unknown): LinkError[] | undefined {
  const detail = (error as { detail?: { kind?: string; errors?: LinkError[] } }).detail;
  return detail?.kind === "input" ? detail.errors : undefined;
}
