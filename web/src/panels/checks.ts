// Published check values, run by the core in this browser when the part comes into view.
import { h, part, table } from "../dom";
import type { CheckRow } from "../engine/report";
import { significant } from "../format";
import type { Page } from "./page";

export function mountChecks({ client }: Page): void {
  const verdict = h("p", { role: "status" }, "Not run yet.");
  const body = h("div");
  const again = h("button", { type: "button" }, "Run the checks again");
  const run = async () => {
    verdict.textContent = "Running…";
    const rows = await client.checks();
    if (!rows) {
      verdict.textContent = "The checks could not be run just now; try again.";
      return;
    }
    const passed = rows.filter((row) => row.passed).length;
    verdict.textContent = `${passed} of ${rows.length} checks passed in this browser.`;
    verdict.className = passed === rows.length ? "" : "alarm";
    body.replaceChildren(results(rows));
  };
  again.addEventListener("click", () => void run());
  const section = part("checks");
  section.append(
    h("h2", { id: "checks-title" }, "Checks"),
    h("p", {}, "Does this program, in this browser, give the values that stand in the literature or that other methods found?"),
    verdict,
    again,
    body,
  );
  const seen = new IntersectionObserver((entries) => {
    if (!entries.some((entry) => entry.isIntersecting)) return;
    seen.disconnect();
    void run();
  });
  seen.observe(section);
}

function results(rows: readonly CheckRow[]): HTMLElement {
  return table(
    "Published checks",
    ["check", "expected", "found", "tolerance", "unit", "result", "source"],
    rows.map((row) =>
      h(
        "tr",
        {},
        h("th", { scope: "row" }, row.name),
        h("td", {}, significant(row.expected, 6)),
        h("td", {}, significant(row.found, 6)),
        h("td", {}, significant(row.tolerance, 2)),
        h("td", { class: "words" }, row.unit),
        h("td", { class: row.passed ? "words" : "words bad" }, row.passed ? "passed" : "failed"),
        h("td", { class: "words" }, `${row.mark}: ${row.source}`),
      ),
    ),
    "checks",
  );
}
