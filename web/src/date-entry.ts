// A date beside its text: the browser's own calendar and steps by key write into the text field, which stays the truth.
import { h } from "./dom";

const DAY_MS = 86_400_000;
/** Days that a key moves the date by. */
const STEPS: Readonly<Record<string, number>> = { ArrowUp: 1, ArrowDown: -1, PageUp: 30, PageDown: -30 };

/** The day that a text names, ms of Universal Time; NaN for any other text. */
function dayOf(text: string): number {
  return /^\d{4}-\d{2}-\d{2}$/.test(text) ? Date.parse(`${text}T00:00:00Z`) : Number.NaN;
}

/** A button that opens the browser's calendar, where it has one, for a text field of dates. */
export function dateEntry(field: HTMLInputElement, label: string): HTMLElement | null {
  const write = (text: string) => {
    field.value = text;
    field.dispatchEvent(new Event("input", { bubbles: true }));
  };
  field.addEventListener("keydown", (event) => {
    const step = STEPS[event.key];
    const day = dayOf(field.value);
    if (step === undefined || Number.isNaN(day)) return;
    event.preventDefault();
    write(new Date(day + step * DAY_MS).toISOString().slice(0, 10));
  });
  const native = h("input", { type: "date", min: "1800-01-01", max: "2050-12-31", tabindex: -1, "aria-hidden": "true", class: "native-date" });
  if (native.type !== "date" || !("showPicker" in native)) return null;
  native.addEventListener("input", () => native.value !== "" && write(native.value));
  const open = () => {
    native.value = Number.isNaN(dayOf(field.value)) ? "" : field.value;
    native.showPicker();
  };
  return h("span", { class: "calendar" }, native, h("button", { type: "button", "aria-label": `${label}, calendar`, title: "Calendar", onclick: open }, "▾"));
}
