// Bundles the page: dist/sunreach.html, one file that opens offline, and dist/site/, the same for a web server.
//
// Needs web/pkg/wasm.js and web/pkg/core.wasm (the Makefile makes them). The policies stand here, since the one for
// the file holds hashes of what is bundled.
import { gzipSync } from "node:zlib";
import { build } from "esbuild";
import { createHash } from "node:crypto";
import { mkdir, readFile, rm, writeFile } from "node:fs/promises";
import { fileURLToPath } from "node:url";

const here = (path) => fileURLToPath(new URL(path, import.meta.url));
const dist = here("../dist/");
const site = `${dist}site/`;

const common = "default-src 'none'; img-src data:; base-uri 'none'; form-action 'none'";
// plotters measures text with a style attribute, hence style-src-attr.
const filePolicy = (script, style) =>
  `${common}; script-src '${script}' 'wasm-unsafe-eval'; worker-src blob:; ` +
  `style-src-elem '${style}'; style-src-attr 'unsafe-inline'`;
const sitePolicy =
  `${common}; connect-src 'self'; script-src 'self' 'wasm-unsafe-eval'; worker-src 'self'; ` +
  `style-src-elem 'self'; style-src-attr 'unsafe-inline'`;

const sha256 = (text) => `sha256-${createHash("sha256").update(text).digest("base64")}`;
const hashed = (name, extension, content) =>
  `${name}-${createHash("sha256").update(content).digest("hex").slice(0, 12)}.${extension}`;

/** Bundles one entry of web/src and returns its text. `delivery` says how the page gets its core and worker. */
async function bundle(entry, delivery, define = {}) {
  const deliver = {
    name: "delivery",
    setup: (on) => on.onResolve({ filter: /\/delivery$/ }, () => ({ path: here(`src/engine/delivery-${delivery}.ts`) })),
  };
  const result = await build({
    entryPoints: [here(`src/${entry}`)],
    bundle: true,
    minify: true,
    write: false,
    format: "iife",
    target: ["chrome110", "firefox115", "safari16.4"],
    legalComments: "none",
    define,
    plugins: [deliver],
  });
  return result.outputFiles[0].text.trim();
}

/** The glue keeps one instance per evaluation; as a function, a dead instance can be replaced. */
async function wrapGlue() {
  const result = await build({
    entryPoints: [here("pkg/wasm.js")],
    bundle: true,
    write: false,
    format: "iife",
    globalName: "glue",
    logOverride: { "empty-import-meta": "silent" },
  });
  await writeFile(here("pkg/glue.js"), `export function openGlue() {\n${result.outputFiles[0].text}return glue;\n}\n`);
  await writeFile(here("pkg/glue.d.ts"), `export function openGlue(): typeof import("./wasm.js");\n`);
}

/** Fills the template; a function as replacement, so that "$" in code stays what it is. */
const fill = (template, parts) => template.replace(/<!--([a-z]+)-->/g, (whole, name) => parts[name] ?? whole);

await wrapGlue();
const [template, core, worker, styles] = await Promise.all([
  readFile(here("src/page.html"), "utf8"),
  readFile(here("pkg/core.wasm")),
  bundle("engine/worker.ts", "site"),
  bundle("styles.css", "site"),
]);
await rm(dist, { recursive: true, force: true });
await mkdir(site, { recursive: true });

const fileMain = await bundle("main.ts", "file");
// Data blocks never run: the worker's code becomes a blob, the core is compiled from its bytes.
const block = (id, text) => `<script type="text/plain" id="${id}">${text.replaceAll("</script", "<\\/script")}</script>`;
const file = fill(template, {
  policy: filePolicy(sha256(fileMain), sha256(styles)),
  styles: `<style>${styles}</style>`,
  code: block("core", gzipSync(core, { level: 9 }).toString("base64")) + block("worker", worker) + `<script>${fileMain}</script>`,
});
await writeFile(`${dist}sunreach.html`, file);

const names = { core: hashed("core", "wasm", core), worker: hashed("worker", "js", worker) };
const siteMain = await bundle("main.ts", "site", {
  CORE_URL: JSON.stringify(names.core),
  WORKER_URL: JSON.stringify(names.worker),
});
const siteNames = { main: hashed("main", "js", siteMain), styles: hashed("styles", "css", styles) };
await Promise.all([
  writeFile(`${site}${names.core}`, core),
  writeFile(`${site}${names.worker}`, worker),
  writeFile(`${site}${siteNames.main}`, siteMain),
  writeFile(`${site}${siteNames.styles}`, styles),
  writeFile(
    `${site}index.html`,
    fill(template, {
      policy: sitePolicy,
      styles: `<link rel="stylesheet" href="${siteNames.styles}"><link rel="preload" href="${names.core}" as="fetch" crossorigin>`,
      code: `<script src="${siteNames.main}"></script>`,
    }),
  ),
]);

const kilobytes = (bytes) => `${(bytes / 1000).toFixed(0)} kB`;
process.stdout.write(
  `dist/sunreach.html ${kilobytes(Buffer.byteLength(file))}; core ${kilobytes(core.length)}, ` +
    `page code ${kilobytes(fileMain.length)}, styles ${kilobytes(styles.length)}\n`,
);
