// Hands a file to the reader, and text to the clipboard.

export function download(name: string, type: string, text: string): void {
  const url = URL.createObjectURL(new Blob([text], { type }));
  const anchor = document.createElement("a");
  anchor.href = url;
  anchor.download = name;
  anchor.click();
  // The browser reads the blob after the click has returned.
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

/** True when the clipboard took the text; a page opened from a file may be refused. */
export async function copy(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return false;
  }
}
