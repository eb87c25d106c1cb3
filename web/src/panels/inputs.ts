// The inputs: one field a row of the table in controls.ts, each with its unit, range, help and errors.
import { CONTROLS, ELEMENTS, GROUPS, pieceKey, isAsked, type Control, type CraftBy } from "../controls";
import { h, part } from "../dom";
import { field } from "../field";
import { typed, unitOf } from "../format";
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
      if (control.piece) orbitBox(page, details, control).append(field(page.state, control, undefined));
      else details.append(field(page.state, control, infos.get(control.key)));
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
          return [control.piece && control.label, words, unit].filter(Boolean).join(" ");
        })
        .join(" · ");
      details.classList.toggle("wrong", controls.some((control) => state.errorsAt(control).length > 0));
    };
    state.scenario.watch(summarise);
    state.verdict.watch(summarise);
  }
}

/** The box of one orbit's elements, made when the first of them comes. */
function orbitBox(page: Page, group: HTMLElement, { piece, key }: Control): HTMLElement {
  const id = `box-${piece?.key}`;
  const there = group.querySelector<HTMLElement>(`#${id}`);
  if (there) return there;
  const box = h("fieldset", { class: "elements", id }, h("legend", {}, piece?.key === "from_orbit" ? "Orbit of the start" : "Orbit of the target"));
  const first = CONTROLS.find((control) => control.key === key);
  page.state.scenario.watch((scenario) => (box.hidden = !first || !isAsked(first, scenario)));
  group.append(box);
  return box;
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
    const elements = ELEMENTS.map(({ name }) => [pieceKey("from_orbit", name), pieceKey("to_orbit", name)] as const);
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
