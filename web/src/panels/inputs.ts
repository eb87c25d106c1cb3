// The inputs: one field a row of the table in controls.ts, each with its unit, range, help and errors.
import { CONTROLS, ELEMENTS, GROUPS, elementKey, isAsked, type Control, type CraftBy } from "../controls";
import { dateEntry } from "../date-entry";
import { h, part } from "../dom";
import type { KeyInfo } from "../engine/report";
import { fixed, typed, unitOf } from "../format";
import type { Page } from "./page";

const WAYS: readonly (readonly [CraftBy, string])[] = [
  ["size", "Area and mass"],
  ["acceleration", "Characteristic acceleration"],
  ["lightness", "Lightness number"],
];

export function mountInputs(page: Page): void {
  const { state, client } = page;
  const infos = new Map(client.about.link_keys().map((info) => [info.key, info]));
  const form = part("inputs");
  form.addEventListener("submit", (event) => event.preventDefault());
  form.append(examples(page));
  const wide = matchMedia("(min-width: 1100px)");
  for (const [group, title] of GROUPS) {
    const summary = h("span", { class: "values" });
    const details = h("details", { class: "group", open: wide.matches }, h("summary", {}, h("span", {}, title), summary));
    wide.addEventListener("change", () => (details.open = wide.matches));
    if (group === "craft") details.append(craftWays(page));
    const controls = CONTROLS.filter((control) => control.group === group);
    for (const control of controls) {
      if (control.element) orbitBox(page, details, control).append(field(page, control, undefined));
      else details.append(field(page, control, infos.get(control.key)));
    }
    if (group === "craft") details.append(derived(page));
    if (group === "ends") details.append(swapEnds(page));
    form.append(details);
    const summarise = () => {
      const scenario = state.scenario.get();
      const asked = controls.filter((control) => isAsked(control, scenario));
      details.hidden = asked.length === 0;
      const shown = asked.filter((control) => scenario.texts[control.key]);
      summary.textContent = shown
        .map((control) => {
          const text = scenario.texts[control.key] ?? "";
          const words = control.choices?.find(([value]) => value === text)?.[1].replace(/ \(.*/, "") ?? typed(text);
          const unit = text === "none" ? "" : unitOf(control.unit ?? infos.get(control.key)?.unit ?? "");
          return [control.element && control.label, words, unit].filter(Boolean).join(" ");
        })
        .join(" · ");
      details.classList.toggle("wrong", controls.some((control) => state.errorsAt(control).length > 0));
    };
    state.scenario.watch(summarise);
    state.verdict.watch(summarise);
  }
}

/** The box of one orbit's elements, made when the first of them comes. */
function orbitBox(page: Page, group: HTMLElement, { element, key }: Control): HTMLElement {
  const id = `box-${element?.key}`;
  const there = group.querySelector<HTMLElement>(`#${id}`);
  if (there) return there;
  const box = h("fieldset", { class: "elements", id }, h("legend", {}, element?.key === "from_orbit" ? "Orbit of the start" : "Orbit of the target"));
  const first = CONTROLS.find((control) => control.key === key);
  page.state.scenario.watch((scenario) => (box.hidden = !first || !isAsked(first, scenario)));
  group.append(box);
  return box;
}

function field(page: Page, control: Control, info: KeyInfo | undefined): HTMLElement {
  const { state } = page;
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
  const slide = control.slider && slider(page, control, control.slider, control.label ?? info?.label ?? control.key, unit);
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

function slider(page: Page, control: Control, ends: readonly [number, number], label: string, unit: string): HTMLElement {
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
    page.state.edit(control.key, String(Number(Math.exp(Number(input.value)).toPrecision(3))));
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
  page.state.scenario.watch((scenario) => {
    const text = scenario.texts[control.key] ?? "";
    const value = Number(text);
    if (!dragging && value > 0) input.value = String(Math.log(value));
    input.setAttribute("aria-valuetext", `${typed(text)} ${unit}`.trim());
  });
  return input;
}

function craftWays(page: Page): HTMLElement {
  const radios = WAYS.map(([way, words]) => {
    const radio = h("input", { type: "radio", name: "craft-by", value: way, onchange: () => page.state.giveCraftBy(way) });
    page.state.scenario.watch(({ craftBy }) => (radio.checked = craftBy === way));
    return h("label", { class: "choice" }, radio, words);
  });
  return h("fieldset", { class: "ways" }, h("legend", {}, "Given by"), ...radios);
}

/** The craft in the other measures, from the last good result. */
function derived(page: Page): HTMLElement {
  const list = h("p", { class: "help derived" });
  page.state.shown.watch((shown) => {
    if (!shown) return;
    const { craft } = shown.solved.report;
    const show = (value: number | null, digits: number) => (value === null ? "" : String(Number(value.toPrecision(digits))));
    list.textContent = [
      `acceleration ${show(craft.ac_mm_s2, 4)} mm/s²`,
      `lightness number ${show(craft.lightness, 4)}`,
      craft.loading_g_m2 !== null && `loading ${show(craft.loading_g_m2, 4)} g/m²`,
      craft.side_m !== null && `side ${show(craft.side_m, 4)} m`,
    ]
      .filter(Boolean)
      .join(" · ");
  });
  return list;
}

function swapEnds(page: Page): HTMLElement {
  const swap = () => {
    const { texts } = page.state.scenario.get();
    const elements = ELEMENTS.map(({ name }) => [elementKey("from_orbit", name), elementKey("to_orbit", name)] as const);
    for (const [a, b] of [["from", "to"] as const, ...elements]) {
      page.state.edit(a, texts[b] ?? "");
      page.state.edit(b, texts[a] ?? "");
    }
  };
  return h("button", { type: "button", onclick: swap }, "Swap ends");
}

function examples(page: Page): HTMLElement {
  const list = page.client.about.examples();
  if (list.length === 0) return h("span", { hidden: true });
  const select = h(
    "select",
    { id: "examples" },
    h("option", { value: "" }, "Choose…"),
    ...list.map((example) => h("option", { value: example.link, title: example.about }, example.name)),
  );
  const about = h("p", { class: "help", id: "examples-about" });
  select.setAttribute("aria-describedby", about.id);
  select.addEventListener("change", () => {
    const example = list.find((example) => example.link === select.value);
    about.textContent = example?.about ?? "";
    if (example) page.state.load(page.client.check(example.link));
  });
  return h("div", { class: "field long" }, h("label", { for: "examples" }, "Invented examples"), h("span", { class: "entry" }, select), about);
}
