// A field: its widget, unit, range and help, and the errors that the core finds in it.
import { isAsked, type Control } from "./controls";
import { dateEntry } from "./date-entry";
import { h } from "./dom";
import type { KeyInfo } from "./engine/report";
import { fixed, typed, unitOf } from "./format";
import type { State } from "./state";

/** One field of the table of inputs; `info` is what the core says about its key. */
export function field(state: State, control: Control, info: KeyInfo | undefined): HTMLElement {
  const id = `field-${control.key}`;
  const unit = unitOf(control.unit ?? info?.unit ?? "");
  const errors = h("div", { class: "errors", id: `${id}-errors` });
  const help = h("p", { class: "help", id: `${id}-help` }, helpText(control, info));
  const input = control.choices
    ? h("select", { id, name: control.key }, ...control.choices.map(([value, words]) => h("option", { value }, words)))
    : h("input", { id, name: control.key, type: "text", spellcheck: "false", autocapitalize: "off" });
  if (!control.choices && control.kind === undefined) input.setAttribute("inputmode", control.key.endsWith("_km") ? "text" : "decimal");
  if (input instanceof HTMLInputElement) input.placeholder = control.standing ?? (info?.default === "none" ? "none" : "");
  input.addEventListener("input", () => state.edit(control.key, input.value));
  const slide = control.slider && slider(state, control, control.slider, control.label ?? info?.label ?? control.key, unit);
  const label = control.label ?? info?.label ?? control.key;
  const dated = control.kind === "date" && input instanceof HTMLInputElement;
  const box = h(
    "div",
    { class: control.choices || control.kind === "text" ? "field long" : "field" },
    h("label", { for: id }, label),
    h("span", { class: "entry" }, input, unit && h("span", { class: "unit" }, unit), dated && dateEntry(input, label)),
    slide,
    help,
    errors,
  );
  state.scenario.watch((scenario) => {
    box.hidden = !isAsked(control, scenario);
    const text = scenario.texts[control.key] ?? "";
    if (input instanceof HTMLSelectElement) chooseFrom(input, text);
    // Writing the same text back would move the caret.
    else if (input.value !== text) input.value = text;
  });
  state.verdict.watch(() => {
    const wrong = state.errorsAt(control);
    errors.replaceChildren(
      ...wrong.map((error) => h("p", {}, error.value === "" ? "Empty: " : `\u201c${typed(error.value)}\u201d: `, error.rule)),
    );
    if (wrong.length > 0) input.setAttribute("aria-invalid", "true");
    else input.removeAttribute("aria-invalid");
    input.setAttribute("aria-describedby", wrong.length > 0 ? `${id}-errors ${id}-help` : `${id}-help`);
  });
  return box;
}

/** A value that is none of the choices is shown as one, so that nothing a link says is hidden. */
function chooseFrom(select: HTMLSelectElement, text: string): void {
  select.querySelector("option[data-foreign]")?.remove();
  if (![...select.options].some((option) => option.value === text))
    select.append(h("option", { value: text, "data-foreign": true }, typed(text)));
  select.value = text;
}

/** Range and meaning; a list of choices speaks for itself. */
function helpText(control: Control, info: KeyInfo | undefined): string {
  if (control.choices) return "";
  const range = (control.range ?? info?.range ?? "").replace(/\d{5,}/g, (digits) => fixed(Number(digits), 0));
  return [range && `${range}.`, control.help ?? info?.help].filter(Boolean).join(" ");
}

function slider(state: State, control: Control, ends: readonly [number, number], label: string, unit: string): HTMLElement {
  const [low, high] = ends;
  const input = h("input", {
    type: "range",
    min: Math.log(low),
    max: Math.log(high),
    step: "any",
    "aria-label": `${label}, slider`,
  });
  let dragging = false;
  input.addEventListener("input", () => {
    dragging = true;
    state.edit(control.key, String(Number(Math.exp(Number(input.value)).toPrecision(3))));
    dragging = false;
  });
  // The browser's own arrow steps suit no logarithmic scale: 2 % a press, 25 % a page.
  input.addEventListener("keydown", (event) => {
    const step = { ArrowRight: 0.02, ArrowUp: 0.02, ArrowLeft: -0.02, ArrowDown: -0.02, PageUp: 0.25, PageDown: -0.25 }[event.key];
    if (step === undefined) return;
    event.preventDefault();
    input.value = String(Number(input.value) + step);
    input.dispatchEvent(new Event("input"));
  });
  state.scenario.watch((scenario) => {
    const text = scenario.texts[control.key] ?? "";
    const value = Number(text);
    if (!dragging && value > 0) input.value = String(Math.log(value));
    input.setAttribute("aria-valuetext", `${typed(text)} ${unit}`.trim());
  });
  return input;
}
