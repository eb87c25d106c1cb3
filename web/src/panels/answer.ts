// The answer in words, its standing, and what to know before relying on it.
import { h, part } from "../dom";
import type { Flight, Report } from "../engine/report";
import { fixed, significant } from "../format";
import type { Page } from "./page";

/** Pause between two spoken answers while a slider moves, ms. */
const SPOKEN_MS = 1200;

const STANDING: Record<Flight["status"], string> = {
  converged: "Converged",
  flown: "Flown, no optimum promised",
  approximate: "Approximate: misses the proof's thresholds",
  not_converged: "Not converged: no flight to rely on",
  unreachable: "Unreachable",
};

export function mountAnswer({ state, client }: Page): void {
  const title = h("h2", { id: "answer-title", class: "unseen" }, "Answer");
  const name = h("p", { class: "scenario-title" });
  const sentence = h("p", { class: "sentence" }, "Opening…");
  const standing = h("p", { class: "proof-line" });
  const details = h("div");
  part("answer").append(title, name, sentence, standing, details);

  let timer: ReturnType<typeof setTimeout> | undefined;
  state.shown.watch((shown) => {
    if (!shown) return;
    const { report } = shown.solved;
    // The core writes the title of the report's own link; what is being typed may be ahead of it.
    name.textContent = client.check(shown.link).entries.find(([key]) => key === "title")?.[1] ?? "";
    name.hidden = name.textContent === "";
    sentence.textContent = report.sentence;
    standing.replaceChildren(...proofLine(report));
    details.replaceChildren(...remarks(report));
    clearTimeout(timer);
    timer = setTimeout(() => (part("spoken").textContent = report.sentence), SPOKEN_MS);
  });
  state.verdict.watch(({ link, errors }) => {
    if (link !== null || errors.length === 0) return;
    if (!state.shown.get()) sentence.textContent = "No flight yet: it appears when the inputs can be solved.";
    clearTimeout(timer);
    timer = setTimeout(() => (part("spoken").textContent = `The inputs do not match the result: ${errors.map(({ key, rule }) => `${key}: ${rule}`).join("; ")}`), SPOKEN_MS);
  });
}

function proofLine(report: Report): (Node | string)[] {
  const { status, proof } = report.flight;
  const badge = h("span", { class: status === "converged" || status === "flown" ? "badge" : "badge bad" }, STANDING[status]);
  // Between identical ends nothing was solved and there is nothing to prove.
  if (proof.extremals_found === 0 && status === "converged") return [badge];
  // A flight that aims at no optimum ends beside the target; that is a distance, not an error.
  const miss = status === "flown" ? "ends beside the target's orbit by" : "re-flown to within";
  const parts = [
    proof.position_error_km !== null && `${miss} ${significant(proof.position_error_km, 2)} km`,
    proof.speed_error_m_s !== null && `${significant(proof.speed_error_m_s, 2)} m/s`,
    proof.hamiltonian_drift !== null && `Hamiltonian constant to ${significant(proof.hamiltonian_drift, 2)}`,
    status !== "flown" && (proof.extremals_found === 1 ? "one extremal found" : `best of ${proof.extremals_found} extremals found`),
  ].filter((text) => text !== false);
  return [badge, ` ${parts.join(" · ")}`];
}

function remarks(report: Report): Node[] {
  const { flight, cautions } = report;
  return [
    flight.message !== null && h("p", { class: flight.status === "flown" || flight.status === "converged" ? "note" : "alarm" }, flight.message),
    flight.time_d === null && flight.estimate !== null && h("p", { class: "note" }, `Estimate only, not a result: ${fixed(flight.estimate, 0)} days.`),
    flight.margin && h("p", { class: flight.margin.days_in_hand < 0 ? "alarm" : "note" }, deadline(flight.margin)),
    cautions.length > 0 && h("ul", { class: "cautions" }, ...cautions.map((text) => h("li", {}, text))),
  ].filter((node): node is HTMLParagraphElement | HTMLUListElement => node instanceof Node);
}

/** The margin in words; negative margins say what it would take. */
function deadline({ days_in_hand, mass_growth_pct, ac_in_hand_pct }: NonNullable<Flight["margin"]>): string {
  const late = days_in_hand < 0;
  const percent = (value: number | null, words: string) => value !== null && `${fixed(Math.abs(value), 1)} % ${words}`;
  const ways = [
    percent(mass_growth_pct, late ? "less mass" : "more mass"),
    percent(ac_in_hand_pct, late ? "more acceleration" : "less acceleration"),
  ].filter(Boolean);
  const days = `${fixed(Math.abs(days_in_hand), 1)} days`;
  const fact = late ? `Misses the deadline by ${days}.` : `Meets the deadline with ${days} in hand.`;
  if (ways.length === 0) return fact;
  return `${fact} ${late ? "It would be met with" : "It would still be met with"} ${ways.join(" or ")}.`;
}
