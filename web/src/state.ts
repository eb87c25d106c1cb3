// The page's one state: what was typed, what the core says about it, and what is shown.
import { Cell } from "./cell";
import {
  CONTROLS,
  ELEMENTS,
  LIGHTNESS,
  LIST_KEYS,
  WITH_FIELD,
  isAsked,
  pieceKey,
  type Control,
  type CraftBy,
  type ListKey,
  type OrbitKey,
  type Scenario,
} from "./controls";
import type { Checked, Theme } from "./engine/core";
import type { Histories } from "./engine/histories";
import type { Solved } from "./engine/protocol";
import type { End, LinkError } from "./engine/report";
import { compose } from "./link";

/** Stands in for a comma typed into one element's field, where it would end the value: refused by any reader. */
const NO_COMMA = "\u201a";

/** Julian date of the day 1970-01-01, 0 h. */
const UNIX_EPOCH_JD = 2440587.5;

/** What the core says about the scenario as typed. */
export interface Verdict {
  link: string | null;
  errors: LinkError[];
}

/** The last good result. */
export interface Shown {
  link: string;
  solved: Solved;
  histories: Histories;
}

/** A solve that ended in a crash. */
export interface Trouble {
  link: string;
  message: string;
}

/** A link that the page was opened with and could not use. */
export interface BrokenLink {
  text: string;
  errors: LinkError[];
}

export class State {
  readonly scenario: Cell<Scenario>;
  readonly verdict = new Cell<Verdict>({ link: null, errors: [] });
  readonly shown = new Cell<Shown | null>(null);
  readonly trouble = new Cell<Trouble | null>(null);
  readonly broken = new Cell<BrokenLink | null>(null);
  readonly cursor_d = new Cell(0);
  readonly theme: Cell<Theme>;
  /** The defaults as the fields hold them. */
  private readonly untouched: Readonly<Record<string, string>>;
  constructor(
    private readonly defaults: Readonly<Record<string, string>>,
    theme: Theme,
    /** From the core; converts the lightness number. */
    private readonly sunGravity_mm_s2: number,
  ) {
    this.untouched = fieldTexts(defaults);
    this.scenario = new Cell<Scenario>({ texts: this.untouched, craftBy: "size", pinned: new Set() });
    this.theme = new Cell(theme);
  }

  /** Takes over every key's value from the core, as it does when a link opens; fields of `kept` groups stay. */
  load(checked: Checked, kept: readonly Control["group"][] = []): void {
    const texts = fieldTexts(Object.fromEntries(checked.entries));
    const before = this.scenario.get().texts;
    for (const { key, group } of CONTROLS) if (kept.includes(group)) texts[key] = before[key] ?? "";
    const craftBy = texts.ac_mm_s2 ? "acceleration" : "size";
    const bare = { texts, craftBy, pinned: new Set<string>() } as const;
    const isSet = (control: Control) => texts[control.key] && texts[control.key] !== this.untouchedText(control);
    const pinned = CONTROLS.filter((control) => !isAsked(control, bare) && isSet(control)).map((control) => control.key);
    this.scenario.set({ texts, craftBy, pinned: new Set(pinned) });
  }

  edit(key: string, text: string): void {
    const { texts, craftBy, pinned } = this.scenario.get();
    if (texts[key] === text) return;
    const next = { ...texts, [key]: text };
    // An orbit that has no size yet starts from the one it takes the place of.
    if ((key === "from" || key === "to") && text === "orbit" && !texts[pieceKey(`${key}_orbit`, "a_au")]) {
      const report = this.shown.get()?.solved.report;
      if (report) Object.assign(next, elementsOf(`${key}_orbit`, report.ends[key], report.flight.depart));
    }
    this.scenario.set({ texts: next, craftBy, pinned: this.stillPinned(pinned, { texts: next, craftBy }) });
  }

  /** A field stays shown against its meaning until it is emptied or gets a meaning. */
  private stillPinned(pinned: ReadonlySet<string>, { texts, craftBy }: Omit<Scenario, "pinned">): ReadonlySet<string> {
    if (pinned.size === 0) return pinned;
    const bare = { texts, craftBy, pinned: new Set<string>() };
    const stays = (control: Control) =>
      pinned.has(control.key) && !isAsked(control, bare) && texts[control.key] !== this.untouchedText(control) && texts[control.key] !== "";
    return new Set(CONTROLS.filter(stays).map((control) => control.key));
  }

  /** Gives the craft another way; a field that is still empty starts from the craft shown. */
  giveCraftBy(craftBy: CraftBy): void {
    const { pinned, ...scenario } = this.scenario.get();
    const texts = { ...scenario.texts };
    const craft = this.shown.get()?.solved.report.craft;
    const offer = (key: string, value: string | number | null | undefined) => {
      if (!texts[key] && value) texts[key] = typeof value === "number" ? String(Number(value.toPrecision(6))) : value;
    };
    if (craftBy === "acceleration") offer("ac_mm_s2", craft?.ac_mm_s2);
    if (craftBy === "lightness") offer(LIGHTNESS, craft?.lightness);
    if (craftBy === "size") for (const key of ["area_m2", "mass_kg"]) offer(key, this.defaults[key]);
    this.scenario.set({ texts, craftBy, pinned });
  }

