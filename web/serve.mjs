// Serves dist/site on this machine only: `node serve.mjs [PORT]`, the next free port if that one is taken.
import { createReadStream } from "node:fs";
import { stat } from "node:fs/promises";
import { createServer } from "node:http";
import { extname, join } from "node:path";
import { fileURLToPath } from "node:url";

const TYPES = {
  ".html": "text/html; charset=utf-8",
  ".js": "text/javascript; charset=utf-8",
  ".css": "text/css; charset=utf-8",
  ".wasm": "application/wasm",
};

/** Starts a server for a folder; resolves to `{ port, close }`. Port 0 lets the system choose. */
export function serve(folder, port) {
  const server = createServer(async (request, response) => {
    const name = new URL(request.url, "http://localhost").pathname.slice(1) || "index.html";
    const path = join(folder, name);
    // One flat folder: any other name, dots and slashes included, does not exist.
    const found = /^[\w.-]+$/.test(name) && (await stat(path).catch(() => null))?.isFile();
    if (!found || !["GET", "HEAD"].includes(request.method)) {
      response.writeHead(found ? 405 : 404, { "content-type": "text/plain" }).end(found ? "only GET" : "not found");
      return;
    }
    response.writeHead(200, {
      "content-type": TYPES[extname(name)] ?? "application/octet-stream",
      // Names carry a hash of the content, but for the page itself.
      "cache-control": name === "index.html" ? "no-cache" : "public, max-age=31536000, immutable",
      "x-content-type-options": "nosniff",
    });
    if (request.method === "HEAD") response.end();
    else createReadStream(path).pipe(response);
  });
  return new Promise((resolve, reject) => {
    server.once("error", reject);
    server.listen(port, "127.0.0.1", () =>
      resolve({ port: server.address().port, close: () => server.close().closeAllConnections() }),
    );
  });
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const folder = fileURLToPath(new URL("../dist/site/", import.meta.url));
  const wanted = Number(process.argv[2] ?? 8017);
  const taken = (error) => {
    if (error.code === "EADDRINUSE") return serve(folder, 0);
    throw error;
  };
  const { port } = await serve(folder, wanted).catch(taken);
  process.stdout.write(`The page: http://127.0.0.1:${port}/ (Ctrl+C ends it); the same offline: dist/sunreach.html\n`);
}
