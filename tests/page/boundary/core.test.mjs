// The core through the generated glue, as the page calls it: whatever is asked, it answers or says what is wrong.
import assert from "node:assert/strict";
import test from "node:test";
import { openCore } from "../support.mjs";

const core = await openCore();
const keys = core.link_keys();
const FREE = ["title"];

/** Errors of a text that must not be solved; each names key, value and rule, and solving it says the same. */
function refused(text) {
  const { link, errors } = core.check_link(text);
  assert.equal(link, null, `${text.slice(0, 80)} should be refused`);
  assert.ok(errors.length > 0);
  for (const error of errors) {
    assert.ok(error.key !== "" && error.rule.length > 10, JSON.stringify(error));
    assert.equal(typeof error.value, "string");
    assert.ok(error.value.length < 200 && error.key.length < 200, "a message stays short");
  }
  assert.throws(
    () => core.solve(text),
    (thrown) => {
      assert.ok(thrown instanceof Error && !(thrown instanceof WebAssembly.RuntimeError), String(thrown));
      assert.equal(thrown.detail.kind, "input");
      assert.deepEqual(thrown.detail.errors, errors);
      return true;
    },
  );
  return errors;
}

const keysOf = (errors) => errors.map((error) => error.key);

test("every key refuses empty text, words, NaN, infinity, 1e308 and its negative", () => {
  for (const { key } of keys.filter((info) => !FREE.includes(info.key)))
    for (const value of ["", "abc", "NaN", "nan", "inf", "Infinity", "-inf", "1e308", "-1e308", "%20", "0x10", "1,2,3x"])
      assert.ok(keysOf(refused(`${key}=${value}`)).length > 0, `${key}=${value}`);
});

test("every number refuses what lies just outside its range and names itself", () => {
  for (const { key, min, max } of keys.filter((info) => info.min !== null)) {
    const step = 1e-6 * Math.max(1, Math.abs(max));
    for (const value of [min - step, max + step]) {
      const pair = { area_m2: "&mass_kg=60", mass_kg: "&area_m2=6400" }[key] ?? "";
      assert.ok(keysOf(refused(`${key}=${value}${pair}`)).includes(key), `${key}=${value}`);
    }
  }
});

test("zero and negative numbers are refused where they mean nothing", () => {
  for (const key of ["area_m2", "mass_kg", "ac_mm_s2", "isp_s", "deadline_d"])
    for (const value of ["0", "-1", "-0"]) refused(`${key}=${value}`);
});

test("both ways of giving the craft, or half of one, are refused", () => {
  refused("area_m2=6400&mass_kg=60&ac_mm_s2=1");
  assert.ok(keysOf(refused("area_m2=6400")).some((key) => ["area_m2", "mass_kg"].includes(key)));
  assert.ok(keysOf(refused("mass_kg=60")).some((key) => ["area_m2", "mass_kg"].includes(key)));
});

test("unknown and repeated keys are named", () => {
  assert.deepEqual(keysOf(refused("colour=red")), ["colour"]);
  assert.deepEqual(keysOf(refused("to=venus&to=mars")), ["to"]);
  assert.deepEqual(keysOf(refused("v=2")), ["v"]);
});

test("combinations that are not solved are refused at the key to change", () => {
  assert.ok(keysOf(refused("cone_deg=20")).includes("cone_deg"));
  assert.ok(keysOf(refused("geometry=spatial&steer=local")).includes("steer"));
  assert.ok(keysOf(refused("to=orbit&to_orbit=1.2,0.1")).includes("to_orbit"));
  assert.ok(keysOf(refused("cone_max_deg=60&temp_max_k=500")).length > 0);
  assert.ok(keysOf(refused("arrive=rendezvous")).includes("arrive"));
  refused("to=orbit");
});

test("a fragment of one megabyte, broken escapes and control characters end as messages", () => {
  refused(`title=${"x".repeat(1_000_000)}`);
  refused("x".repeat(1_000_000));
  refused("&".repeat(1_000_000) + "to=nowhere");
  for (const text of ["to=%", "to=%zz", "to=%e2%28%a1", "%00=1", "title=a%00b", "title=a%0ab", "title=a%1bb", "title=%u2603"])
    core.check_link(text);
  for (const text of ["title=a%00b", "title=a%0ab", "title=a%1bb"]) assert.ok(keysOf(refused(text)).includes("title"), text);
});

