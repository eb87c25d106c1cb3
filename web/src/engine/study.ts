// A study run over a pool of workers. Its items are the same however many workers there are, and so is the result.
import { Cell } from "../cell";
import type { Job, Pool } from "./pool";
import type { StudyItem, StudyName, StudyPoint } from "./protocol";
import type { LinkError } from "./report";

/** An item whose worker crashed is tried once more. */
const TRIES = 2;

export interface Progress {
  is: "running" | "stopped" | "finished" | "refused";
  done: number;
  items: number;
  /** Estimate, s; null before the first item and when nothing runs. */
  left_s: number | null;
  /** Items given up after crashes. */
  lost: number;
  errors: LinkError[];
}

export interface Plan {
  name: StudyName;
  /** Canonical, with the study's keys. */
  link: string;
  items: StudyItem[];
}

interface Task {
  item: StudyItem;
  points: StudyPoint[] | null;
  tries: number;
  job: Job | null;
}

export class StudyRun {
  readonly progress: Cell<Progress>;
  private tasks: Task[];
  /** Whether the items to evaluate again have joined. */
  private mended = false;
  private is: Progress["is"] = "stopped";
  private errors: LinkError[] = [];
  private started_ms = 0;
  private doneAtStart = 0;

  constructor(
    readonly plan: Plan,
    private readonly pool: Pick<Pool, "run">,
    /** Items to evaluate again, given all points of the first evaluation. */
    private readonly mend: (points: StudyPoint[]) => StudyItem[],
    private readonly now_ms: () => number = () => performance.now(),
  ) {
    this.tasks = plan.items.map(fresh);
    this.progress = new Cell(this.told());
  }

  /** Starts, or goes on where it was stopped. */
  start(): void {
    if (this.is !== "stopped") return;
    this.is = "running";
    this.started_ms = this.now_ms();
    this.doneAtStart = this.done();
    this.next();
  }

  /** Ends what runs; what is there stays. */
  stop(): void {
    if (this.is !== "running") return;
    this.end("stopped");
  }

  /** What is there so far, in the order of the items. */
  points(): StudyPoint[] {
    return this.tasks.flatMap((task) => task.points ?? []);
  }

  private end(is: Progress["is"]): void {
    for (const task of this.tasks) {
      if (!task.job) continue;
      task.job.discard();
      task.job = null;
      task.tries--;
    }
    this.is = is;
    this.progress.set(this.told());
  }

  private next(): void {
    for (const task of this.tasks) {
      if (task.points || task.job || task.tries >= TRIES) continue;
      const job = this.pool.run({ ask: "study", name: this.plan.name, link: this.plan.link, item: task.item });
      if (!job) break;
      task.tries++;
      task.job = job;
      void job.done.then((outcome) => {
        if (task.job !== job) return;
        task.job = null;
        if (outcome.is === "points") task.points = outcome.points;
        if (outcome.is === "refused") {
          this.errors = outcome.errors;
          this.end("refused");
        } else this.next();
      });
    }
    if (this.tasks.every((task) => task.points || (!task.job && task.tries >= TRIES))) {
      const more = this.mended ? [] : this.mend(this.points());
      this.mended = true;
      this.tasks = [...this.tasks, ...more.map(fresh)];
      if (more.length > 0) return this.next();
      this.is = "finished";
    }
    this.progress.set(this.told());
  }

  private done(): number {
    return this.tasks.filter((task) => task.points).length;
  }

  private told(): Progress {
    const [done, items] = [this.done(), this.tasks.length];
    const since = done - this.doneAtStart;
    const took_s = (this.now_ms() - this.started_ms) / 1000;
    return {
      is: this.is,
      done,
      items,
      left_s: this.is === "running" && since > 0 ? (took_s / since) * (items - done) : null,
      lost: this.tasks.filter((task) => !task.points && !task.job && task.tries >= TRIES).length,
      errors: this.errors,
    };
  }
}

function fresh(item: StudyItem): Task {
  return { item, points: null, tries: 0, job: null };
}
