// Questions and workers: the newest question wins, and a worker that dies is replaced.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { Client } = await load("engine/client");
const { Pool } = await load("engine/pool");
const { answer } = await load("engine/core");
const tick = () => new Promise((resolve) => setTimeout(resolve, 0));

/** Workers that answer when the test says so. */
function workers() {
  const started = [];
  const start = () => {
    const worker = {
      asked: [],
      ended: false,
      onmessage: null,
      onerror: null,
      postMessage: (message) => message.ask === "open" || worker.asked.push(message),
      terminate: () => (worker.ended = true),
      reply: (outcome) => worker.onmessage({ data: { id: worker.asked.at(-1).id, outcome } }),
    };
    started.push(worker);
    return worker;
  };
  return { started, start };
}

const solved = (name) => ({ is: "solved", solved: { report: name, columns: new Float64Array() }, took_ms: 1 });
const fakeCore = () => ({});

test("while one question runs only the newest waits", async () => {
  const { started, start } = workers();
  const answers = [];
  const pool = new Pool(start, {}, 2);
  const client = new Client({}, pool, (link) => answers.push(link), fakeCore);
  assert.equal(started.length, 0);
  pool.warm();
  for (const link of ["a", "b", "c", "d"]) client.ask(link);
  assert.deepEqual(started.map((worker) => worker.asked.length), [1, 0]);
  started[0].reply(solved("a"));
  await tick();
  started[0].reply(solved("d"));
  await tick();
  assert.deepEqual(answers, ["a", "d"]);
  assert.deepEqual(started[0].asked.map((question) => question.link), ["a", "d"]);
});

test("a question that runs too long is dropped with its worker when a newer one waits", async () => {
  const { started, start } = workers();
  const answers = [];
  const client = new Client({}, new Pool(start, {}, 2), (link) => answers.push(link), fakeCore);
  client.ask("slow");
  await new Promise((resolve) => setTimeout(resolve, 450));
  client.ask("new");
  const asked = started.find((worker) => !worker.ended && worker.asked.length > 0);
  assert.equal(started[0].ended, true);
  assert.equal(asked.asked[0].link, "new");
  assert.equal(started.filter((worker) => !worker.ended).length, 2);
  asked.reply(solved("new"));
  await tick();
  assert.deepEqual(answers, ["new"]);
});

test("a crash is told with its link, the worker is replaced, and the next question is answered", async () => {
  const { started, start } = workers();
  const answers = [];
  const client = new Client({}, new Pool(start, {}, 1), (link, outcome) => answers.push([link, outcome.is]), fakeCore);
  client.ask("bad");
  started[0].reply({ is: "crashed", message: "unreachable" });
  await tick();
  assert.equal(started[0].ended, true);
  client.ask("good");
  started[1].reply(solved("good"));
  await tick();
  assert.deepEqual(answers, [["bad", "crashed"], ["good", "solved"]]);
});

test("a worker that fails without an answer counts as crashed", async () => {
  const { started, start } = workers();
  const answers = [];
  const client = new Client({}, new Pool(start, {}, 1), (link, outcome) => answers.push(outcome.is), fakeCore);
  client.ask("a");
  started[0].onerror({ message: "" });
  await tick();
  assert.deepEqual(answers, ["crashed"]);
  assert.equal(started.length, 2);
});

test("a trap on this thread leaves a fresh core behind", () => {
  let opened = 0;
  const trap = () => {
    throw new WebAssembly.RuntimeError("unreachable");
  };
  const open = () => ({ solve: opened++ === 0 ? trap : () => ({ report: "fine", columns: new Float64Array() }) });
  const client = new Client({}, new Pool(workers().start, {}, 1), () => {}, open);
  assert.deepEqual(client.askHere("x"), { is: "crashed", message: "unreachable" });
  assert.equal(client.askHere("x").is, "solved");
});

test("wrong input is told apart from a crash", () => {
  const errors = [{ key: "area_m2", value: "0", rule: "must be above 0" }];
  const refuse = () => {
    throw Object.assign(new Error("area_m2"), { detail: { kind: "input", errors } });
  };
  assert.deepEqual(answer({ solve: refuse }, { ask: "solve", link: "area_m2=0" }), { is: "refused", errors });
});
