// A few workers kept warm. One that crashed or was discarded is replaced at once.
import type { Outcome, Question, Reply, Request } from "./protocol";

/** The part of a Worker that the pool uses. */
export interface WorkerLike {
  postMessage(message: Request): void;
  terminate(): void;
  onmessage: ((event: MessageEvent<Reply>) => void) | null;
  onerror: ((event: ErrorEvent) => void) | null;
}

export interface Job {
  done: Promise<Outcome>;
  /** Ends the worker; `done` then never settles. */
  discard(): void;
}

interface Seat {
  worker: WorkerLike;
  settle: ((outcome: Outcome) => void) | null;
}

export class Pool {
  private seats: Seat[] = [];
  private lastId = 0;

  constructor(
    private readonly start: () => WorkerLike,
    private readonly module: WebAssembly.Module,
    private readonly size: number,
  ) {}

  /** Starts the workers, if that has not happened yet. */
  warm(): void {
    if (this.seats.length === 0) this.seats = Array.from({ length: this.size }, () => this.open());
  }

  /** Puts a question to an idle worker; undefined when all are busy. */
  run(question: Question): Job | undefined {
    this.warm();
    const seat = this.seats.find((seat) => seat.settle === null);
    if (!seat) return undefined;
    const id = ++this.lastId;
    const done = new Promise<Outcome>((resolve) => {
      seat.settle = (outcome) => {
        seat.settle = null;
        resolve(outcome);
      };
    });
    seat.worker.onmessage = (event) => {
      if (event.data.id !== id) return;
      if (event.data.outcome.is === "crashed") this.replace(seat);
      seat.settle?.(event.data.outcome);
    };
    seat.worker.postMessage({ ...question, id });
    return {
      done,
      discard: () => {
        this.replace(seat);
        seat.settle = null;
      },
    };
  }

  private open(): Seat {
    const seat: Seat = { worker: this.start(), settle: null };
    this.greet(seat);
    return seat;
  }

  private replace(seat: Seat): void {
    seat.worker.onmessage = null;
    seat.worker.onerror = null;
    seat.worker.terminate();
    seat.worker = this.start();
    this.greet(seat);
  }

  private greet(seat: Seat): void {
    seat.worker.onerror = (event) => {
      // An idle worker that fails is left alone: replacing it would fail the same way for ever.
      const settle = seat.settle;
      if (!settle) return;
      this.replace(seat);
      settle({ is: "crashed", message: event.message || "the worker could not run" });
    };
    seat.worker.postMessage({ ask: "open", module: this.module });
  }
}
