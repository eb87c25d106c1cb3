// Flights leaving on a row of dates: what there is to solve, one chunk of it, and what the rows say together.
import type { Core } from "./core";
import type { StudyName, StudyPlan, StudyRow } from "./protocol";

/** Dates of one chunk. */
const CHUNK = 6;
const DAY_MS = 86_400_000;

export interface Asked {
  name: StudyName;
  link: string;
  first: string;
  last: string;
  step_d: number;
  ac_mm_s2: number[];
}

/** A row with what only its neighbours tell. */
export interface Told extends StudyRow {
  depart_d: number;
  breaks_law: boolean;
  best: boolean;
  earliest: boolean;
}

const dayOf = (date: string) => Date.parse(`${date}T00:00:00Z`) / DAY_MS;

export function plan({ name, link, first, last, step_d, ac_mm_s2 }: Asked): StudyPlan {
  const dates = Math.floor((dayOf(last) - dayOf(first)) / step_d + 1e-9) + 1;
  const ac = name === "map" ? ac_mm_s2 : [Number.NaN];
  return { name, link, start: first, step_d, dates, ac_mm_s2: ac, chunks: Math.ceil(dates / CHUNK) * ac.length };
}

export function evaluate(core: Pick<Core, "solve">, plan: StudyPlan, chunk: number): StudyRow[] {
  const inRow = Math.ceil(plan.dates / CHUNK);
  const ac = Math.floor(chunk / inRow);
  const from = (chunk % inRow) * CHUNK;
  return Array.from({ length: Math.min(CHUNK, plan.dates - from) }, (_, i) => {
    const date = from + i;
    const depart = new Date((dayOf(plan.start) + date * plan.step_d) * DAY_MS).toISOString().slice(0, 10);
    const keys = new URLSearchParams(plan.link);
    keys.set("depart", depart);
    const accel = plan.ac_mm_s2[ac] ?? Number.NaN;
    if (Number.isFinite(accel)) {
      for (const key of ["area_m2", "mass_kg"]) keys.delete(key);
      keys.set("ac_mm_s2", String(accel));
    }
    const { report } = core.solve(String(keys));
    const { status, time_d, arrive, revolutions } = report.flight;
    return { date, ac, depart, link: report.link, status, time_d, arrive, revolutions };
  });
}

/** Flags over all rows that are there, accelerations apart. */
export function collect(plan: StudyPlan, chunks: readonly (readonly StudyRow[] | null)[]): Told[] {
  const rows = chunks.flatMap((rows) => rows ?? []).sort((a, b) => a.ac - b.ac || a.date - b.date);
  const told = rows.map((row) => ({ ...row, depart_d: row.date * plan.step_d, breaks_law: false, best: false, earliest: false }));
  for (let ac = 0; ac < plan.ac_mm_s2.length; ac++) {
    const mine = told.filter((row) => row.ac === ac && row.time_d !== null);
    const arrival = (row: Told | undefined) => (row?.time_d == null ? Number.POSITIVE_INFINITY : row.depart_d + row.time_d);
    let latest = Number.NEGATIVE_INFINITY;
    mine.forEach((row, i) => {
      const time = (other: Told | undefined) => other?.time_d ?? Number.POSITIVE_INFINITY;
      row.best = i > 0 && i < mine.length - 1 && time(row) < time(mine[i - 1]) && time(row) < time(mine[i + 1]);
      row.breaks_law = arrival(row) < latest - 1e-3;
      latest = Math.max(latest, arrival(row));
    });
    const first = mine.reduce<Told | undefined>((best, row) => (arrival(row) < arrival(best) ? row : best), undefined);
    if (first) first.earliest = true;
  }
  return told;
}
