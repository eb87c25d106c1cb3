// Numbers and typed text as people read them.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { fixed, significant, typed, withUnit, NONE } = await load("format");

test("thousands are set apart and the minus is a minus", () => {
  assert.equal(fixed(1234567.891, 1), "1\u202f234\u202f567.9");
  assert.equal(fixed(-0.5, 2), "\u22120.50");
  assert.equal(fixed(999, 0), "999");
});

test("what is unknown is a dash, with no unit behind it", () => {
  for (const value of [null, undefined, Number.NaN, Number.POSITIVE_INFINITY]) {
    assert.equal(fixed(value, 2), NONE);
    assert.equal(significant(value, 2), NONE);
  }
  assert.equal(withUnit(fixed(null, 1), "km"), NONE);
});

test("small and large numbers become powers of ten", () => {
  assert.equal(significant(2.04e-13, 2), "2.0 × 10⁻¹³");
  assert.equal(significant(1.32712440018e11, 12), "1.32712440018 × 10¹¹");
  assert.equal(significant(0.0012, 2), "0.0012");
  assert.equal(significant(12345, 2), "12\u202f000");
  assert.equal(significant(0, 2), "0.0");
});

test("control characters in what was typed are shown as marks, long text is cut", () => {
  assert.equal(typed("a\u0000b\u001bc"), "a\ufffdb\ufffdc");
  assert.equal(typed("x".repeat(1000)).length, 58);
});
