// What is typed, and what of it reaches the core.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { State } = await load("state");
// A small set of defaults in the core's form: every key with its value, empty where there is none.
const DEFAULTS = {
  v: "1", title: "", area_m2: "6400", mass_kg: "60", ac_mm_s2: "", film: "ideal", from: "earth", to: "mars",
  from_orbit: "", to_orbit: "", steer: "fastest", cone_deg: "", isp_s: "320", assembly_g_m2: "",
};
// Sun's gravity at 1 au: 1.32712440018e20 m^3/s^2 over (149597870700 m)^2.
const fresh = () => new State(DEFAULTS, "light", 5.930084);
const sent = (state) => new URLSearchParams(state.text());

test("a required field left empty is sent, for the core to refuse", () => {
  const state = fresh();
  state.edit("isp_s", "");
  assert.equal(sent(state).get("isp_s"), "");
});

test("an optional field left empty is left out", () => {
  assert.equal(sent(fresh()).has("assembly_g_m2"), false);
  assert.equal(sent(fresh()).has("title"), false);
});

test("only one way of giving the craft is sent, and the other texts are kept", () => {
  const state = fresh();
  state.edit("area_m2", "abc");
  state.giveCraftBy("acceleration");
  state.edit("ac_mm_s2", "1");
  assert.deepEqual([sent(state).get("area_m2"), sent(state).get("mass_kg"), sent(state).get("ac_mm_s2")], [null, null, "1"]);
  state.giveCraftBy("size");
  assert.deepEqual([sent(state).get("area_m2"), sent(state).get("ac_mm_s2")], ["abc", null]);
});

test("a lightness number is sent as the acceleration that it stands for", () => {
  const state = fresh();
  state.giveCraftBy("lightness");
  state.edit("lightness", "0.17");
  assert.ok(Math.abs(Number(sent(state).get("ac_mm_s2")) - 1.00811428) < 1e-9);
});

test("a lightness number that is none reaches the core as typed, and its error comes back to that field", () => {
  const state = fresh();
  state.giveCraftBy("lightness");
  state.edit("lightness", "fast");
  assert.equal(sent(state).get("ac_mm_s2"), "fast");
  state.verdict.set({ link: null, errors: [{ key: "ac_mm_s2", value: "fast", rule: "must be a number" }] });
  const control = state.controlOf("ac_mm_s2");
  assert.equal(control.key, "lightness");
  assert.equal(state.errorsAt(control).length, 1);
});

test("fields that are not asked for are not sent", () => {
  const state = fresh();
  state.edit("cone_deg", "20");
  state.edit("from_orbit", "1.2");
  assert.equal(sent(state).has("cone_deg"), false);
  state.edit("steer", "fixed");
  state.edit("from", "orbit");
  assert.deepEqual([sent(state).get("cone_deg"), sent(state).get("from_orbit")], ["20", "1.2"]);
});

test("a key without a field that a link set is sent, listed, and can be dropped", () => {
  const state = fresh();
  state.load({ decoded: true, link: null, entries: Object.entries({ ...DEFAULTS, film: "aluminised" }), errors: [] });
  assert.deepEqual(state.extras(), [["film", "aluminised"]]);
  assert.equal(sent(state).get("film"), "aluminised");
  state.dropExtra("film");
  assert.equal(sent(state).has("film"), false);
});

test("a link with an acceleration opens with that way of giving the craft", () => {
  const state = fresh();
  state.load({ decoded: true, link: "", entries: Object.entries({ ...DEFAULTS, area_m2: "", mass_kg: "", ac_mm_s2: "2" }), errors: [] });
  assert.equal(state.scenario.get().craftBy, "acceleration");
});
