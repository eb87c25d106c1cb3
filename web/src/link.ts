// The scenario link and the page's address. The only file that touches `location`.

/** Browsers refuse a flood of address changes: wait this long between two, ms. */
const SETTLE_MS = 350;

let written = "";
let timer: ReturnType<typeof setTimeout> | undefined;

/** Scenario text from keys and raw values, in the given order. */
export function compose(entries: Iterable<readonly [string, string]>): string {
  return [...entries].map(([key, value]) => `${key}=${escape(value)}`).join("&");
}

/** Escapes what would end a value or not survive an address; commas stay readable. */
function escape(value: string): string {
  // A lone half of a surrogate pair cannot be escaped: it becomes the replacement character.
  return encodeURIComponent(value.replace(/\p{Surrogate}/gu, "\ufffd"))
    .replaceAll("%2C", ",")
    .replaceAll("%20", "+");
}

/** What a canonical link says for a key; undefined where it leaves the key out. */
export function valueOf(link: string, key: string): string | undefined {
  return new URLSearchParams(link).get(key) ?? undefined;
}

/** What stands after the # of the address. */
export function readFragment(): string {
  return location.hash.slice(1);
}

/** Puts a canonical link into the address, soon, without adding to the history. */
export function writeFragment(link: string): void {
  clearTimeout(timer);
  timer = setTimeout(() => {
    written = link;
    history.replaceState(null, "", `#${link}`);
  }, SETTLE_MS);
}

/** Calls with the new text when someone else changes the fragment. */
export function watchFragment(changed: (text: string) => void): void {
  addEventListener("hashchange", () => {
    const text = readFragment();
    if (text === written) return;
    clearTimeout(timer);
    changed(text);
  });
}

/** The whole address that opens this page with this scenario. */
export function addressOf(link: string): string {
  return `${location.href.split("#")[0]}#${link}`;
}
