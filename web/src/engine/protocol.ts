// What crosses between the page and its workers: plain objects only, since cloning drops an Error's detail.
import type { CheckRow, LinkError, Report } from "./report";

export type StudyName = "dates" | "map";

export type Question =
  | { ask: "solve"; link: string }
  | { ask: "checks" }
  | { ask: "study"; name: StudyName; link: string; item: StudyItem };

export type Request = { ask: "open"; module: WebAssembly.Module } | (Question & { id: number });

/** One solved flight; columns are packed column after column, in the order of the core's column names. */
export interface Solved {
  report: Report;
  columns: Float64Array;
}

/** Consecutive dates of one sail; for the core alone. */
export type StudyItem = object;

/** What the core found for one date and sail; for the core alone. */
export type StudyPoint = object;

/** How a question ended. `crashed` means that the instance which answered must not be asked again. */
export type Outcome =
  | { is: "solved"; solved: Solved; took_ms: number }
  | { is: "checked"; checks: CheckRow[] }
  | { is: "points"; points: StudyPoint[] }
  | { is: "refused"; errors: LinkError[] }
  | { is: "crashed"; message: string };

export interface Reply {
  id: number;
  outcome: Outcome;
}
