// The inputs as a table: which keys have a field, in which group, and with what widget.
// Label, unit, range and help come from the core; what stands here is what only the page knows.

export type CraftBy = "size" | "acceleration" | "lightness";

/** The scenario as it was typed: one raw text a key, and how the craft is given. */
export interface Scenario {
  texts: Readonly<Record<string, string>>;
  craftBy: CraftBy;
}

export interface Control {
  key: string;
  group: "craft" | "ends" | "steering" | "baseline" | "about";
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

const BODIES = [
  ["mercury", "Mercury"],
  ["venus", "Venus"],
  ["earth", "Earth (Earth–Moon barycentre)"],
  ["mars", "Mars"],
  ["jupiter", "Jupiter"],
  ["saturn", "Saturn"],
  ["uranus", "Uranus"],
  ["neptune", "Neptune"],
  ["orbit", "a circle of given radius"],
] as const;

const STEERING = [
  ["fastest", "minimum time"],
  ["local", "locally optimal"],
  ["fixed", "constant cone angle"],
] as const;

const by = (way: CraftBy) => (scenario: Scenario) => scenario.craftBy === way;
const circle = { unit: "au", range: "0.2 to 40", help: "" };

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
  { key: "from", group: "ends", choices: BODIES },
  { key: "from_orbit", group: "ends", asked: ({ texts }) => texts.from === "orbit", label: "Radius of the start", ...circle },
  { key: "to", group: "ends", choices: BODIES },
  { key: "to_orbit", group: "ends", asked: ({ texts }) => texts.to === "orbit", label: "Radius of the target", ...circle },
  { key: "deadline_d", group: "ends" },
  { key: "steer", group: "steering", choices: STEERING },
  { key: "cone_deg", group: "steering", asked: ({ texts }) => texts.steer === "fixed" },
  { key: "isp_s", group: "baseline" },
  { key: "park_km", group: "baseline" },
  { key: "capture_km", group: "baseline" },
  { key: "stage_dry", group: "baseline" },
  { key: "title", group: "about", range: "Up to 80 characters", help: "Shown above the answer and carried by the link." },
];

/** Keys that have a field of their own, asked for or not. */
export const WITH_FIELD: ReadonlySet<string> = new Set(CONTROLS.map((control) => control.key));

export function isAsked(control: Control, scenario: Scenario): boolean {
  return control.asked?.(scenario) ?? true;
}
