// Values at a moment, from packed columns.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { Histories } = await load("engine/histories");
// A jump of the cone angle at day 2 is two samples with the same time; the turn rate has no value there.
const flight = new Histories(
  ["t_d", "cone_deg", "turn_rate_deg_d"],
  Float64Array.of(0, 1, 2, 2, 4, 10, 20, 30, 70, 60, 1, 1, Number.NaN, Number.NaN, 3),
);

test("values between samples lie on the straight line", () => {
  assert.equal(flight.at("cone_deg", 0.5), 15);
  assert.equal(flight.at("cone_deg", 3), 65);
});

test("a jump is a jump: the value after it holds from its time on", () => {
  assert.equal(flight.at("cone_deg", 2), 70);
  assert.ok(Math.abs(flight.at("cone_deg", 1.999) - 29.99) < 1e-9);
});

test("beside a missing value the one that exists is shown", () => {
  assert.equal(flight.at("turn_rate_deg_d", 1.5), 1);
  assert.equal(flight.at("turn_rate_deg_d", 3), 3);
});

test("outside the flight the ends hold, and an empty flight has no values", () => {
  assert.equal(flight.at("cone_deg", 9), 60);
  assert.ok(Number.isNaN(new Histories(["t_d"], new Float64Array()).at("t_d", 1)));
});

test("the clock angle goes the short way round", () => {
  const clock = new Histories(["t_d", "clock_deg"], Float64Array.of(0, 1, 2, 170, -170, -160));
  assert.equal(clock.at("clock_deg", 0.25), 175);
  assert.equal(clock.at("clock_deg", 0.75), -175);
  assert.equal(clock.at("clock_deg", 1.5), -165);
});

test("a column without a value is told apart", () => {
  assert.equal(flight.has("turn_rate_deg_d"), true);
  assert.equal(new Histories(["t_d", "film_temp_k"], Float64Array.of(0, 1, Number.NaN, Number.NaN)).has("film_temp_k"), false);
});

test("samples for a table are spread from the first to the last", () => {
  assert.deepEqual(flight.sampled(3), [0, 2, 4]);
  assert.deepEqual(flight.sampled(40), [0, 1, 2, 3, 4]);
});
