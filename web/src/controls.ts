// The inputs as a table: which keys have a field, in which group, and with what widget.
// Label, unit, range and help come from the core; what stands here is what only the page knows.

export type CraftBy = "size" | "acceleration" | "lightness";

/** The scenario as it was typed: one raw text a key, and how the craft is given. */
export interface Scenario {
  texts: Readonly<Record<string, string>>;
  craftBy: CraftBy;
  /** Fields without a meaning here that a link set all the same: shown, so that nothing a link says is hidden. */
  pinned: ReadonlySet<string>;
}

export interface Control {
  key: string;
  group: "craft" | "ends" | "steering" | "baseline" | "about" | "departures";
  /** Part of a list: the key that carries the list in the link, and the part's name in the core's messages. */
  piece?: { key: ListKey; name: string };
  /** Kind of text field; a number if left out. */
  kind?: "date" | "text";
  /** Fixed choices instead of a text field: value and words. */
  choices?: readonly (readonly [string, string])[];
  /** Ends of a logarithmic slider beside the field. */
  slider?: readonly [number, number];
  /** Whether the field is there at all; always if left out. */
  asked?: (scenario: Scenario) => boolean;
  /** Words instead of the core's. */
  label?: string;
  unit?: string;
  range?: string;
  help?: string;
  /** What an empty field stands for. */
  standing?: string;
}

/** Lightness number: a field of the page, converted to `ac_mm_s2` for the link. */
export const LIGHTNESS = "lightness";

export const GROUPS = [
  ["craft", "Craft"],
  ["ends", "From – to"],
  ["steering", "Steering"],
  ["baseline", "Impulsive baseline"],
  ["about", "Title"],
] as const;

/** Keys whose value is a list, each part with a field of its own. */
export const ORBIT_KEYS = ["from_orbit", "to_orbit"] as const;
export const LIST_KEYS = [...ORBIT_KEYS, "span", "ac_range", "area_range"] as const;
export type OrbitKey = (typeof ORBIT_KEYS)[number];
export type ListKey = (typeof LIST_KEYS)[number];

interface Element {
  name: string;
  label: string;
  unit: string;
  range: string;
  help: string;
  /** What stands for the element when the field is left empty; the first has to be given. */
  default: string;
}

/** Elements in the order in which the link lists them; names as the core's messages use them. */
export const ELEMENTS: readonly Element[] = [
  { name: "a_au", label: "Semi-major axis", unit: "au", range: "0.2 to 40", help: "", default: "" },
  { name: "e", label: "Eccentricity", unit: "", range: "0 to 0.99", help: "", default: "0" },
  { name: "i_deg", label: "Inclination", unit: "deg", range: "0 to 180", help: "To the ecliptic of J2000.", default: "0" },
  { name: "node_deg", label: "Ascending node", unit: "deg", range: "−360 to 360", help: "", default: "0" },
  { name: "arg_peri_deg", label: "Argument of perihelion", unit: "deg", range: "−360 to 360", help: "From the node.", default: "0" },
  { name: "mean_anomaly_deg", label: "Mean anomaly", unit: "deg", range: "−360 to 360", help: "At the epoch.", default: "0" },
  { name: "epoch_jd_tdb", label: "Epoch", unit: "JD", range: "", help: "Julian date, TDB; left out: J2000, 2451545.", default: "2451545" },
];

/** The field of one part of a list. */
export const pieceKey = (list: ListKey, name: string): string => `${list}_${name}`;

const BODIES = [
  ["mercury", "Mercury"],
  ["venus", "Venus"],
  ["earth", "Earth (Earth–Moon barycentre)"],
  ["mars", "Mars"],
  ["jupiter", "Jupiter"],
  ["saturn", "Saturn"],
  ["uranus", "Uranus"],
  ["neptune", "Neptune"],
  ["orbit", "an orbit of your own"],
] as const;

const GEOMETRIES = [
  ["coplanar", "circles in one plane"],
  ["spatial", "orbits as they are, dated or not"],
] as const;

const ARRIVALS = [
  ["orbit", "match its orbit"],
  ["rendezvous", "meet the body"],
] as const;

const STEERING = [
  ["fastest", "minimum time"],
  ["local", "locally optimal"],
  ["fixed", "constant cone angle"],
] as const;

