// Studies through the generated glue: fixed items, any order, and rows that are the flights they link to.
import assert from "node:assert/strict";
import test from "node:test";
import { openCore } from "../support.mjs";

const core = await openCore();
const LINK = "geometry=spatial&arrive=rendezvous&ac_mm_s2=1&span=2031-01-01,2031-07-01&step_d=15&ac_range=0.8,1.6,3";

/** All points of a study, its items evaluated in the order given. */
function evaluated(name, link, order) {
  const { items } = core.study_items(name, link);
  const first = order(items).flatMap((item) => core.study_evaluate(name, link, item));
  const mends = core.study_mends(name, link, first).flatMap((item) => core.study_evaluate(name, link, item));
  return [...first, ...mends];
}
const forwards = (items) => items;
const backwards = (items) => [...items].reverse();

const report = core.study_report("dates", LINK, evaluated("dates", LINK, forwards));

test("the order of items changes no digit of a study", () => {
  const link = LINK.replace("2031-07-01", "2031-02-15");
  assert.ok(core.study_items("map", link).items.length >= 3);
  assert.deepEqual(
    core.study_report("map", link, evaluated("map", link, forwards)),
    core.study_report("map", link, evaluated("map", link, backwards)),
  );
});

test("every row is the flight that its link opens, to 1e-8", () => {
  assert.equal(report.rows.length, 13);
  for (const row of report.rows) {
    assert.equal(row.status, "converged", row.depart);
    const { flight } = core.solve(row.link).report;
    assert.equal(flight.depart.slice(0, 10), row.depart);
    assert.ok(Math.abs(flight.time_d / row.time_d - 1) < 1e-8, `${row.depart}: ${flight.time_d} and ${row.time_d}`);
  }
});

test("leaving later never arrives earlier", () => {
  for (const row of report.rows) assert.equal(row.law, "kept", row.depart);
  const arrivals = report.rows.map((row) => row.arrive);
  assert.deepEqual([...arrivals].sort(), arrivals);
});

test("a study that still runs has a report of what is there", () => {
  const [item] = core.study_items("dates", LINK).items;
  const points = core.study_evaluate("dates", LINK, item);
  const partial = core.study_report("dates", LINK, points);
  assert.equal(partial.rows.length, points.length);
  assert.equal(core.study_report("dates", LINK, []).rows.length, 0);
});

test("what cannot be studied is refused by key, as a flight is", () => {
  for (const [link, key] of [["", "geometry"], ["geometry=spatial", "arrive"], ["span=2031-01-01", "span"], ["step_d=0", "step_d"], [`${LINK}&area_range=1,2,3`, "area_range"]])
    assert.throws(
      () => core.study_items("map", link),
      (thrown) => thrown.detail?.kind === "input" && thrown.detail.errors.some((error) => error.key === key),
      link,
    );
  assert.throws(() => core.study_items("tides", LINK), (thrown) => thrown.detail.errors[0].key === "study");
});
