// How the page gets its core and its workers; the build picks delivery-file or delivery-site.
export function openModule(): Promise<WebAssembly.Module>;
export function startWorker(): Worker;
