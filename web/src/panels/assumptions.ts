// What the flight assumes, and how large each assumption is.
import { h, part, table } from "../dom";
import { valueOf } from "../link";
import type { Page } from "./page";

type Assumption = readonly [string, string];

const CIRCLES: Assumption = [
  "Circular orbits in one plane",
  "Each planet moves on a circle of its semi-major axis. Mars really ranges 9 % to either side of its circle and Mercury 21 %; planes differ by up to 7.0° (Mercury). No dates and no phases, so a flight matches an orbit, not a body.",
];

const ORBITS: readonly Assumption[] = [
  [
    "Planets on mean elements with rates",
    "Fitted for 1800 to 2050, ecliptic and equinox of J2000; arrivals after 2050 carry a caution. The Earth stands for the Earth–Moon barycentre: 4 700 km from the Earth's centre.",
  ],
  ["An orbit to be matched is frozen at departure", "Elements at the departure date, J2000 without one; a body to be met moves on, with the elements of its arrival date."],
];

const ASSUMPTIONS: readonly Assumption[] = [
  [
    "Two-body motion: only the Sun pulls",
    "At 1 mm/s² the Earth pulls as hard as the sail out to 0.6 million km, a matter of days at either end; other planets matter only when passed closely.",
  ],
  [
    "The Sun as a point source",
    "A disc of even brightness gives 1 − ¼ (R/r)² of the point's force: 0.014 % less at 0.2 au, 0.0005 % less at 1 au.",
  ],
  ["Steady sunlight", "Irradiance varies by ± 0.1 % over the solar cycle, and the acceleration with it."],
  ["A flat film", "Film sloping 5° away from the mean loses up to 0.8 % of its head-on force; billow also moves the force off the normal."],
  [
    "An ideal mirror on both faces",
    "A common optical set for aluminised film gives 0.908 of the ideal head-on force and less when slanted: expect flights longer by several per cent at the same characteristic acceleration.",
  ],
  ["Attitude followed at once", "Turn rates and jumps are shown, not limited; whether a craft can turn so is a separate question."],
  [
    "Nothing special close to the Sun",
    "Closer than 0.15 au a caution appears: film temperature, degradation and the Sun's size are then no longer small matters.",
  ],
  ["Time scale TDB", "About 69 s ahead of UTC."],
];

export function mountAssumptions({ state }: Page): void {
  const body = h("div");
  part("assumptions").append(h("h2", { id: "assumptions-title" }, "Assumptions and their size"), body);
  let listed: boolean | undefined;
  state.shown.watch((shown) => {
    const spatial = valueOf(shown?.link ?? "", "geometry") === "spatial";
    if (spatial === listed) return;
    listed = spatial;
    const [first, ...rest] = ASSUMPTIONS;
    const all = [...(first ? [first] : []), ...(spatial ? ORBITS : [CIRCLES]), ...rest];
    body.replaceChildren(
      table(
        "Assumptions and their size",
        ["assumed", "how much it matters"],
        all.map(([name, size]) => h("tr", {}, h("th", { scope: "row" }, name), h("td", { class: "words" }, size))),
        "prose",
      ),
    );
  });
}
