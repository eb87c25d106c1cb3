// A study over workers: every item once, whatever their number and order; stopping, going on, crashes.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { StudyRun } = await load("engine/study");
const tick = () => new Promise((resolve) => setTimeout(resolve, 0));

/** A pool of so many seats whose jobs end when the test says so. */
function pool(seats) {
  const jobs = [];
  const run = ({ item }) => {
    if (jobs.filter((job) => job.open).length >= seats) return undefined;
    const job = { item, open: true };
    job.done = new Promise((resolve) => (job.end = (outcome) => ((job.open = false), resolve(outcome))));
    job.discard = () => ((job.open = false), (job.discarded = true));
    jobs.push(job);
    return job;
  };
  return { run, jobs, now: () => jobs.filter((job) => job.open) };
}

const plan = (count) => ({ name: "dates", link: "", items: Array.from({ length: count }, (_, i) => ({ i })) });
const points = ({ item }) => ({ is: "points", points: [{ of: item.i, mended: item.again ?? false }] });
const crash = { is: "crashed", message: "unreachable" };

/** Runs to the end; `pick` says which of the running jobs ends next. */
async function finish(run, workers, pick) {
  run.start();
  while (run.progress.get().is === "running") {
    const job = pick(workers.now());
    job.end(points(job));
    await tick();
  }
}

test("the number of workers and the order in which they end change nothing", async () => {
  const results = [];
  for (const [seats, pick] of [[1, (jobs) => jobs[0]], [2, (jobs) => jobs.at(-1)], [5, (jobs) => jobs[jobs.length >> 1]]]) {
    const workers = pool(seats);
    const run = new StudyRun(plan(7), workers, (found) => [{ i: found.length, again: true }]);
    await finish(run, workers, pick);
    assert.equal(workers.jobs.length, 8);
    assert.deepEqual(run.progress.get(), { is: "finished", done: 8, items: 8, left_s: null, lost: 0, errors: [] });
    results.push(run.points());
  }
  assert.deepEqual(results[0], results[1]);
  assert.deepEqual(results[0], results[2]);
});

test("items to evaluate again are asked for once, when all others are there", async () => {
  const asked = [];
  const workers = pool(2);
  const run = new StudyRun(plan(3), workers, (found) => (asked.push(found.length), []));
  await finish(run, workers, (jobs) => jobs[0]);
  assert.deepEqual(asked, [3]);
});

test("stopping ends what runs and keeps what is there; going on asks for the rest only", async () => {
  const workers = pool(2);
  const run = new StudyRun(plan(4), workers, () => []);
  run.start();
  workers.jobs[0].end(points(workers.jobs[0]));
  await tick();
  run.stop();
  assert.equal(workers.jobs.filter((job) => job.discarded).length, 2);
  assert.equal(run.progress.get().is, "stopped");
  assert.deepEqual(run.points().map((point) => point.of), [0]);
  await finish(run, workers, (jobs) => jobs[0]);
  assert.deepEqual(run.points().map((point) => point.of), [0, 1, 2, 3]);
  assert.deepEqual(workers.jobs.slice(3).map((job) => job.item.i), [1, 2, 3]);
});

test("an item is tried again after a crash, and given up after another", async () => {
  const workers = pool(1);
  const run = new StudyRun(plan(2), workers, () => []);
  run.start();
  for (const outcome of [crash, crash, null]) {
    const [job] = workers.now();
    job.end(outcome ?? points(job));
    await tick();
  }
  const { is, done, lost } = run.progress.get();
  assert.deepEqual([is, done, lost], ["finished", 1, 1]);
  assert.deepEqual(run.points().map((point) => point.of), [1]);
});

test("a refusal ends the study with its reasons", async () => {
  const errors = [{ key: "arrive", value: "orbit", rule: "is not studied" }];
  const workers = pool(2);
  const run = new StudyRun(plan(5), workers, () => []);
  run.start();
  workers.jobs[0].end({ is: "refused", errors });
  await tick();
  assert.equal(run.progress.get().is, "refused");
  assert.deepEqual(run.progress.get().errors, errors);
  assert.equal(workers.now().length, 0);
});

test("time left is what the items so far took, scaled to the rest", async () => {
  let now_ms = 0;
  const workers = pool(1);
  const run = new StudyRun(plan(4), workers, () => [], () => now_ms);
  run.start();
  assert.equal(run.progress.get().left_s, null);
  now_ms = 3000;
  workers.jobs[0].end(points(workers.jobs[0]));
  await tick();
  assert.equal(run.progress.get().left_s, 9);
});
