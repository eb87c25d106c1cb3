// Versions stand in one place each, exactly, and lock files name no server.
import assert from "node:assert/strict";
import test from "node:test";
import { text } from "../support.mjs";

test("npm packages are pinned to the last digit", () => {
  const { devDependencies, dependencies } = JSON.parse(text("web/package.json"));
  assert.equal(dependencies, undefined);
  for (const [name, version] of Object.entries(devDependencies)) assert.match(version, /^\d+\.\d+\.\d+$/, name);
});

test("the npm lock file says what, and with which hash, but not where from", () => {
  const { packages } = JSON.parse(text("web/package-lock.json"));
  for (const [name, entry] of Object.entries(packages)) {
    assert.equal(entry.resolved, undefined, name);
    if (name !== "") assert.match(entry.integrity, /^sha512-/, name);
  }
});

test("the bindings tool has the version of the library in the product's lock file", () => {
  const version = (lock, name) => new RegExp(`name = "${name}"\nversion = "([^"]+)"`).exec(lock)[1];
  assert.equal(
    version(text("web/bindings/Cargo.lock"), "wasm-bindgen-cli-support"),
    version(text("Cargo.lock"), "wasm-bindgen"),
  );
});
