// Flights in space and their departure dates as people meet them, in both browsers.
import assert from "node:assert/strict";
import { after, before, describe, test } from "node:test";
import { pathToFileURL } from "node:url";
import { openCore, path, require } from "../support.mjs";
import { launch } from "./browsers.mjs";

const FILE = pathToFileURL(path("dist/sunreach.html")).href;
const MEET = "geometry=spatial&arrive=rendezvous&ac_mm_s2=1";
const DATED = `${MEET}&depart=2031-02-01`;
const STUDY = "span=2031-01-20,2031-04-10&step_d=10&ac_range=0.9,1.5,3";
const core = await openCore();
const axe = require("axe-core").source;
const solved = new Map();
const sentenceOf = (link) => {
  if (!solved.has(link)) solved.set(link, core.solve(link).report.sentence);
  return solved.get(link);
};
const sentenceIs = (page, link) => page.until((text) => document.querySelector(".sentence")?.textContent === text, sentenceOf(link), 30_000);
const value = (page, key) => page.evaluate((id) => document.getElementById(id).value, `field-${key}`);
const visible = (page, key) => page.evaluate((id) => document.getElementById(id).checkVisibility(), `field-${key}`);
const said = (page) => page.text("#departures-said");
const button = (page, section, start) =>
  page.evaluate(
    ([id, words]) => [...document.querySelectorAll(`#${id} button`)].find((element) => element.textContent.startsWith(words) && element.checkVisibility()).click(),
    [section, start],
  );
const finished = (page) => page.until(() => document.getElementById("departures-said").textContent.includes("finished"), undefined, 90_000);
/** Rows of the departures' table as text. */
const rows = (page) => page.evaluate(() => [...document.querySelectorAll("#departures .beside tbody tr")].map((row) => [...row.cells].map((cell) => cell.textContent).join(" | ")));
/** A sum over a canvas, each pixel weighted by its place, after all that was asked for is drawn. */
const picture = (page, part) =>
  page.evaluate(async (id) => {
    await new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve)));
    const canvas = document.querySelector(`#${id} canvas`);
    const { data } = canvas.getContext("2d").getImageData(0, 0, canvas.width, canvas.height);
    return data.reduce((sum, value, i) => (sum + value * (i % 65521)) % 2147483647, 0);
  }, part);

