// The page as people meet it, in both browsers, from the file and from a server.
import assert from "node:assert/strict";
import { readdirSync } from "node:fs";
import { after, before, describe, test } from "node:test";
import { pathToFileURL } from "node:url";
import { serve } from "../../../web/serve.mjs";
import { openCore, path, require } from "../support.mjs";
import { launch } from "./browsers.mjs";

const FILE = pathToFileURL(path("dist/sunreach.html")).href;
const core = await openCore();
const sentenceOf = (link) => core.solve(link).report.sentence;
const hosted = readdirSync(path("dist/site"));
const axe = require("axe-core").source;

/** A shorter name for the text of the answer. */
const sentence = (page) => page.text(".sentence");
const sentenceIs = (page, wanted) => page.until((text) => document.querySelector(".sentence")?.textContent === text, wanted);
const errorAt = (page, key) => page.text(`#field-${key}-errors`);

for (const name of ["chromium", "firefox"])
  describe(name, () => {
    let browser;
    let server;
    let site;
    before(async () => {
      browser = await launch(name);
      server = await serve(path("dist/site"), 0);
      site = `http://127.0.0.1:${server.port}/`;
    });
    after(async () => {
      await browser?.close();
      server?.close();
    });

    /** Opens a page for one test and holds at its end that nothing was complained about and nothing left. */
    const visit = (title, { url = FILE, ...options }, body) =>
      test(title, async () => {
        const page = await browser.newPage(options);
        try {
          await page.open(typeof url === "function" ? url() : url);
          await body(page);
          assert.deepEqual(page.errors, []);
          const own = (address) => address.startsWith("file:") || address.startsWith("blob:") || address.startsWith("data:") || address.startsWith(site);
          assert.deepEqual(page.requests.filter((address) => !own(address)), []);
        } finally {
          await page.close();
        }
      });

    for (const [way, url] of [["file", FILE], ["served", () => site]]) {
      visit(`${way}: opens with the default flight, drawn, and asks for nothing that is not its own`, { url }, async (page) => {
        assert.equal(await sentence(page), sentenceOf(""));
        for (const figure of ["orbit", "histories"]) {
          const inked = () => page.until((part) => {
            const canvas = document.querySelector(`#${part} canvas`);
            if (canvas.width === 0) return false;
            const { data } = canvas.getContext("2d").getImageData(0, 0, canvas.width, canvas.height);
            const colours = new Set();
            for (let i = 0; i < data.length; i += 4 * 7) colours.add((data[i] << 16) | (data[i + 1] << 8) | data[i + 2]);
            return colours.size > 20;
          }, figure);
          assert.ok(await inked(), `${figure} is drawn`);
        }
        if (way === "file") assert.deepEqual(page.requests.filter((address) => !/^(file|blob|data):/.test(address)), []);
        else {
          const asked = new Set(page.requests.filter((address) => address.startsWith("http")).map((address) => address.slice(site.length) || "index.html"));
          assert.deepEqual([...asked].filter((name) => !hosted.includes(name)), []);
        }
      });

      visit(`${way}: a changed field is solved by a worker and goes into the address`, { url }, async (page) => {
        await page.fill("area_m2", "12800");
        await sentenceIs(page, sentenceOf("area_m2=12800&mass_kg=60"));
        await page.until(() => location.hash.includes("area_m2=12800"));
        await page.fill("to", "venus");
        await sentenceIs(page, sentenceOf("area_m2=12800&mass_kg=60&to=venus"));
      });
    }

    visit("a link carries the flight to a fresh page", {}, async (page) => {
      await page.fill("mass_kg", "45.5");
      await page.fill("to", "mercury");
      await page.fill("title", "Skua, <b>invented</b>");
      await page.until(() => location.hash.includes("title="));
      const address = await page.evaluate(() => location.href);
      const other = await browser.newPage();
      await other.open(address);
      assert.equal(await sentence(other), await sentence(page));
      assert.equal(await other.text(".scenario-title"), "Skua, <b>invented</b>");
      assert.equal(await other.evaluate(() => document.getElementById("field-mass_kg").value), "45.5");
      await other.close();
    });

    visit("the link to share is copied, or laid out to be copied by hand", {}, async (page) => {
      await page.fill("to", "venus");
      await sentenceIs(page, sentenceOf("to=venus"));
      await page.click("#copy-link");
      await page.until(() => document.querySelector(".said").textContent !== "");
      const field = await page.evaluate(() => {
        const { hidden, value } = document.querySelector("#tools input");
        return hidden ? null : value;
      });
      if (field === null) assert.equal(await page.text(".said"), "Link copied.");
      else assert.match(field, /^file:.*#v=1&to=venus$/);
    });

    visit("wrong input is marked at its field, kept as typed, and the last good result stays as stale", {}, async (page) => {
      const good = await sentence(page);
      for (const typed of ["", "abc", "0", "-3", "NaN", "Infinity", "1e308"]) {
        await page.fill("mass_kg", typed);
        await page.until(() => document.getElementById("field-mass_kg").getAttribute("aria-invalid") === "true");
        assert.ok((await errorAt(page, "mass_kg")).length > 10);
        assert.match(await page.text("#stale"), /does not match the inputs.*mass_kg/s);
        assert.ok(await page.evaluate(() => document.getElementById("results").classList.contains("stale")));
        assert.equal(await sentence(page), good);
        assert.equal(await page.evaluate(() => document.getElementById("field-mass_kg").value), typed);
        const ids = await page.evaluate(() => document.getElementById("field-mass_kg").getAttribute("aria-describedby").split(" ").every((id) => document.getElementById(id)));
        assert.ok(ids);
      }
      await page.fill("mass_kg", "30");
      await sentenceIs(page, sentenceOf("area_m2=6400&mass_kg=30"));
      await page.until(() => !document.getElementById("results").classList.contains("stale"));
      assert.equal(await errorAt(page, "mass_kg"), "");
    });

    visit("the craft can be given three ways that agree", {}, async (page) => {
      await page.click('input[value="acceleration"]');
      await page.fill("ac_mm_s2", "1");
      await sentenceIs(page, sentenceOf("ac_mm_s2=1"));
      await page.click('input[value="lightness"]');
      await page.fill("lightness", "0.17");
      await page.until(() => location.hash.includes("ac_mm_s2=1.008"));
      await page.fill("lightness", "quick");
      await page.until(() => document.getElementById("field-lightness").getAttribute("aria-invalid") === "true");
      await page.click('input[value="size"]');
      await sentenceIs(page, sentenceOf(""));
    });

    visit("a broken link opens the default flight and says what was wrong", { url: `${FILE}#to=nowhere&colour=red&to=%zz` }, async (page) => {
      assert.equal(await sentence(page), sentenceOf(""));
      assert.match(await page.text("#notice"), /could not be used.*to.*nowhere.*colour/s);
    });

    visit("a link that asks for more than is solved says so by key, and is mended from there", { url: `${FILE}#film=aluminised` }, async (page) => {
      assert.match(await page.text("#notice"), /film.*ideal/s);
      assert.equal(await page.evaluate(() => document.getElementById("orbit").checkVisibility()), false);
      await page.evaluate(() => [...document.querySelectorAll("#notice button")].find((button) => button.textContent === "Remove film").click());
      await sentenceIs(page, sentenceOf(""));
      await page.until(() => document.querySelector("#orbit canvas").width > 400);
    });

    visit("a new fragment in the address opens its flight", {}, async (page) => {
      await page.evaluate(() => (location.hash = "#to=jupiter&ac_mm_s2=2"));
      await sentenceIs(page, sentenceOf("to=jupiter&ac_mm_s2=2"));
      assert.equal(await page.evaluate(() => document.getElementById("field-ac_mm_s2").value), "2");
    });

    const markup = "<img src=x onerror=document.title='run'><script>document.title='run'</script>";
    visit("markup in links and fields is shown as text and never runs", { url: `${FILE}#title=${encodeURIComponent(markup.slice(0, 45))}&${encodeURIComponent(markup)}=${encodeURIComponent(markup)}` }, async (page) => {
      await page.fill("title", markup.slice(0, 45));
      await page.fill("area_m2", markup);
      await page.until(() => document.getElementById("field-area_m2").getAttribute("aria-invalid") === "true");
      assert.equal(await page.evaluate(() => document.querySelectorAll("img, main script").length), 0);
      assert.equal(await page.evaluate(() => document.title), "Sunreach");
    });

    visit("a megabyte in the address is a message, not the end", { url: `${FILE}#title=${"x".repeat(1_000_000)}` }, async (page) => {
      assert.equal(await sentence(page), sentenceOf(""));
      assert.match(await page.text("#notice"), /could not be used/);
    });

    visit("a trap in the solver becomes a message with the link, and the page goes on", { before: trapOnTitle }, async (page) => {
      await page.fill("title", "trap-here");
      await page.until(() => document.getElementById("notice").textContent.includes("stopped unexpectedly"));
      assert.match(await page.evaluate(() => document.querySelector("#notice input").value), /#.*title=trap-here/);
      assert.equal(await page.evaluate(() => document.getElementById("field-title").value), "trap-here");
      await page.fill("title", "");
      await page.fill("to", "venus");
      await sentenceIs(page, sentenceOf("to=venus"));
      assert.doesNotMatch(await page.text("#notice"), /stopped unexpectedly/);
    });

    visit("the time cursor is one for both figures and moves by key and by pointer", {}, async (page) => {
      await page.evaluate(() => document.getElementById("cursor").focus());
      const start = await page.text(".readout");
      for (let i = 0; i < 10; i++) await page.press("ArrowRight");
      await page.until((before) => document.querySelector(".readout").textContent !== before, start);
      const byKey = await page.text(".day");
      const spot = await page.evaluate(() => {
        const frame = document.querySelector("#histories .figure");
        frame.scrollIntoView({ block: "center" });
        const { left, top, width, height } = frame.getBoundingClientRect();
        return [left + width / 2, top + height / 2];
      });
      await page.mouse.move(...spot);
      await page.until((before) => document.querySelector(".day").textContent !== before, byKey);
    });

    visit("the orbit picture zooms and moves by button, key, wheel and drag", {}, async (page) => {
      // A sum over the pixels, each weighted by its place.
      const picture = () =>
        page.evaluate(() => {
          const canvas = document.querySelector("#orbit canvas");
          const { data } = canvas.getContext("2d").getImageData(0, 0, canvas.width, canvas.height);
          return data.reduce((sum, value, i) => (sum + value * (i % 65521)) % 2147483647, 0);
        });
      const settled = async () => {
        await page.evaluate(() => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))));
        return picture();
      };
      const seen = [await settled()];
      const changed = async (what) => {
        const now = await settled();
        assert.notEqual(now, seen.at(-1), what);
        seen.push(now);
      };
      await page.click('#orbit button[aria-label="Zoom in"]');
      await changed("zoom by button");
      await page.evaluate(() => document.querySelector("#orbit .figure").focus());
      await page.press("ArrowRight");
      await changed("move by key");
      const [x, y] = await page.evaluate(() => {
        const { left, top, width, height } = document.querySelector("#orbit .figure").getBoundingClientRect();
        return [left + width / 2, top + height / 3];
      });
      await page.mouse.move(x, y);
      await page.mouse.down();
      await page.mouse.move(x + 60, y + 40);
      await page.mouse.up();
      await changed("move by drag");
      if (name === "chromium") {
        // BiDi of this Firefox has no wheel in the library that drives it.
        await page.mouse.wheel(0, -300);
        await changed("zoom by wheel");
      }
      await page.press("0");
      assert.equal(await settled(), seen[0]);
    });

    visit("every control is reached by the keyboard alone, and the focus shows", {}, async (page) => {
      const wanted = await page.evaluate(() => {
        const all = [...document.querySelectorAll("button:not(:disabled), input:not([tabindex='-1']), select, summary, [tabindex='0']")];
        const radios = new Set();
        return all.filter((element) => {
          if (element.closest("[hidden]") || (element.closest("details:not([open])") && element.tagName !== "SUMMARY")) return false;
          if (element.type !== "radio") return true;
          if (radios.has(element.name)) return false;
          radios.add(element.name);
          return true;
        }).length;
      });
      const reached = new Set();
      for (let i = 0; i < wanted + 5; i++) {
        await page.press("Tab");
        const at = await page.evaluate(() => {
          const element = document.activeElement;
          if (element === document.body) return null;
          const { outlineStyle } = getComputedStyle(element);
          const all = [...document.querySelectorAll("*")];
          return { index: all.indexOf(element), outlined: outlineStyle !== "none", tag: element.outerHTML.slice(0, 80) };
        });
        if (!at) continue;
        // Round once: coming back from the browser's own bars a focus need not show again.
        if (reached.has(at.index)) break;
        assert.ok(at.outlined, at.tag);
        reached.add(at.index);
      }
      assert.ok(reached.size >= wanted, `${reached.size} of ${wanted} reached`);
    });

    for (const dark of name === "chromium" ? [false, true] : [false])
      visit(`axe finds nothing in the ${dark ? "dark" : "light"} look, matching or stale`, { dark }, async (page) => {
        assert.equal(await page.evaluate(() => document.documentElement.dataset.theme), dark ? "dark" : "light");
        await page.evaluate(axe);
        const violations = () => page.evaluate(async () => (await window.axe.run()).violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(" ").slice(0, 300)}`));
        assert.deepEqual(await violations(), []);
        await page.fill("area_m2", "-1");
        await page.until(() => document.getElementById("results").classList.contains("stale"));
        assert.deepEqual(await violations(), []);
      });

    for (const width of [390, 700, 1024, 1440, 1920])
      visit(`nothing sticks out at ${width} px, and targets are large enough`, { width }, async (page) => {
        const scroll = await page.evaluate(() => document.documentElement.scrollWidth);
        assert.ok(scroll <= width, `${scroll}`);
        const small = await page.evaluate(() =>
          [...document.querySelectorAll("button, select, summary, input:not([type=radio], [type=checkbox], [aria-hidden]), label.choice")]
            .filter((element) => element.checkVisibility() && !element.closest(".unseen"))
            .map((element) => ({ html: element.outerHTML.slice(0, 80), box: element.getBoundingClientRect() }))
            .filter(({ box }) => box.width > 0 && (box.width < 24 || box.height < 24))
            .map(({ html, box }) => `${html} ${box.width} x ${box.height}`),
        );
        assert.deepEqual(small, []);
      });

    visit("folded groups on a narrow page show their values", { width: 390 }, async (page) => {
      assert.equal(await page.evaluate(() => document.querySelector(".group").open), false);
      assert.match(await page.text(".group .values"), /6400 m².*60 kg/);
    });

    visit("light and dark change with a button and the figures with them", {}, async (page) => {
      const corner = () => page.evaluate(() => [...document.querySelector("#orbit canvas").getContext("2d").getImageData(3, 3, 1, 1).data].join());
      await page.until(() => document.querySelector("#orbit canvas").width > 400);
      const light = await corner();
      await page.click("#look");
      await page.evaluate(() => new Promise((resolve) => requestAnimationFrame(() => requestAnimationFrame(resolve))));
      assert.equal(await page.evaluate(() => document.documentElement.dataset.theme), "dark");
      assert.notEqual(await corner(), light);
    });

    visit("the published checks run when they come into view", {}, async (page) => {
      await page.evaluate(() => document.getElementById("checks").scrollIntoView());
      await page.until(() => /(\d+) of \1 checks passed/.test(document.querySelector("#checks [role=status]").textContent));
    });

    visit("figures have words, and tables behind them", {}, async (page) => {
      for (const figure of ["orbit", "histories"]) {
        assert.ok((await page.text(`#${figure}-words`)).length > 40);
        await page.evaluate((part) => document.querySelector(`#${part} .behind summary`).click(), figure);
        await page.until((part) => document.querySelectorAll(`#${part} .behind tbody tr`).length > 10, figure);
      }
    });
  });

/**
 * Runs in the page before its own code: workers get a prelude that makes the core's `solve` trap on a certain title,
 * as an unreachable instruction would.
 */
function trapOnTitle() {
  const prelude = `
    const Real = WebAssembly.Instance;
    WebAssembly.Instance = function (module, imports) {
      const { exports } = new Real(module, imports);
      const solve = (...all) => {
        const bytes = new Uint8Array(exports.memory.buffer, all.find((n) => n > 1000), 400);
        if (new TextDecoder().decode(bytes).includes("trap-here")) throw new WebAssembly.RuntimeError("unreachable");
        return exports.solve(...all);
      };
      return { exports: { ...exports, solve } };
    };
  `;
  const real = URL.createObjectURL;
  URL.createObjectURL = (blob) => real.call(URL, new Blob([prelude, blob], { type: "text/javascript" }));
}
