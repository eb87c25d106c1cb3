// The head of the page: ways to its parts, the link to share, the report to keep, light or dark.
import { h, part } from "../dom";
import { copy, download } from "../download";
import { addressOf } from "../link";
import type { Page } from "./page";

export function mountMasthead({ state }: Page): void {
  // Buttons, not anchors: the fragment of the address belongs to the scenario.
  const go = (name: string) => {
    const section = part(name);
    section.scrollIntoView({ block: "start" });
    section.focus({ preventScroll: true });
  };
  for (const button of part("parts").querySelectorAll("button"))
    button.addEventListener("click", () => go(button.dataset.part ?? "answer"));
  part("skip").addEventListener("click", (event) => {
    event.preventDefault();
    go("answer");
  });

  const said = h("span", { class: "said", role: "status" });
  const fallback = h("input", { type: "text", readonly: true, hidden: true, "aria-label": "Link to this flight" });
  const share = h("button", { type: "button", id: "copy-link" }, "Copy link");
  share.addEventListener("click", async () => {
    const link = state.verdict.get().link;
    if (link === null) return;
    const address = addressOf(link);
    if (await copy(address)) {
      fallback.hidden = true;
      said.textContent = "Link copied.";
    } else {
      fallback.hidden = false;
      fallback.value = address;
      fallback.focus();
      fallback.select();
      said.textContent = "Copy the link from this field.";
    }
    setTimeout(() => (said.textContent = ""), 4000);
  });
  const save = h("button", { type: "button" }, "Save report");
  save.addEventListener("click", () => {
    const shown = state.shown.get();
    if (shown && state.matches())
      download("sunreach-report.json", "application/json", `${JSON.stringify(shown.solved.report, null, 2)}\n`);
  });
  const enable = () => {
    share.disabled = state.verdict.get().link === null;
    save.disabled = !state.matches();
  };
  state.verdict.watch(enable);
  state.shown.watch(enable);

  const look = h("button", { type: "button", id: "look" });
  look.addEventListener("click", () => state.theme.set(state.theme.get() === "dark" ? "light" : "dark"));
  state.theme.watch((theme) => {
    document.documentElement.dataset.theme = theme;
    look.textContent = theme === "dark" ? "Light" : "Dark";
    look.setAttribute("aria-label", theme === "dark" ? "Switch to light colours" : "Switch to dark colours");
  });
  part("tools").append(said, fallback, share, save, look);
}