for (const name of ["chromium", "firefox"])
  describe(`${name}, in space`, () => {
    let browser;
    before(async () => (browser = await launch(name)));
    after(() => browser?.close());

    const visit = (title, { link = DATED, ...options }, body) =>
      test(title, async () => {
        const page = await browser.newPage(options);
        try {
          await page.open(`${FILE}#${link}`);
          await body(page);
          assert.deepEqual(page.errors, []);
        } finally {
          await page.close();
        }
      });

    visit("fields come where they have a meaning, and what was typed stays through it all", { link: "" }, async (page) => {
      assert.deepEqual(await Promise.all(["depart", "arrive", "to_orbit_a_au"].map((key) => visible(page, key))), [false, false, false]);
      await page.fill("geometry", "spatial");
      await page.fill("arrive", "rendezvous");
      await page.until(() => document.getElementById("field-arrive").getAttribute("aria-invalid") === "true");
      assert.match(await page.text("#field-arrive-errors"), /departure date/);
      await page.fill("depart", "2031-02-30");
      await page.until(() => document.getElementById("field-depart").getAttribute("aria-invalid") === "true");
      assert.match(await page.text("#field-depart-errors"), /2031-02-30.*calendar/);
      assert.match(await page.text("#stale"), /does not match the inputs/);
      await page.fill("geometry", "coplanar");
      await sentenceIs(page, "");
      assert.equal(await visible(page, "depart"), false);
      await page.fill("geometry", "spatial");
      assert.equal(await value(page, "depart"), "2031-02-30");
      await page.fill("depart", "2031-02-01");
      await sentenceIs(page, "geometry=spatial&arrive=rendezvous&depart=2031-02-01");
      await page.until(() => location.hash.includes("depart=2031-02-01"));
    });

    visit("a date moves by day and month with the keys, and by the browser's calendar", {}, async (page) => {
      await page.evaluate(() => document.getElementById("field-depart").focus());
      await page.press("ArrowUp");
      assert.equal(await value(page, "depart"), "2031-02-02");
      await page.press("PageDown");
      assert.equal(await value(page, "depart"), "2031-01-03");
      await page.evaluate(() => {
        const native = document.querySelector("#field-depart ~ .calendar input[type=date]");
        native.value = "2031-02-11";
        native.dispatchEvent(new Event("input"));
      });
      await sentenceIs(page, DATED.replace("2031-02-01", "2031-02-11"));
    });

    visit("an orbit of one's own goes field by field into one key, with errors at the field", { link: "geometry=spatial&ac_mm_s2=2" }, async (page) => {
      await page.fill("to", "orbit");
      const [size, tilt] = [Number(await value(page, "to_orbit_a_au")), Number(await value(page, "to_orbit_i_deg"))];
      // Mars at J2000: a 1.5237 au, i 1.850 deg, from memory of any table of elements.
      assert.ok(Math.abs(size - 1.5237) < 1e-3 && Math.abs(tilt - 1.85) < 0.01);
      await page.fill("to_orbit_e", "1.2");
      await page.until(() => document.getElementById("field-to_orbit_e").getAttribute("aria-invalid") === "true");
      assert.match(await page.text("#field-to_orbit_e-errors"), /1\.2.*0\.99/);
      assert.equal(await page.text("#field-to_orbit_a_au-errors"), "");
      for (const [element, text] of [["a_au", "1.3"], ["e", "0.1"], ["i_deg", "2"], ["node_deg", "40"], ["arg_peri_deg", ""]]) await page.fill(`to_orbit_${element}`, text);
      await sentenceIs(page, "geometry=spatial&ac_mm_s2=2&to=orbit&to_orbit=1.3,0.1,2,40");
      const address = await page.until(() => location.hash.includes("to_orbit=1.3,0.1,2,40") && location.href);
      const other = await browser.newPage();
      await other.open(address);
      assert.equal(await value(other, "to_orbit_i_deg"), "2");
      assert.equal(await other.text(".sentence"), await page.text(".sentence"));
      await other.close();
      await page.fill("geometry", "coplanar");
      assert.deepEqual([await visible(page, "to_orbit_a_au"), await visible(page, "to_orbit_e")], [true, false]);
      await sentenceIs(page, "ac_mm_s2=2&to=orbit&to_orbit=1.3");
    });

    visit("what a link sets without a meaning is shown with its reason", { link: "depart=2031-02-01" }, async (page) => {
      assert.equal(await visible(page, "depart"), true);
      assert.match(await page.text("#field-depart-errors"), /spatial/);
      await page.fill("depart", "");
      await sentenceIs(page, "");
    });

    visit("the picture tilts and turns by drag, keys and buttons, moves with Shift, and is reset", {}, async (page) => {
      const seen = [await picture(page, "orbit")];
      const changed = async (what) => {
        const now = await picture(page, "orbit");
        assert.notEqual(now, seen.at(-1), what);
        seen.push(now);
      };
      await page.click('#orbit button[aria-label="Tilt towards edge-on"]');
      await changed("tilt by button");
      await page.evaluate(() => document.querySelector("#orbit .figure").focus());
      await page.press("ArrowRight");
      await changed("turn by key");
      const [x, y] = await page.evaluate(() => {
        const { left, top, width, height } = document.querySelector("#orbit .figure").getBoundingClientRect();
        return [left + width / 2, top + height / 3];
      });
      const drag = async () => {
        await page.mouse.move(x, y);
        await page.mouse.down();
        await page.mouse.move(x + 50, y + 30);
        await page.mouse.up();
      };
      await drag();
      await changed("tilt by drag");
      await page.keyboard.down("Shift");
      await drag();
      await page.keyboard.up("Shift");
      await changed("move by drag with Shift");
      await page.click('#orbit input[value="move"]');
      assert.equal(await page.evaluate(() => document.querySelectorAll('#orbit button[aria-label="Move the view up"]').length), 1);
      await page.click('#orbit button[aria-label="Move the view up"]');
      await changed("move by button");
      await button(page, "orbit", "From north");
      await changed("from north");
      await page.evaluate(() => document.querySelector("#orbit .figure").focus());
      await page.press("0");
      await page.mouse.move(2, 2);
      await page.evaluate(() => document.getElementById("cursor").dispatchEvent(new Event("input")));
      assert.equal(await picture(page, "orbit"), seen[0]);
    });

    visit("the bodies of a dated flight follow the time cursor", {}, async (page) => {
      const start = await picture(page, "orbit");
      await page.evaluate(() => document.getElementById("cursor").focus());
      for (let i = 0; i < 8; i++) await page.press("ArrowRight");
      assert.notEqual(await picture(page, "orbit"), start);
    });

    visit("histories, table and comparison tell what dates bring", {}, async (page) => {
      const { flight, impulsive } = core.solve(DATED).report;
      const readout = await page.text(".readout");
      for (const word of ["clock angle", "Earth distance", "Sun–Earth–craft angle"]) assert.match(readout, new RegExp(word));
      const tall = () => page.evaluate(() => document.querySelector("#histories canvas").clientHeight);
      const before = await tall();
      await page.click('#histories input[name="earth_range_au"]');
      await page.until((height) => document.querySelector("#histories canvas").clientHeight > height, before);
      await page.evaluate(() => document.querySelector("#histories .behind summary").click());
      assert.match(await page.until(() => document.querySelector("#histories .behind thead")?.textContent), /clock angle.*Earth distance.*Sun–Earth–craft/);
      const table = await page.text("#compare");
      for (const day of [flight.depart, flight.arrive, impulsive.dated.depart, impulsive.dated_same_dates.arrive]) assert.ok(table.includes(day.slice(0, 10)), day);
      assert.match(table, /C3.*Excess at arrival.*Light time/s);
      assert.match(await page.text("#covers"), /Searched: /);
      assert.match(await page.text("#proof"), /the one shown/);
      assert.equal(await page.evaluate(() => document.querySelectorAll("#proof tbody tr").length), flight.branches.length);
    });

    visit("a flight without a date has neither bodies nor dates, and says so nowhere", { link: "geometry=spatial&ac_mm_s2=1" }, async (page) => {
      await sentenceIs(page, "geometry=spatial&ac_mm_s2=1");
      assert.doesNotMatch(await page.text("#compare"), /C3|TDB/);
      const readout = await page.evaluate(() => [...document.querySelectorAll(".readout div:not([hidden])")].map((line) => line.textContent).join());
      assert.match(readout, /clock angle/);
      assert.doesNotMatch(readout, /–|Earth distance/);
    });

    visit("departures: rows as they come, the same as on one worker; a row opens its flight, which agrees", { link: `${MEET}&${STUDY}` }, async (page) => {
      await button(page, "departures", "Sweep");
      await finished(page);
      assert.match(await said(page), /^9 of 9 flights/);
      const both = await rows(page);
      assert.equal(both.length, 9);
      assert.match(both.join("\n"), /shortest/);
      assert.match(await page.text("#departures"), /what slipping costs/);
      assert.ok((await page.text("#departures-words")).length > 60);
      await page.evaluate(() => document.querySelector("#departures .beside tbody button").click());
      await page.until(() => /agrees with the row/.test(document.getElementById("departures-agreement").textContent), undefined, 30_000);
      assert.equal(await value(page, "depart"), "2031-01-20");
      assert.equal(await value(page, "span_last"), "2031-04-10");
      const alone = await browser.newPage({ before: () => Object.defineProperty(navigator, "hardwareConcurrency", { value: 1 }) });
      await alone.open(`${FILE}#${MEET}&${STUDY}`);
      await button(alone, "departures", "Sweep");
      await finished(alone);
      assert.deepEqual(await rows(alone), both);
      await alone.close();
    });

    visit("departures: the map stops, goes on, and opens a flight where it is clicked", { link: `${MEET}&${STUDY}` }, async (page) => {
      const there = async () => Number.parseInt(await said(page), 10);
      await page.fill("span_last", "2033-01-01");
      await page.fill("ac_range_count", "30");
      await button(page, "departures", "Map");
      await page.until(() => Number.parseInt(document.getElementById("departures-said").textContent, 10) > 0, undefined, 30_000);
      await button(page, "departures", "Stop");
      await page.until(() => document.getElementById("departures-said").textContent.includes("stopped"));
      const stopped = await there();
      assert.ok(stopped > 0 && stopped < 2160, String(stopped));
      await button(page, "departures", "Go on");
      await page.until((before) => Number.parseInt(document.getElementById("departures-said").textContent, 10) > before, stopped, 30_000);
      assert.match(await said(page), /working/);
      // A new study takes the place of the one that runs.
      await page.fill("span_last", "2031-04-10");
      await page.fill("ac_range_count", "3");
      await button(page, "departures", "Map");
      await finished(page);
      assert.match(await said(page), /^27 of 27/);
      const spot = await page.evaluate(() => {
        const frame = document.querySelector("#departures .figure");
        frame.scrollIntoView({ block: "center" });
        const { left, top, width, height } = frame.getBoundingClientRect();
        return [left + width / 2, top + height * 0.6];
      });
      await page.mouse.move(...spot);
      await page.mouse.down();
      await page.mouse.up();
      await page.until(() => /agrees with the row/.test(document.getElementById("departures-agreement").textContent), undefined, 30_000);
      assert.ok(["0.9", "1.5"].includes(await value(page, "ac_mm_s2")) || Number(await value(page, "ac_mm_s2")) > 1);
    });

    visit("departures: what cannot be studied is refused in words, and circles have no dates", { link: "geometry=spatial&ac_mm_s2=1" }, async (page) => {
      await button(page, "departures", "Sweep");
      assert.match(await page.text("#departures .errors:not(:empty)"), /arrive.*rendezvous/);
      await page.fill("span_last", "2029-01-01");
      await page.until(() => document.getElementById("field-span_first").getAttribute("aria-invalid") === "true");
      await page.fill("geometry", "coplanar");
      assert.match(await page.text("#departures"), /Circles have no dates/);
    });

    if (name === "chromium")
      for (const dark of [false, true])
        visit(`axe finds nothing beside a dated flight and its departures, ${dark ? "dark" : "light"}`, { link: `${DATED}&${STUDY}`, dark }, async (page) => {
          await button(page, "departures", "Sweep");
          await finished(page);
          await page.evaluate(axe);
          const violations = await page.evaluate(async () => (await window.axe.run()).violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(" ").slice(0, 300)}`));
          assert.deepEqual(violations, []);
        });

    for (const width of [390, 1024, 1440])
      visit(`with dates nothing sticks out at ${width} px, and targets are large enough`, { width, link: `${DATED}&${STUDY}` }, async (page) => {
        await button(page, "departures", "Sweep");
        await finished(page);
        assert.ok((await page.evaluate(() => document.documentElement.scrollWidth)) <= width);
        const small = await page.evaluate(() =>
          [...document.querySelectorAll("button, select, summary, input:not([type=radio], [type=checkbox], [aria-hidden]), label.choice")]
            .filter((element) => element.checkVisibility())
            .map((element) => ({ html: element.outerHTML.slice(0, 80), box: element.getBoundingClientRect() }))
            .filter(({ box }) => box.width > 0 && (box.width < 24 || box.height < 24))
            .map(({ html, box }) => `${html} ${box.width} x ${box.height}`),
        );
        assert.deepEqual(small, []);
      });
  });