const by = (way: CraftBy) => (scenario: Scenario) => scenario.craftBy === way;
const inSpace = ({ texts }: Scenario) => texts.geometry === "spatial";
/** In space nothing else is flown. */
const isFastest = (scenario: Scenario) => inSpace(scenario) || scenario.texts.steer === "fastest";
const onCircles = (scenario: Scenario) => !inSpace(scenario);

/** One field for each element: a circle needs but its radius, and only a dated flight asks where the body is. */
function elements(key: OrbitKey, end: "from" | "to"): Control[] {
  const given = ({ texts }: Scenario) => texts[end] === "orbit";
  return ELEMENTS.map(({ name, label, unit, range, help, default: standing }, i) => ({
    key: pieceKey(key, name),
    group: "ends",
    piece: { key, name },
    label,
    unit,
    range,
    help,
    standing,
    asked: (scenario) => given(scenario) && (i === 0 || inSpace(scenario)) && (i < 5 || !!scenario.texts.depart),
  }));
}

/** The study of departure dates: its span, its step, and the sails of the map. */
function departures(): Control[] {
  const piece = (key: ListKey, name: string, rest: Partial<Control>): Control => ({
    key: pieceKey(key, name),
    group: "departures",
    piece: { key, name },
    asked: inSpace,
    range: "",
    help: "",
    ...rest,
  });
  const sails = (key: ListKey, what: string, unit: string) => [
    piece(key, "first", { label: `Smallest ${what}`, unit }),
    piece(key, "last", { label: `Largest ${what}`, unit }),
    piece(key, "count", { label: "How many" }),
  ];
  return [
    piece("span", "first", { label: "First", kind: "date" }),
    piece("span", "last", { label: "Last", kind: "date" }),
    { key: "step_d", group: "departures", asked: inSpace, label: "Step", range: "", help: "" },
    ...sails("ac_range", "acceleration", "mm/s²"),
    ...sails("area_range", "area", "m²"),
  ];
}

export const CONTROLS: readonly Control[] = [
  { key: "area_m2", group: "craft", slider: [10, 1e6], asked: by("size"), help: "" },
  { key: "mass_kg", group: "craft", slider: [1, 1e5], asked: by("size"), help: "" },
  { key: "ac_mm_s2", group: "craft", slider: [0.05, 6], asked: by("acceleration"), help: "Of the sail facing the Sun at 1 au. Checked from 0.05 to 6." },
  {
    key: LIGHTNESS,
    group: "craft",
    slider: [0.01, 1],
    asked: by("lightness"),
    label: "Lightness number",
    unit: "",
    range: "0.0017 to 3.37",
    help: "Characteristic acceleration over the Sun's gravity at 1 au; the link carries the acceleration.",
  },
  { key: "assembly_g_m2", group: "craft", asked: by("size") },
  { key: "geometry", group: "ends", choices: GEOMETRIES },
  { key: "from", group: "ends", choices: BODIES },
  ...elements("from_orbit", "from"),
  { key: "to", group: "ends", choices: BODIES },
  ...elements("to_orbit", "to"),
  { key: "arrive", group: "ends", choices: ARRIVALS, asked: inSpace },
  {
    key: "depart",
    group: "ends",
    kind: "date",
    asked: inSpace,
    range: "YYYY-MM-DD, 1800 to 2050",
    help: "0 h TDB of that day, about 69 s ahead of UTC. Left out: the best departure point, at no date.",
  },
  { key: "vinf_km_s", group: "ends", asked: isFastest },
  { key: "vinf_arrive_km_s", group: "ends", asked: isFastest },
  { key: "deadline_d", group: "ends" },
  { key: "steer", group: "steering", choices: STEERING, asked: onCircles },
  { key: "cone_deg", group: "steering", asked: (scenario) => onCircles(scenario) && scenario.texts.steer === "fixed" },
  { key: "isp_s", group: "baseline" },
  { key: "park_km", group: "baseline" },
  { key: "capture_km", group: "baseline" },
  { key: "stage_dry", group: "baseline" },
  ...departures(),
  { key: "title", group: "about", kind: "text", range: "Up to 80 characters", help: "Shown above the answer and carried by the link." },
];

/** Keys that have a field of their own, asked for or not. */
export const WITH_FIELD: ReadonlySet<string> = new Set([...CONTROLS.map((control) => control.key), ...LIST_KEYS]);

export function isAsked(control: Control, scenario: Scenario): boolean {
  return scenario.pinned.has(control.key) || (control.asked?.(scenario) ?? true);
}
