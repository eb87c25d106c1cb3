// Messages above the answer: a link that could not be used, keys without a field, what is stale, a crash.
import { h, part } from "../dom";
import { copy } from "../download";
import type { LinkError } from "../engine/report";
import { typed } from "../format";
import { addressOf } from "../link";
import type { State } from "../state";
import type { Page } from "./page";

/** A short wait is not worth a label, ms. */
const UNNOTICED_MS = 250;

export function mountNotice({ state }: Page): void {
  const broken = h("div");
  const extras = h("div");
  const stale = h("div", { id: "stale" });
  const trouble = h("div");
  part("notice").append(broken, extras, trouble, stale);

  state.broken.watch((link) => {
    broken.replaceChildren();
    if (!link) return;
    broken.append(
      h(
        "div",
        { class: "alarm", role: "alert" },
        h("p", {}, h("strong", {}, "This link could not be used; the default flight is shown instead.")),
        errorList(state, link.errors),
        h("p", { class: "typed" }, `The link: ${shorten(link.text)}`),
        h("button", { type: "button", onclick: () => state.broken.set(null) }, "Dismiss"),
      ),
    );
  });

  const listExtras = () => {
    const set = state.extras();
    extras.replaceChildren();
    if (set.length === 0) return;
    extras.append(
      h(
        "div",
        { class: "note" },
        h("p", {}, "The link also sets keys that have no field on this page:"),
        h(
          "ul",
          {},
          ...set.map(([key, text]) =>
            h("li", {}, h("code", {}, key), ` = ${typed(text)} `, h("button", { type: "button", onclick: () => state.dropExtra(key) }, `Remove ${key}`)),
          ),
        ),
      ),
    );
  };
  state.scenario.watch(listExtras);

  let timer: ReturnType<typeof setTimeout> | undefined;
  const showStale = () => {
    clearTimeout(timer);
    const { errors, link } = state.verdict.get();
    const results = part("results");
    const label = (kind: "alarm" | "note", ...content: (HTMLElement | string)[]) => {
      results.classList.add("stale");
      stale.replaceChildren(h("div", { class: kind }, ...content));
    };
    if (link === null && errors.length > 0) {
      const what = state.shown.get()
        ? "The result below does not match the inputs: it is the last good one."
        : "No flight is shown: the inputs cannot be solved as they stand.";
      label("alarm", h("p", {}, h("strong", {}, what)), errorList(state, errors));
    } else if (link !== null && !state.matches() && state.trouble.get() === null) {
      timer = setTimeout(() => label("note", h("p", {}, "Working; the result below is the one before.")), UNNOTICED_MS);
      // An old warning must not outlive what it warned of.
      if (stale.querySelector(".alarm")) stale.replaceChildren();
    } else {
      results.classList.toggle("stale", state.trouble.get() !== null);
      stale.replaceChildren();
    }
  };
  state.verdict.watch(showStale);
  state.shown.watch((shown) => {
    part("results").classList.toggle("empty", shown === null);
    showStale();
  });
  state.trouble.watch((crash) => {
    showStale();
    trouble.replaceChildren();
    if (!crash) return;
    const address = addressOf(crash.link);
    const field = h("input", { type: "text", readonly: true, value: address, "aria-label": "Link that reproduces the failure" });
    trouble.append(
      h(
        "div",
        { class: "alarm", role: "alert" },
        h("p", {}, h("strong", {}, "The solver stopped unexpectedly on this scenario.")),
        h("p", {}, "A fresh one has taken its place and what you typed is untouched. Change an input to go on. This link reproduces the failure:"),
        h("span", { class: "entry" }, field, h("button", { type: "button", onclick: () => void copy(address) }, "Copy")),
        h("p", { class: "typed" }, `Reported: ${typed(crash.message)}`),
      ),
    );
  });
}

/** Key, value and rule of each; those with a field lead to it. */
function errorList(state: State, errors: readonly LinkError[]): HTMLElement {
  return h(
    "ul",
    {},
    ...errors.map((error) => {
      const control = state.controlOf(error);
      const name = control
        ? h("button", { type: "button", class: "plain", onclick: () => reveal(control.key) }, error.key)
        : h("code", {}, typed(error.key));
      return h("li", {}, name, error.value === "" ? " (empty): " : ` \u201c${typed(error.value)}\u201d: `, error.rule);
    }),
  );
}

function reveal(key: string): void {
  const field = part(`field-${key}`);
  field.closest("details")?.setAttribute("open", "");
  field.focus();
}

function shorten(text: string): string {
  const start = typed(text.slice(0, 200)).slice(0, 60);
  return text.length > 60 ? `${start} (${text.length} characters)` : start;
}
