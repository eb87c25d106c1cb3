// Hosted: the core is compiled while it streams, and both files may be cached for ever by their hashed names.

declare const CORE_URL: string;
declare const WORKER_URL: string;

export function openModule(): Promise<WebAssembly.Module> {
  return WebAssembly.compileStreaming(fetch(CORE_URL));
}

export function startWorker(): Worker {
  return new Worker(WORKER_URL);
}
