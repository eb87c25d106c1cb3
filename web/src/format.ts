// Numbers for people: narrow spaces between thousands, a true minus, a dash where there is no value.

export const NONE = "–";
const NARROW = "\u202f";

const dress = (text: string) => text.replace("-", "\u2212");

function grouped(text: string): string {
  const [whole = "", decimals] = text.split(".");
  const digits = whole.replace(/\B(?=(\d{3})+(?!\d))/g, NARROW);
  return dress(decimals === undefined ? digits : `${digits}.${decimals}`);
}

/** With so many decimals. */
export function fixed(value: number | null | undefined, decimals: number): string {
  return value === null || value === undefined || !Number.isFinite(value) ? NONE : grouped(value.toFixed(decimals));
}

/** With so many significant digits; powers of ten outside 1e-3 to 1e7. */
export function significant(value: number | null | undefined, digits: number): string {
  if (value === null || value === undefined || !Number.isFinite(value)) return NONE;
  const size = Math.abs(value);
  if (value !== 0 && (size < 1e-3 || size >= 1e7)) {
    const [mantissa, exponent] = value.toExponential(digits - 1).split("e");
    return `${dress(mantissa ?? "")} × 10${superscript(Number(exponent))}`;
  }
  const text = value.toPrecision(digits);
  return grouped(text.includes("e") ? String(Number(text)) : text);
}

/** A number followed by its unit, or just the dash. */
export function withUnit(text: string, unit: string): string {
  if (text === NONE || unit === "") return text;
  return unit === "°" || unit === "%" ? `${text}${unit === "%" ? "\u00a0" : ""}${unit}` : `${text}\u00a0${unit}`;
}

/** What was typed, shortened for a message; control characters shown as a mark. */
export function typed(value: string): string {
  const shown = value.replace(/[\u0000-\u001f\u007f-\u009f]/g, "\ufffd");
  return shown.length > 60 ? `${shown.slice(0, 57)}…` : shown;
}

/** Keys with units as people write them: `mm_s2` → mm/s². */
export function unitOf(unit: string): string {
  return unit.replace(/\^2/g, "²").replace(/\^3/g, "³").replace(/^deg$/, "°").replace(/deg\//, "°/");
}

function superscript(exponent: number): string {
  const digits = "⁰¹²³⁴⁵⁶⁷⁸⁹";
  const size = [...String(Math.abs(exponent))].map((digit) => digits[Number(digit)]).join("");
  return exponent < 0 ? `⁻${size}` : size;
}
