// The page's side of the engine: checks at once, solves in a worker, and the newest question wins.
import { answer, openCore, refusal, type Checked, type Core, type Figures } from "./core";
import type { Job, Pool } from "./pool";
import type { Outcome, Solved } from "./protocol";
import type { CheckRow, LinkError } from "./report";

/** A question still running after this is dropped for a newer one, ms. */
const PATIENCE_MS = 400;

/** How a call on this thread ended. */
export type Attempt<T> = { is: "done"; value: T } | { is: "refused"; errors: LinkError[] } | { is: "crashed" };

type Answered = (link: string, outcome: Outcome) => void;

export class Client {
  private core: Core;
  private running: { job: Job; started_ms: number } | null = null;
  private waiting: string | null = null;
  private timer: ReturnType<typeof setTimeout> | undefined;

  constructor(
    private readonly module: WebAssembly.Module,
    private readonly pool: Pool,
    private readonly answered: Answered,
    private readonly open: (module: WebAssembly.Module) => Core = openCore,
  ) {
    this.core = open(module);
  }

  /** What the core says about itself: keys, examples, names, version. */
  get about(): Pick<Core, "link_keys" | "examples" | "column_names" | "program"> {
    return this.core;
  }

  check(text: string): Checked {
    return this.core.check_link(text);
  }

  /** Answers on this thread, for the first flight after opening, when the workers are still starting. */
  askHere(link: string): Outcome {
    const outcome = answer(this.core, { ask: "solve", link });
    if (outcome.is === "crashed") this.core = this.open(this.module);
    return outcome;
  }

  /** Pictures of one flight; undefined when the core failed on it, after which a fresh core stands ready. */
  figures(solved: Solved): Figures | undefined {
    return this.guard((core) => new core.Figures(solved.report, solved.columns));
  }

  /** Runs a call that may trap; undefined when it did, after which a fresh core stands ready. */
  guard<T>(call: (core: Core) => T): T | undefined {
    const attempt = this.attempt(call);
    return attempt.is === "done" ? attempt.value : undefined;
  }

  /** The same, telling a refusal from a trap. */
  attempt<T>(call: (core: Core) => T): Attempt<T> {
    try {
      return { is: "done", value: call(this.core) };
    } catch (error) {
      const errors = refusal(error);
      if (errors) return { is: "refused", errors };
      this.core = this.open(this.module);
      return { is: "crashed" };
    }
  }

  /** Puts a question; at most one runs and one waits. */
  ask(link: string): void {
    this.waiting = link;
    this.next();
  }

  /** Nothing more is wanted; an answer on its way still arrives. */
  forget(): void {
    this.waiting = null;
  }

  /** Runs the published checks in a worker. */
  async checks(): Promise<CheckRow[] | undefined> {
    const outcome = await this.pool.run({ ask: "checks" })?.done;
    return outcome?.is === "checked" ? outcome.checks : undefined;
  }

  private next(): void {
    clearTimeout(this.timer);
    if (this.waiting === null) return;
    if (this.running) {
      const left_ms = this.running.started_ms + PATIENCE_MS - performance.now();
      if (left_ms > 0) {
        this.timer = setTimeout(() => this.next(), left_ms);
        return;
      }
      this.running.job.discard();
      this.running = null;
    }
    const link = this.waiting;
    const job = this.pool.run({ ask: "solve", link });
    if (!job) {
      this.timer = setTimeout(() => this.next(), PATIENCE_MS);
      return;
    }
    this.waiting = null;
    const running = { job, started_ms: performance.now() };
    this.running = running;
    void job.done.then((outcome) => {
      if (this.running !== running) return;
      this.running = null;
      // An answer that is already out of date still shows while dragging; the state knows that it is.
      this.answered(link, outcome);
      this.next();
    });
  }
}
