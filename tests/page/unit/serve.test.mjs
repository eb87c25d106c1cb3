// The server for one machine: right types, right caching, nothing outside its folder.
import assert from "node:assert/strict";
import { once } from "node:events";
import { connect } from "node:net";
import { readdirSync } from "node:fs";
import { after, before, test } from "node:test";
import { serve } from "../../../web/serve.mjs";
import { path } from "../support.mjs";

let server;
before(async () => (server = await serve(path("dist/site"), 0)));
after(() => server.close());
const get = (name, options) => fetch(`http://127.0.0.1:${server.port}/${name}`, options);

test("the page is asked for anew each time, hashed files are kept", async () => {
  assert.equal((await get("")).headers.get("cache-control"), "no-cache");
  const types = { js: "text/javascript; charset=utf-8", css: "text/css; charset=utf-8", wasm: "application/wasm" };
  for (const name of readdirSync(path("dist/site")).filter((name) => name !== "index.html")) {
    const { status, headers } = await get(name);
    assert.equal(status, 200);
    assert.match(headers.get("cache-control"), /immutable/);
    assert.equal(headers.get("content-type"), types[name.split(".").at(-1)]);
  }
});

test("nothing outside the folder is served", async () => {
  for (const name of ["..%2Fsunreach.html", "nothing.js", "%2e%2e/Cargo.toml", "a/b"]) assert.equal((await get(name)).status, 404, name);
  const socket = connect(server.port, "127.0.0.1");
  socket.write("GET /../sunreach.html HTTP/1.0\r\n\r\n");
  const [answer] = await once(socket, "data");
  assert.match(String(answer), /^HTTP\/1\.1 404/);
  socket.destroy();
});

test("only reading is allowed", async () => assert.equal((await get("", { method: "POST" })).status, 405));

test("a port in use is an error that says so", async () => {
  await assert.rejects(serve(path("dist/site"), server.port), { code: "EADDRINUSE" });
});
