// Single file: the core's bytes (gzip, base64) and the worker's code are data blocks of the page itself.

function block(id: string): string {
  return document.getElementById(id)?.textContent ?? "";
}

let workerUrl: string | undefined;

export async function openModule(): Promise<WebAssembly.Module> {
  const text = atob(block("core"));
  const packed = new Uint8Array(text.length);
  for (let i = 0; i < text.length; i++) packed[i] = text.charCodeAt(i);
  const unpacked = new Blob([packed]).stream().pipeThrough(new DecompressionStream("gzip"));
  return WebAssembly.compile(await new Response(unpacked).arrayBuffer());
}

export function startWorker(): Worker {
  workerUrl ??= URL.createObjectURL(new Blob([block("worker")], { type: "text/javascript" }));
  return new Worker(workerUrl);
}
