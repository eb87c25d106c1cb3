// The page's one state: what was typed, what the core says about it, and what is shown.
import { Cell } from "./cell";
import { CONTROLS, LIGHTNESS, WITH_FIELD, isAsked, type Control, type CraftBy, type Scenario } from "./controls";
import type { Checked, Theme } from "./engine/core";
import type { Histories } from "./engine/histories";
import type { Solved } from "./engine/protocol";
import type { LinkError } from "./engine/report";
import { compose } from "./link";

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
  constructor(
    private readonly defaults: Readonly<Record<string, string>>,
    theme: Theme,
    /** From the core; converts the lightness number. */
    private readonly sunGravity_mm_s2: number,
  ) {
    this.scenario = new Cell<Scenario>({ texts: defaults, craftBy: "size" });
    this.theme = new Cell(theme);
  }

  /** Takes over every key's value from the core, as it does when a link opens. */
  load(checked: Checked): void {
    const texts = Object.fromEntries(checked.entries);
    this.scenario.set({ texts, craftBy: texts.ac_mm_s2 ? "acceleration" : "size" });
  }

  edit(key: string, text: string): void {
    const { texts, craftBy } = this.scenario.get();
    if (texts[key] === text) return;
    const next = { ...texts, [key]: text };
    // A circle that has no radius yet starts from the orbit it takes the place of.
    if ((key === "from" || key === "to") && text === "orbit" && !texts[`${key}_orbit`]) {
      const radius_au = this.shown.get()?.solved.report.ends[key].semi_major_axis_au;
      if (radius_au !== undefined) next[`${key}_orbit`] = String(Number(radius_au.toPrecision(6)));
    }
    this.scenario.set({ texts: next, craftBy });
  }

  /** Gives the craft another way; a field that is still empty starts from the craft shown. */
  giveCraftBy(craftBy: CraftBy): void {
    const texts = { ...this.scenario.get().texts };
    const craft = this.shown.get()?.solved.report.craft;
    const offer = (key: string, value: string | number | null | undefined) => {
      if (!texts[key] && value) texts[key] = typeof value === "number" ? String(Number(value.toPrecision(6))) : value;
    };
    if (craftBy === "acceleration") offer("ac_mm_s2", craft?.ac_mm_s2);
    if (craftBy === "lightness") offer(LIGHTNESS, craft?.lightness);
    if (craftBy === "size") for (const key of ["area_m2", "mass_kg"]) offer(key, this.defaults[key]);
    this.scenario.set({ texts, craftBy });
  }

  /** The scenario text for the core: fields that are asked for, and keys without a field that a link set. */
  text(): string {
    const scenario = this.scenario.get();
    const { texts } = scenario;
    const entries: [string, string][] = [];
    for (const control of CONTROLS) {
      if (!isAsked(control, scenario)) continue;
      const text = texts[control.key] ?? "";
      if (control.key === LIGHTNESS) entries.push(["ac_mm_s2", this.accelerationOf(text)]);
      // An optional field left empty is left out; any other empty field is for the core to refuse.
      else if (text !== "" || this.isNeeded(control.key)) entries.push([control.key, text]);
    }
    return compose([...entries, ...this.extras()]);
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
    if (!isAsked(control, this.scenario.get())) return [];
    const key = control.key === LIGHTNESS ? "ac_mm_s2" : control.key;
    return this.verdict.get().errors.filter((error) => error.key === key);
  }

  /** The control whose field shows errors of this key, if any does now. */
  controlOf(key: string): Control | undefined {
    const scenario = this.scenario.get();
    const shows = (control: Control) => control.key === key || (control.key === LIGHTNESS && key === "ac_mm_s2");
    return CONTROLS.find((control) => shows(control) && isAsked(control, scenario));
  }

  /** Whether what is shown answers what is typed. */
  matches(): boolean {
    const link = this.verdict.get().link;
    return link !== null && this.shown.get()?.link === link;
  }

  private isNeeded(key: string): boolean {
    return key === "ac_mm_s2" || (this.defaults[key] ?? "") !== "";
  }

  private accelerationOf(lightness: string): string {
    const value = Number(lightness);
    return lightness.trim() === "" || !Number.isFinite(value) ? lightness : String(value * this.sunGravity_mm_s2);
  }
}
