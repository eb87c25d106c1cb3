// What is typed, and what of it reaches the core.
import assert from "node:assert/strict";
import test from "node:test";
import { load } from "../support.mjs";

const { State } = await load("state");
const { CONTROLS, isAsked } = await load("controls");
// A small set of defaults in the core's form: every key with its value, empty where there is none.
const DEFAULTS = {
  v: "1", title: "", area_m2: "6400", mass_kg: "60", ac_mm_s2: "", film: "ideal", from: "earth", to: "mars",
  from_orbit: "", to_orbit: "", geometry: "coplanar", depart: "", vinf_km_s: "0", arrive: "orbit", steer: "fastest", cone_deg: "",
  isp_s: "320", assembly_g_m2: "", span: "2030-01-01,2034-01-01", step_d: "10", ac_range: "0.5,3,20", area_range: "",
};
// Sun's gravity at 1 au: 1.32712440018e20 m^3/s^2 over (149597870700 m)^2.
const fresh = () => new State(DEFAULTS, "light", 5.930084);
const sent = (state) => new URLSearchParams(state.text());
/** A state that opened a link with these keys besides the defaults. */
const opened = (keys) => {
  const state = fresh();
  state.load({ decoded: true, link: null, entries: Object.entries({ ...DEFAULTS, ...keys }), errors: [] });
  return state;
};
const shown = (state) => CONTROLS.filter((control) => isAsked(control, state.scenario.get())).map((control) => control.key);

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
  const control = state.controlOf({ key: "ac_mm_s2", value: "fast", rule: "must be a number" });
  assert.equal(control.key, "lightness");
  assert.equal(state.errorsAt(control).length, 1);
});

test("fields that are not asked for are not sent", () => {
  const state = fresh();
  state.edit("cone_deg", "20");
  state.edit("from_orbit_a_au", "1.2");
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

test("an orbit's elements go into one list, empty ones as what they stand for, trailing ones left out", () => {
  const state = opened({ geometry: "spatial", to: "orbit", to_orbit: "2.1" });
  assert.equal(sent(state).get("to_orbit"), "2.1");
  state.edit("to_orbit_i_deg", "12");
  assert.equal(sent(state).get("to_orbit"), "2.1,0,12");
  state.edit("to_orbit_e", "0.2");
  assert.equal(sent(state).get("to_orbit"), "2.1,0.2,12");
  state.edit("to_orbit_a_au", "");
  assert.equal(sent(state).get("to_orbit"), ",0.2,12");
});

test("a comma typed into one element cannot become another element", () => {
  const state = opened({ geometry: "spatial", to: "orbit", to_orbit: "2.1" });
  state.edit("to_orbit_a_au", "2,1");
  assert.equal(sent(state).get("to_orbit").split(",").length, 1);
  assert.equal(state.scenario.get().texts.to_orbit_a_au, "2,1");
});

test("an error of a list comes back to the element that it names", () => {
  const state = opened({ geometry: "spatial", to: "orbit", to_orbit: "2.1,0.2,12" });
  const field = (rule) => state.controlOf({ key: "to_orbit", value: "", rule })?.key;
  assert.equal(field("e must be 0 to 0.99"), "to_orbit_e");
  assert.equal(field("i_deg must be 0 to 180"), "to_orbit_i_deg");
  assert.equal(field("epoch_jd_tdb (a full Julian date such as 2451545) must be 2300000 to 2600000"), "to_orbit_a_au");
  state.edit("depart", "2031-02-01");
  assert.equal(field("epoch_jd_tdb (a full Julian date such as 2451545) must be 2300000 to 2600000"), "to_orbit_epoch_jd_tdb");
  assert.equal(field("dips into the Sun"), "to_orbit_a_au");
});

test("between circles only the radius is asked for and sent, and the other elements are kept", () => {
  const state = opened({ geometry: "spatial", to: "orbit", to_orbit: "2.1,0.2,12" });
  state.edit("geometry", "coplanar");
  assert.equal(sent(state).get("to_orbit"), "2.1");
  assert.deepEqual(shown(state).filter((key) => key.startsWith("to_orbit")), ["to_orbit_a_au"]);
  state.edit("geometry", "spatial");
  assert.equal(sent(state).get("to_orbit"), "2.1,0.2,12");
});

test("where circles have no use for a date it is not sent, and is there again in space", () => {
  const state = opened({ geometry: "spatial", arrive: "rendezvous", depart: "2031-02-01" });
  state.edit("depart", "2031-02-3");
  state.edit("geometry", "coplanar");
  assert.deepEqual([sent(state).get("depart"), sent(state).get("arrive")], [null, null]);
  state.edit("geometry", "spatial");
  assert.deepEqual([sent(state).get("depart"), sent(state).get("arrive")], ["2031-02-3", "rendezvous"]);
});

test("what a link sets without a meaning is shown and sent, until it is emptied or has a meaning", () => {
  const state = opened({ depart: "2031-02-01", to: "orbit", to_orbit: "2.1,0.2" });
  assert.ok(shown(state).includes("depart") && shown(state).includes("to_orbit_e"));
  assert.equal(sent(state).get("depart"), "2031-02-01");
  assert.equal(sent(state).get("to_orbit"), "2.1,0.2");
  state.edit("depart", "");
  assert.equal(shown(state).includes("depart"), false);
  state.edit("geometry", "spatial");
  state.edit("geometry", "coplanar");
  assert.equal(shown(state).includes("to_orbit_e"), false);
});

test("an orbit of one's own starts from the one it takes the place of", () => {
  const state = opened({ geometry: "spatial" });
  const end = { name: "Mars", semi_major_axis_au: 1.52371034, eccentricity: 0.0934, inclination_deg: 1.8497, node_deg: 49.5, arg_peri_deg: -73.5, mean_anomaly_deg: 19.4, period_d: 687 };
  state.shown.set({ link: "", solved: { report: { ends: { to: end }, flight: { depart: "2000-01-02T00:00:00" } } } });
  state.edit("depart", "2000-01-02");
  state.edit("to", "orbit");
  // 2000-01-02 0 h is Julian date 2451545.5: J2000, 2451545.0, is noon of the day before.
  assert.equal(sent(state).get("to_orbit"), "1.52371,0.0934,1.8497,49.5,-73.5,19.4,2451545.5");
});

test("the span of a study is one list; emptied, it reaches the core as empty", () => {
  const state = opened({ geometry: "spatial" });
  assert.equal(sent(state).get("span"), "2030-01-01,2034-01-01");
  state.edit("span_last", "2031-01-01");
  assert.equal(sent(state).get("span"), "2030-01-01,2031-01-01");
  state.edit("span_first", "");
  state.edit("span_last", "");
  assert.equal(sent(state).get("span"), "");
  assert.equal(sent(state).has("area_range"), false);
});

test("opening a flight of a study keeps the study's fields", () => {
  const state = opened({ geometry: "spatial", span: "2031-01-01,2032-01-01" });
  const flight = { decoded: true, link: null, entries: Object.entries({ ...DEFAULTS, geometry: "spatial", depart: "2031-05-01" }), errors: [] };
  state.load(flight, ["departures"]);
  assert.equal(sent(state).get("span"), "2031-01-01,2032-01-01");
  assert.equal(sent(state).get("depart"), "2031-05-01");
});
