// A worker: opens the core once, then answers one question after the other.
import { answer, openCore, type Core } from "./core";
import type { Reply, Request } from "./protocol";

let core: Core | undefined;

self.onmessage = (event: MessageEvent<Request>) => {
  const request = event.data;
  if (request.ask === "open") {
    core = openCore(request.module);
    return;
  }
  const outcome = core ? answer(core, request) : ({ is: "crashed", message: "the core did not open" } as const);
  const reply: Reply = { id: request.id, outcome };
  self.postMessage(reply, outcome.is === "solved" ? { transfer: [outcome.solved.columns.buffer] } : {});
};
