// What crosses between the page and its workers: plain objects only, since cloning drops an Error's detail.
import type { CheckRow, LinkError, Report, Status } from "./report";

export type StudyName = "dates" | "map";

export type Question =
  | { ask: "solve"; link: string }
  | { ask: "checks" }
  | { ask: "study"; plan: StudyPlan; chunk: number };

export type Request = { ask: "open"; module: WebAssembly.Module } | (Question & { id: number });

/** One solved flight; columns are packed column after column, in the order of the core's column names. */
export interface Solved {
  report: Report;
  columns: Float64Array;
}

/** What a study will do: dates from the first on, at each of the accelerations, in chunks that depend on nothing else. */
export interface StudyPlan {
  name: StudyName;
  /** Canonical, with the study's keys. */
  link: string;
  start: string;
  step_d: number;
  dates: number;
  ac_mm_s2: number[];
  chunks: number;
}

/** One departure date at one acceleration. */
export interface StudyRow {
  /** Numbers of the date and of the acceleration, from 0. */
  date: number;
  ac: number;
  depart: string;
  /** The link of this flight. */
  link: string;
  status: Status;
  time_d: number | null;
  arrive: string | null;
  revolutions: number | null;
}

/** How a question ended. `crashed` means that the instance which answered must not be asked again. */
export type Outcome =
  | { is: "solved"; solved: Solved; took_ms: number }
  | { is: "checked"; checks: CheckRow[] }
  | { is: "rows"; rows: StudyRow[] }
  | { is: "refused"; errors: LinkError[] }
  | { is: "crashed"; message: string };

export interface Reply {
  id: number;
  outcome: Outcome;
}