test("markup and a leading = in the title are text like any other", () => {
  for (const title of ["<img src=x onerror=alert(1)>", "=HYPERLINK(1)", "</script><script>", "a & b", "100 %", "☀ é"]) {
    const { link, entries, errors } = core.check_link(new URLSearchParams({ title }).toString());
    assert.deepEqual(errors, []);
    assert.equal(new Map(entries).get("title"), title);
    assert.equal(new URLSearchParams(link).get("title"), title);
    assert.equal(new Map(core.check_link(link).entries).get("title"), title);
  }
});

test("full addresses, a leading #, raw and escaped commas mean the same", () => {
  const { link } = core.check_link("to=orbit&to_orbit=1.2,0,0");
  for (const text of ["#to=orbit&to_orbit=1.2,0,0", "to=orbit&to_orbit=1.2%2C0%2C0", "file:///page.html#to=orbit&to_orbit=1.2"])
    assert.equal(core.check_link(text).link, link, text);
});

test("what does not decode comes with the default scenario's entries", () => {
  const { decoded, entries } = core.check_link("to=nowhere");
  assert.equal(decoded, false);
  assert.deepEqual(entries, core.check_link("").entries);
});

test("the canonical link of a link is itself", () => {
  for (const text of ["", "to=venus", "ac_mm_s2=0.5&to=jupiter", "steer=fixed&cone_deg=-20&to=mercury", "park_km=none&capture_km=500"]) {
    const { link, errors } = core.check_link(text);
    assert.deepEqual(errors, [], text);
    assert.equal(core.check_link(link).link, link);
  }
  assert.equal(core.check_link("").link, core.default_link());
});

test("columns are as long as their names say and times never run back", () => {
  const { report, columns } = core.solve("");
  const names = core.column_names();
  assert.ok(columns instanceof Float64Array);
  assert.equal(columns.length % names.length, 0);
  const rows = columns.length / names.length;
  const times = columns.subarray(0, rows);
  assert.equal(names[0], "t_d");
  for (let i = 1; i < rows; i++) assert.ok(times[i] >= times[i - 1]);
  assert.ok(Math.abs(times[rows - 1] - report.flight.time_d) < 1e-9 * report.flight.time_d);
});

test("unknown values are null, never NaN or undefined", () => {
  const visit = (value, where) => {
    assert.notEqual(value, undefined, where);
    if (typeof value === "number") assert.ok(Number.isFinite(value), where);
    else if (value && typeof value === "object") for (const [key, inner] of Object.entries(value)) visit(inner, `${where}.${key}`);
  };
  for (const link of ["", "ac_mm_s2=1", "steer=local", "steer=fixed", "to=earth", "ac_mm_s2=0.05&to=neptune", "geometry=spatial&arrive=rendezvous&depart=2031-02-01&ac_mm_s2=1"]) visit(core.solve(link).report, link);
});

test("each example decodes and solves, and says that it is invented", () => {
  for (const { name, link, about } of core.examples()) {
    assert.deepEqual(core.check_link(link).errors, [], name);
    assert.ok(core.solve(link).report.flight.time_d > 0, name);
    assert.ok(about.length > 0);
  }
});

test("published checks all pass in WebAssembly", () => {
  const rows = core.published_checks();
  assert.ok(rows.length >= 5);
  for (const row of rows) assert.ok(row.passed, `${row.name}: expected ${row.expected}, found ${row.found}`);
});

test("figures describe themselves in words and refuse other names", () => {
  const { report, columns } = core.solve("");
  const figures = new core.Figures(report, columns);
  assert.match(figures.describe("orbit"), /Mars/);
  assert.match(figures.describe("histories"), /[Cc]one/);
  assert.throws(() => figures.describe("gauge"), /gauge/);
  assert.throws(() => new core.Figures({ link: 3 }, columns), Error);
  assert.throws(() => new core.Figures(report, columns.subarray(1)), /columns/);
  figures.free();
});