  /** The scenario text for the core: fields that are asked for, and keys without a field that a link set. */
  text(): string {
    const scenario = this.scenario.get();
    const { texts } = scenario;
    const entries: [string, string][] = [];
    for (const control of CONTROLS) {
      if (!isAsked(control, scenario)) continue;
      const text = texts[control.key] ?? "";
      if (control.piece) continue;
      if (control.key === LIGHTNESS) entries.push(["ac_mm_s2", this.accelerationOf(text)]);
      // An optional field left empty is left out; any other empty field is for the core to refuse.
      else if (text !== "" || this.isNeeded(control.key)) entries.push([control.key, text]);
    }
    for (const key of LIST_KEYS) {
      const list = this.listText(key);
      if (list !== null) entries.push([key, list]);
    }
    return compose([...entries, ...this.extras()]);
  }

  /** The parts that are asked for as one list; trailing ones that were left empty are left out. */
  private listText(key: ListKey): string | null {
    const scenario = this.scenario.get();
    const controls = piecesOf(key);
    const values = controls.map((control) => (isAsked(control, scenario) ? (scenario.texts[control.key] ?? "") : ""));
    const last = values.findLastIndex((value) => value !== "");
    // An orbit that is asked for needs its size, and what has a default cannot be empty; other lists may be left out.
    const needed = key === "from_orbit" || key === "to_orbit" || !!this.defaults[key];
    if (last < 0 && !(needed && controls.some((control) => isAsked(control, scenario)))) return null;
    return controls
      .slice(0, Math.max(1, last + 1))
      .map((control, i) => (values[i] || (control.standing ?? "")).replaceAll(",", NO_COMMA))
      .join(",");
  }

  /** Keys that a link set and that have no field here. */
  extras(): [string, string][] {
    const { texts } = this.scenario.get();
    return Object.entries(texts).filter(
      ([key, text]) => key !== "v" && !WITH_FIELD.has(key) && text !== "" && text !== (this.defaults[key] ?? ""),
    );
  }

  /** Takes a key without a field back to its default. */
  dropExtra(key: string): void {
    this.edit(key, this.defaults[key] ?? "");
  }

  /** Errors at this control's field, where it is asked for. */
  errorsAt(control: Control): LinkError[] {
    return this.verdict.get().errors.filter((error) => this.controlOf(error) === control);
  }

  /** The control whose field shows this error, if any does now. */
  controlOf(error: LinkError): Control | undefined {
    const scenario = this.scenario.get();
    const asked = CONTROLS.filter((control) => isAsked(control, scenario));
    const whole = asked.find((control) => control.key === (error.key === "ac_mm_s2" && scenario.craftBy === "lightness" ? LIGHTNESS : error.key));
    if (whole) return whole;
    // The core names the element in the first word of the rule; what concerns the list as a whole goes to the first.
    const elements = asked.filter((control) => control.piece?.key === error.key);
    return elements.find((control) => error.rule.startsWith(`${control.piece?.name} `)) ?? elements[0];
  }

  /** Whether what is shown answers what is typed. */
  matches(): boolean {
    const link = this.verdict.get().link;
    return link !== null && this.shown.get()?.link === link;
  }

  private untouchedText(control: Control): string {
    return control.standing || this.untouched[control.key] || "";
  }

  private isNeeded(key: string): boolean {
    return key === "ac_mm_s2" || (this.defaults[key] ?? "") !== "";
  }

  private accelerationOf(lightness: string): string {
    const value = Number(lightness);
    return lightness.trim() === "" || !Number.isFinite(value) ? lightness : String(value * this.sunGravity_mm_s2);
  }
}

/** Values by key as the fields hold them: lists in their parts. */
function fieldTexts(values: Readonly<Record<string, string>>): Record<string, string> {
  const texts: Record<string, string> = { ...values };
  for (const key of LIST_KEYS) {
    const parts = texts[key] ? texts[key].split(",") : [];
    piecesOf(key).forEach((control, i) => (texts[control.key] = parts[i] ?? ""));
    delete texts[key];
  }
  return texts;
}

function piecesOf(key: ListKey): Control[] {
  return CONTROLS.filter((control) => control.piece?.key === key);
}

/** The fields that describe this orbit; where its body is only with a date. */
function elementsOf(key: OrbitKey, end: End, depart: string | null): Record<string, string> {
  const day = depart === null ? Number.NaN : Date.parse(`${depart.slice(0, 10)}T00:00:00Z`);
  const dated = end.mean_anomaly_deg !== null && Number.isFinite(day);
  const values = [
    end.semi_major_axis_au,
    end.eccentricity,
    end.inclination_deg,
    end.node_deg,
    end.arg_peri_deg,
    ...(dated ? [end.mean_anomaly_deg, day / 86_400_000 + UNIX_EPOCH_JD] : []),
  ];
  const written = (value: number | null, i: number) => (!value ? "" : String(Number(value.toPrecision(i === 6 ? 10 : 6))));
  return Object.fromEntries(values.map((value, i) => [pieceKey(key, ELEMENTS[i]?.name ?? ""), written(value, i)]));
}
