// Raw texts become a scenario text that any decoder of form data reads back.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { compose } = await load("link");

test("commas stay readable, everything that would end a value is escaped", () => {
  assert.equal(compose([["from_orbit", "1.2,0,0"], ["title", "a & b = c"]]), "from_orbit=1.2,0,0&title=a+%26+b+%3D+c");
});

test("whatever was typed is read back unchanged", () => {
  for (const typed of ["+5", "100%", "%zz", "a+b", "=1", "#x", "<b>", "\u0007", "é ☀ 🛰", "a;b", "\t"])
    assert.equal(new URLSearchParams(compose([["title", typed]])).get("title"), typed);
});

test("half of a surrogate pair becomes the replacement character", () => {
  assert.equal(new URLSearchParams(compose([["title", "a\ud800b🛰"]])).get("title"), "a\ufffdb🛰");
});
