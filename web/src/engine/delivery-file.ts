// Single file: the core's bytes and the worker's code are data blocks of the page itself.

function block(id: string): string {
  return document.getElementById(id)?.textContent ?? "";
}

let workerUrl: string | undefined;

export function openModule(): Promise<WebAssembly.Module> {
  const text = atob(block("core"));
  const bytes = new Uint8Array(text.length);
  for (let i = 0; i < text.length; i++) bytes[i] = text.charCodeAt(i);
  return WebAssembly.compile(bytes);
}

export function startWorker(): Worker {
  workerUrl ??= URL.createObjectURL(new Blob([block("worker")], { type: "text/javascript" }));
  return new Worker(workerUrl);
}
