// A study run over a pool of workers: fixed chunks in a fixed order, so that the number of workers changes no digit.
import { Cell } from "../cell";
import type { Job, Pool } from "./pool";
import type { LinkError } from "./report";
import type { StudyPlan, StudyRow } from "./protocol";

/** A chunk whose worker crashed is tried once more. */
const TRIES = 2;

export interface Progress {
  is: "running" | "stopped" | "finished" | "refused";
  /** Chunks that are there, and how many there are. */
  done: number;
  chunks: number;
  /** Estimate, s; null before the first chunk and when nothing runs. */
  left_s: number | null;
  /** Chunks given up after crashes. */
  lost: number;
  errors: LinkError[];
}

export class StudyRun {
  readonly progress: Cell<Progress>;
  private readonly chunks: (StudyRow[] | null)[];
  private readonly tries: number[];
  private readonly running = new Map<number, Job>();
  private is: Progress["is"] = "stopped";
  private errors: LinkError[] = [];
  private started_ms = 0;
  private doneAtStart = 0;

  constructor(
    readonly plan: StudyPlan,
    private readonly pool: Pick<Pool, "run">,
    private readonly now_ms: () => number = () => performance.now(),
  ) {
    this.chunks = Array.from({ length: plan.chunks }, () => null);
    this.tries = this.chunks.map(() => 0);
    this.progress = new Cell(this.told());
  }

  /** Starts, or goes on where it was stopped. */
  start(): void {
    if (this.is === "running" || this.is === "finished") return;
    this.is = "running";
    this.started_ms = this.now_ms();
    this.doneAtStart = this.done();
    this.next();
  }

  /** Ends what runs; what is there stays. */
  stop(): void {
    if (this.is !== "running") return;
    for (const job of this.running.values()) job.discard();
    this.running.clear();
    this.is = "stopped";
    this.progress.set(this.told());
  }

  /** What is there so far, chunk by chunk. */
  rows(): readonly (readonly StudyRow[] | null)[] {
    return this.chunks;
  }

  private next(): void {
    for (let chunk = 0; chunk < this.chunks.length; chunk++) {
      if (this.chunks[chunk] !== null || this.running.has(chunk) || (this.tries[chunk] ?? 0) >= TRIES) continue;
      const job = this.pool.run({ ask: "study", plan: this.plan, chunk });
      if (!job) break;
      this.tries[chunk] = (this.tries[chunk] ?? 0) + 1;
      this.running.set(chunk, job);
      void job.done.then((outcome) => {
        if (this.running.get(chunk) !== job) return;
        this.running.delete(chunk);
        if (outcome.is === "rows") this.chunks[chunk] = outcome.rows;
        else if (outcome.is === "refused") {
          this.stop();
          this.is = "refused";
          this.errors = outcome.errors;
          this.progress.set(this.told());
          return;
        }
        this.next();
      });
    }
    if (this.running.size === 0 && this.chunks.every((rows, i) => rows !== null || (this.tries[i] ?? 0) >= TRIES)) this.is = "finished";
    this.progress.set(this.told());
  }

  private done(): number {
    return this.chunks.filter((rows) => rows !== null).length;
  }

  private told(): Progress {
    const done = this.done();
    const since = done - this.doneAtStart;
    const took_s = (this.now_ms() - this.started_ms) / 1000;
    const lost = this.chunks.filter((rows, i) => rows === null && !this.running.has(i) && (this.tries[i] ?? 0) >= TRIES).length;
    return {
      is: this.is,
      done,
      chunks: this.chunks.length,
      left_s: this.is === "running" && since > 0 ? (took_s / since) * (this.chunks.length - done) : null,
      lost,
      errors: this.errors,
    };
  }
}
