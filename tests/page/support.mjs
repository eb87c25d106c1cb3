// What the page's tests share: its modules compiled for Node, the core as the page loads it, and the built files.
import { createRequire } from "node:module";
import { readFileSync } from "node:fs";
import { fileURLToPath } from "node:url";

export const top = new URL("../../", import.meta.url);
export const path = (name) => fileURLToPath(new URL(name, top));
export const text = (name) => readFileSync(path(name), "utf8");
export const require = createRequire(path("web/package.json"));

/** Imports a TypeScript module of web/src. */
export async function load(name) {
  const result = await require("esbuild").build({
    entryPoints: [path(`web/src/${name}.ts`)],
    bundle: true,
    write: false,
    format: "esm",
    logLevel: "error",
  });
  return import(`data:text/javascript,${encodeURIComponent(result.outputFiles[0].text)}`);
}

const compiled = () => new WebAssembly.Module(readFileSync(path("web/pkg/core.wasm")));

/** A fresh instance of the core through the generated glue. */
export async function openCore() {
  const { openGlue } = await import(path("web/pkg/glue.js"));
  const glue = openGlue();
  glue.initSync({ module: compiled() });
  return glue;
}
