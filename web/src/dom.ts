// Small helpers that build elements. Text only ever becomes text: nothing here parses markup.

type Attribute = string | number | boolean | null | undefined | ((event: Event) => void);
type Child = Node | string | null | undefined | false;

/** Builds an element: `on…` attributes become listeners, true an empty attribute, false and null none. */
export function h<K extends keyof HTMLElementTagNameMap>(
  tag: K,
  attributes: Record<string, Attribute> = {},
  ...children: Child[]
): HTMLElementTagNameMap[K] {
  const element = document.createElement(tag);
  for (const [name, value] of Object.entries(attributes)) {
    if (typeof value === "function") element.addEventListener(name.replace(/^on/, ""), value);
    else if (value !== false && value !== null && value !== undefined)
      element.setAttribute(name, value === true ? "" : String(value));
  }
  element.append(...children.filter((child) => child !== null && child !== undefined && child !== false));
  return element;
}

/** The element that page.html holds under this id. */
export function part(id: string): HTMLElement {
  const element = document.getElementById(id);
  if (!element) throw new Error(`page.html has no #${id}`);
  return element;
}

/** A row of a table: the first cell heads it. */
export function row(head: Child, ...cells: Child[]): HTMLTableRowElement {
  return h("tr", {}, h("th", { scope: "row" }, head), ...cells.map((cell) => h("td", {}, cell)));
}

/** A table in a frame of its own that scrolls sideways where it must. */
export function table(caption: string, heads: string[], rows: readonly HTMLTableRowElement[], kind = ""): HTMLElement {
  return h(
    "div",
    { class: `frame ${kind}`, tabindex: 0, role: "group", "aria-label": `${caption}, table` },
    h(
      "table",
      {},
      h("caption", { class: "unseen" }, caption),
      h("thead", {}, h("tr", {}, ...heads.map((head) => (head === "" ? h("td") : h("th", { scope: "col" }, head))))),
      h("tbody", {}, ...rows),
    ),
  );
}

/** Runs `draw` before the next frame, once however often it is asked for. */
export function oncePerFrame(draw: () => void): () => void {
  let asked = false;
  return () => {
    if (asked) return;
    asked = true;
    requestAnimationFrame(() => {
      asked = false;
      draw();
    });
  };
}
