// Start-up: opens the core, mounts the panels, and joins link, state, engine and panels in that order.
import { part } from "./dom";
import { Client } from "./engine/client";
import { openModule, startWorker } from "./engine/delivery";
import { Histories } from "./engine/histories";
import { Pool } from "./engine/pool";
import type { Outcome } from "./engine/protocol";
import { readFragment, watchFragment, writeFragment } from "./link";
import { mountAnswer } from "./panels/answer";
import { mountAssumptions } from "./panels/assumptions";
import { mountChecks } from "./panels/checks";
import { mountCompare } from "./panels/compare";
import { mountDepartures } from "./panels/departures";
import { mountFooter } from "./panels/footer";
import { mountHistories } from "./panels/histories";
import { mountInputs } from "./panels/inputs";
import { mountMasthead } from "./panels/masthead";
import { mountNotice } from "./panels/notice";
import { mountOrbit } from "./panels/orbit";
import type { Page } from "./panels/page";
import { mountProof } from "./panels/proof";
import { State } from "./state";

/** One that answers and one ready to take its place. */
const WORKERS = 2;
/** Workers of a study: as many as there are processors, within reason. Their number changes no result. */
const STUDY_WORKERS = Math.min(8, Math.max(1, navigator.hardwareConcurrency || 2));

async function open(): Promise<void> {
  const module = await openModule();
  const pool = new Pool(startWorker, module, WORKERS);
  const client = new Client(module, pool, (link, outcome) => take(link, outcome));
  const dark = matchMedia("(prefers-color-scheme: dark)");
  const state = new State(
    Object.fromEntries(client.check("").entries),
    dark.matches ? "dark" : "light",
    client.about.program().constants.sun_gravity_mm_s2,
  );
  dark.addEventListener("change", () => state.theme.set(dark.matches ? "dark" : "light"));
  const names = client.about.column_names();

  function take(link: string, outcome: Outcome): void {
    if (outcome.is === "solved") {
      state.trouble.set(null);
      state.shown.set({ link, solved: outcome.solved, histories: new Histories(names, outcome.solved.columns) });
    } else if (link !== state.verdict.get().link) {
      return; // What went wrong is no longer asked for.
    } else if (outcome.is === "refused") {
      state.verdict.set({ link: null, errors: outcome.errors });
    } else if (outcome.is === "crashed") {
      state.trouble.set({ link, message: outcome.message });
    }
  }

  function openLink(text: string): void {
    const checked = client.check(text);
    state.broken.set(checked.decoded ? null : { text, errors: checked.errors });
    state.load(checked.decoded ? checked : client.check(""));
  }

  openLink(readFragment());
  const verdictNow = () => {
    const { link, errors } = client.check(state.text());
    state.verdict.set({ link, errors });
    return link;
  };
  // The first flight is solved here, before any worker could be there to do it.
  const first = verdictNow();
  if (first !== null) take(first, client.askHere(first));

  const page: Page = { state, client, studies: new Pool(startWorker, module, STUDY_WORKERS) };
  for (const mount of [mountMasthead, mountInputs, mountNotice, mountAnswer, mountOrbit, mountCompare, mountHistories, mountProof, mountDepartures, mountChecks, mountAssumptions, mountFooter])
    mount(page);

  let started = false;
  state.scenario.watch(() => {
    if (!started) return;
    const link = verdictNow();
    if (link === null) return client.forget();
    if (state.trouble.get()?.link !== link) state.trouble.set(null);
    writeFragment(link);
    if (state.shown.get()?.link !== link) client.ask(link);
  });
  started = true;
  watchFragment(openLink);
  part("results").dataset.ready = "true";
  // Starting workers takes the processor that the first picture needs.
  requestAnimationFrame(() => setTimeout(() => pool.warm()));
}

open().catch((error: unknown) => {
  const message = document.createElement("p");
  message.className = "alarm";
  message.textContent = `The page could not start: ${error instanceof Error ? error.message : String(error)}`;
  part("notice").append(message);
});
