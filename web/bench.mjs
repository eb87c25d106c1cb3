// Prints the page's own measurements: first answer after opening, solving in WASM, redrawing while dragging, a map of
// departure dates.
import { readFileSync } from "node:fs";
import { pathToFileURL } from "node:url";
import { launch } from "../tests/page/browser/browsers.mjs";
import { openCore, path } from "../tests/page/support.mjs";

const sorted = (values) => [...values].sort((a, b) => a - b);
const quantile = (values, share) => sorted(values)[Math.min(values.length - 1, Math.floor(share * values.length))];
const line = (what, values) =>
  process.stdout.write(
    `${what}: median ${quantile(values, 0.5).toFixed(2)} ms, 95 % ${quantile(values, 0.95).toFixed(2)} ms, ` +
      `worst ${quantile(values, 1).toFixed(2)} ms, of ${values.length}\n`,
  );

await solving();
await solvingInSpace();
for (const name of ["chromium", "firefox"]) {
  const browser = await launch(name);
  try {
    await opening(browser);
    await redrawing(browser);
    await mapping(browser);
  } finally {
    await browser.close();
  }
}

/** The committed list of coplanar cases, each solved whole: flight, proof, histories, report, conversion. */
async function solving() {
  const core = await openCore();
  const { cases } = JSON.parse(readFileSync(path("tests/reference/cases_500.json"), "utf8"));
  const links = cases.map(({ r_f_au, ac_mm_s2 }) => `ac_mm_s2=${ac_mm_s2}&to=orbit&to_orbit=${r_f_au}`);
  for (const link of links.slice(0, 50)) core.solve(link);
  let converged = 0;
  const times = links.map((link) => {
    const start = performance.now();
    const { report } = core.solve(link);
    const took_ms = performance.now() - start;
    if (report.flight.status === "converged") converged++;
    return took_ms;
  });
  line(`WASM in Node, ${converged} of ${links.length} converged`, times);
}

/** Rendezvous with Mars at 1 mm/s^2: 24 dates over a synodic period, each cold, then one date after the other. */
async function solvingInSpace() {
  const core = await openCore();
  const meet = "geometry=spatial&arrive=rendezvous&ac_mm_s2=1";
  const dates = Array.from({ length: 24 }, (_, i) => new Date(Date.UTC(2030, 0, 1) + i * 32.5 * 86_400_000).toISOString().slice(0, 10));
  for (const date of dates.slice(0, 4)) core.solve(`${meet}&depart=${date}`);
  let converged = 0;
  const cold = dates.map((date) => {
    const start = performance.now();
    if (core.solve(`${meet}&depart=${date}`).report.flight.status === "converged") converged++;
    return performance.now() - start;
  });
  line(`WASM in Node, rendezvous whole, ${converged} of ${dates.length} converged`, cold);
  const link = `${meet}&span=2030-01-01,2032-02-19&step_d=6`;
  const items = core.study_items("dates", link).items.map((item) => {
    const start = performance.now();
    const points = core.study_evaluate("dates", link, item);
    return (performance.now() - start) / points.length;
  });
  line("WASM in Node, rendezvous along a row of dates, per date", items);
}

/** 120 dates at 20 accelerations to Mars, on two workers, from the click to the first rows and to the last. */
async function mapping(browser) {
  const page = await browser.newPage({ before: () => Object.defineProperty(navigator, "hardwareConcurrency", { value: 2 }) });
  const link = "geometry=spatial&arrive=rendezvous&ac_mm_s2=1&span=2030-01-01,2031-12-16&step_d=6&ac_range=0.5,3,20";
  await page.open(`${pathToFileURL(path("dist/sunreach.html")).href}#${link}`);
  const start = performance.now();
  await page.evaluate(() => [...document.querySelectorAll("#departures button")].find((button) => button.textContent.startsWith("Map")).click());
  await page.until(() => Number.parseInt(document.getElementById("departures-said").textContent, 10) > 0, undefined, 60_000);
  const first_s = (performance.now() - start) / 1000;
  await page.until(() => document.getElementById("departures-said").textContent.includes("finished"), undefined, 600_000);
  const all_s = (performance.now() - start) / 1000;
  process.stdout.write(`${browser.name}, map on 2 workers: first rows ${first_s.toFixed(2)} s, all ${all_s.toFixed(1)} s; ${await page.text("#departures-said")}\n`);
  await page.close();
}

/** From the start of navigation to the frame after the one in which the answer stands. */
async function opening(browser) {
  const times = [];
  for (let i = 0; i < 9; i++) {
    const page = await browser.newPage({ before: noteFirstAnswer });
    await page.open(pathToFileURL(path("dist/sunreach.html")).href);
    times.push(await page.until(() => window.firstAnswer_ms));
    await page.close();
  }
  process.stdout.write(`${browser.name}, very first opening: ${times[0].toFixed(0)} ms\n`);
  line(`${browser.name}, first answer after opening the file`, times.slice(1));
}

/** Work in animation frames while a slider and the orbit picture's zoom move. */
async function redrawing(browser) {
  const page = await browser.newPage({ before: noteFrames });
  await page.open(pathToFileURL(path("dist/sunreach.html")).href);
  const drive = (what) =>
    page.evaluate(async (part) => {
      window.frames_ms = [];
      const slider = document.querySelector("#field-area_m2").closest(".field").querySelector("input[type=range]");
      const start = Number(slider.value);
      for (let i = 0; i < 120; i++) {
        if (part === "zoom") document.querySelector(`#orbit button[aria-label="Zoom ${i % 20 < 10 ? "in" : "out"}"]`).click();
        else {
          slider.value = String(start + 0.6 * Math.sin(i / 15));
          slider.dispatchEvent(new Event("input"));
        }
        await new Promise((resolve) => window.plainFrame(resolve));
      }
      return window.frames_ms.filter((took_ms) => took_ms > 0.2);
    }, what);
  line(`${browser.name}, redraw of the orbit picture while zooming`, await drive("zoom"));
  line(`${browser.name}, redraw of both figures while a slider moves`, await drive("slide"));
  await page.close();
}

function noteFirstAnswer() {
  new MutationObserver((_, observer) => {
    if (!document.querySelector(".sentence")?.textContent.includes(" days")) return;
    observer.disconnect();
    requestAnimationFrame(() => requestAnimationFrame(() => (window.firstAnswer_ms = performance.now())));
  }).observe(document, { childList: true, subtree: true, characterData: true });
}

function noteFrames() {
  window.frames_ms = [];
  window.plainFrame = window.requestAnimationFrame.bind(window);
  let frame = -1;
  window.requestAnimationFrame = (call) =>
    window.plainFrame((time) => {
      const start = performance.now();
      call(time);
      const took_ms = performance.now() - start;
      // Several calls in one frame are one redraw.
      if (time === frame) window.frames_ms[window.frames_ms.length - 1] += took_ms;
      else window.frames_ms.push(took_ms);
      frame = time;
    });
}
