// One small interface over two browsers: Chromium through playwright-core, Firefox through puppeteer-core.
import { createRequire } from "node:module";
import { mkdtemp, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";

const require = createRequire(new URL("../../../web/package.json", import.meta.url));
const CHROMIUM_FLAGS = [
  "--no-sandbox",
  "--disable-gpu",
  "--disable-quic",
  "--no-first-run",
  "--disable-background-networking",
  "--disable-component-update",
  "--disable-sync",
];

/** Opens a browser with a profile of its own: `{ name, newPage, close }`. */
export async function launch(name) {
  const profile = await mkdtemp(join(tmpdir(), "page-test-"));
  const opened = await (name === "chromium" ? chromium(profile) : firefox(profile));
  return {
    name,
    newPage: async (options = {}) => wrap(await opened.newPage(), name, options),
    close: async () => {
      await opened.close();
      await rm(profile, { recursive: true, force: true, maxRetries: 5 });
    },
  };
}

async function chromium(profile) {
  const context = await require("playwright-core").chromium.launchPersistentContext(profile, {
    executablePath: "/usr/bin/chromium",
    headless: true,
    args: CHROMIUM_FLAGS,
  });
  return context;
}

function firefox(profile) {
  return require("puppeteer-core").launch({
    browser: "firefox",
    executablePath: "/usr/bin/firefox-esr",
    headless: true,
    userDataDir: profile,
    extraPrefsFirefox: { "browser.shell.checkDefaultBrowser": false, "datareporting.policy.dataSubmissionEnabled": false },
  });
}

/** What the tests need of a page, the same for both browsers; `errors` and `requests` fill up as things happen. */
async function wrap(page, name, { width = 1440, height = 900, before, dark = false }) {
  const playwright = name === "chromium";
  const errors = [];
  const requests = [];
  page.on("console", (message) => {
    // Tests read pixels back, which the page itself never does.
    const ours = message.text().includes("willReadFrequently");
    if (["error", "warning", "warn"].includes(message.type()) && !ours) errors.push(message.text());
  });
  page.on("pageerror", (error) => errors.push(String(error)));
  page.on("request", (request) => requests.push(request.url()));
  if (playwright) {
    await page.setViewportSize({ width, height });
    await page.emulateMedia({ colorScheme: dark ? "dark" : "light", reducedMotion: "reduce" });
    if (before) await page.addInitScript(before);
  } else {
    await page.setViewport({ width, height });
    if (before) await page.evaluateOnNewDocument(before);
  }
  const self = {
    errors,
    requests,
    open: async (url) => {
      await page.goto(url);
      await page.bringToFront();
      await self.until(() => document.getElementById("results")?.dataset.ready === "true");
    },
    evaluate: (call, argument) => page.evaluate(call, argument),
    resize: (w, h) => (playwright ? page.setViewportSize({ width: w, height: h }) : page.setViewport({ width: w, height: h })),
    press: (key) => page.keyboard.press(key),
    click: (selector) => page.click(selector),
    mouse: page.mouse,
    keyboard: page.keyboard,
    screenshot: (path) => page.screenshot({ path }),
    close: () => page.close(),
    /** Replaces a field's text as typing would. */
    fill: (key, text) =>
      page.evaluate(
        ([id, value]) => {
          const field = document.getElementById(id);
          field.value = value;
          field.dispatchEvent(new Event("input", { bubbles: true }));
        },
        [`field-${key}`, text],
      ),
    text: (selector) => page.evaluate((query) => document.querySelector(query)?.textContent ?? "", selector),
    /** Waits until a function in the page returns something true. */
    until: async (call, argument, patience_ms = 10_000) => {
      const end = Date.now() + patience_ms;
      for (;;) {
        const value = await page.evaluate(call, argument);
        if (value) return value;
        if (Date.now() > end) throw new Error(`waited ${patience_ms} ms in vain for ${call}`);
        await new Promise((resolve) => setTimeout(resolve, 20));
      }
    },
  };
  return self;
}
