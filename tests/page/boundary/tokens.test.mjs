// The style sheet and the figures use the same colours, and these can be told apart and read.
import assert from "node:assert/strict";
import test from "node:test";
import { openCore, text } from "../support.mjs";

const core = await openCore();
const css = text("web/src/styles.css");
const block = (selector) => css.slice(css.indexOf(`${selector} {`)).split("}")[0];
const LOOKS = [["light", ":root"], ["dark", ':root[data-theme="dark"]']];

for (const [name, selector] of LOOKS) {
  const tokens = core.theme_tokens(name);

  test(`${name}: every token of the figures stands in the style sheet with the same value`, () => {
    assert.ok(Object.keys(tokens).length >= 9);
    for (const [token, colour] of Object.entries(tokens))
      assert.equal(new RegExp(`--${token}: (#[0-9A-Fa-f]{6});`).exec(block(selector))?.[1], colour, token);
  });

  // WCAG 2.2, success criteria 1.4.3 (text 4.5) and 1.4.11 (what carries meaning 3).
  test(`${name}: text and lines that carry meaning have the contrast that WCAG asks for`, () => {
    for (const ground of ["paper", "sheet"]) {
      for (const ink of ["ink", "muted", "sail", "impulse", "alarm"])
        assert.ok(contrast(tokens[ink], tokens[ground]) >= 4.5, `${ink} on ${ground}`);
      assert.ok(contrast(tokens.edge, tokens[ground]) >= 3, `edge on ${ground}`);
    }
  });
}

test("a look of another name is refused", () => assert.throws(() => core.theme_tokens("sepia"), /sepia/));

/** Contrast ratio of WCAG 2.2. */
function contrast(a, b) {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high + 0.05) / (low + 0.05);
}

function luminance(colour) {
  const [red, green, blue] = [1, 3, 5].map((i) => {
    const value = Number.parseInt(colour.slice(i, i + 2), 16) / 255;
    return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}
