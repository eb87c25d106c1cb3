// The built files: their policies to the letter, nothing from outside, and the size that a mail takes.
import assert from "node:assert/strict";
import { createHash } from "node:crypto";
import { readdirSync, statSync } from "node:fs";
import test from "node:test";
import { path, text } from "../support.mjs";

const policyOf = (html) => /http-equiv="Content-Security-Policy" content="([^"]*)"/.exec(html)[1];
const hash = (content) => `sha256-${createHash("sha256").update(content).digest("base64")}`;
const COMMON = "default-src 'none'; img-src data:; base-uri 'none'; form-action 'none'";

test("the file's policy allows its own script, style, worker and core, and no connection", () => {
  const html = text("dist/sunreach.html");
  const script = /<script>([\s\S]*?)<\/script>/.exec(html)[1];
  const style = /<style>([\s\S]*?)<\/style>/.exec(html)[1];
  assert.equal(
    policyOf(html),
    `${COMMON}; script-src '${hash(script)}' 'wasm-unsafe-eval'; worker-src blob:; ` +
      `style-src-elem '${hash(style)}'; style-src-attr 'unsafe-inline'`,
  );
});

test("the hosted policy allows this server's own files only", () => {
  assert.equal(
    policyOf(text("dist/site/index.html")),
    `${COMMON}; connect-src 'self'; script-src 'self' 'wasm-unsafe-eval'; worker-src 'self'; ` +
      "style-src-elem 'self'; style-src-attr 'unsafe-inline'",
  );
});

test("neither page names another address", () => {
  for (const name of ["dist/sunreach.html", "dist/site/index.html"]) {
    const attributes = [...text(name).matchAll(/<[a-z][^>]*?\s(?:src|href|action|data)="([^"]*)"/g)].map((match) => match[1]);
    for (const address of attributes) assert.match(address, /^(data:image|#|[\w-]+\.(js|css|wasm)$)/, name);
  }
});

test("hosted files but the page itself carry the hash of their content in the name", () => {
  const names = readdirSync(path("dist/site")).sort();
  assert.equal(names.length, 5);
  for (const name of names.filter((name) => name !== "index.html")) assert.match(name, /^[a-z]+-[0-9a-f]{12}\.(js|css|wasm)$/);
});

test("the single file stays within 1.2 MB", () => {
  assert.ok(statSync(path("dist/sunreach.html")).size <= 1_200_000);
});
