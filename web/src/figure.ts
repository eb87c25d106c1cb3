// A figure on the page: a canvas drawn by the core, a layer above it for what moves, its words for those who
// do not see it, and a redraw whenever size, look or flight change.
import { h, oncePerFrame } from "./dom";
import type { Client } from "./engine/client";
import type { FigureName, FigureOptions, FigurePanel, Figures } from "./engine/core";
import type { State } from "./state";

/** Ecliptic x, y and z. */
export type Vector = readonly [number, number, number];

/** What a figure draws: its panels, or nothing when the core failed on it. */
export interface Picture {
  draw(canvas: HTMLCanvasElement, options: FigureOptions): readonly FigurePanel[] | undefined;
  /** What a reader would see. */
  words(): string;
}

export interface FigureParts {
  name: string;
  /** Height in CSS pixels for a width. */
  height: (width: number) => number;
  /** What of the figure is shown; with a cursor in it, the figure is drawn anew as the cursor moves. */
  view?: () => Omit<FigureOptions, "width" | "height" | "scale" | "theme" | "stale">;
  /** Whether it no longer shows what the inputs say. */
  stale: () => boolean;
  /** Draws what moves, in CSS pixels, on a cleared layer. */
  overlay: (context: CanvasRenderingContext2D, panels: readonly FigurePanel[]) => void;
}

export class Figure {
  readonly frame = h("div", { class: "figure" });
  panels: readonly FigurePanel[] = [];
  readonly redraw = oncePerFrame(() => this.draw());
  readonly redrawOverlay = oncePerFrame(() => this.drawOverlay());
  private readonly base = h("canvas", { role: "img" });
  private readonly layer = h("canvas", { "aria-hidden": "true", class: "layer" });
  private readonly words = h("p", { class: "unseen" });
  private readonly failed = h("p", { class: "alarm", hidden: true }, "This figure could not be drawn.");
  private picture: Picture | undefined;
  private drawnStale = false;

  constructor(
    private readonly state: State,
    private readonly parts: FigureParts,
  ) {
    this.words.id = `${parts.name}-words`;
    this.base.setAttribute("aria-labelledby", this.words.id);
    this.frame.append(this.base, this.layer, this.words, this.failed);
    state.theme.watch(this.redraw);
    state.verdict.watch(() => parts.stale() !== this.drawnStale && this.redraw());
    state.cursor_d.watch(() => (parts.view?.().cursor_t_d === undefined ? this.redrawOverlay() : this.redraw()));
    new ResizeObserver(this.redraw).observe(this.frame);
    addEventListener("resize", this.redraw);
  }

  show(picture: Picture | undefined): void {
    this.picture = picture;
    this.say(picture?.words() ?? "");
    this.redraw();
  }

  /** Words for those who do not see the figure. */
  say(words: string): void {
    if (this.words.textContent !== words) this.words.textContent = words;
  }

  private draw(): void {
    const width = Math.floor(this.frame.clientWidth);
    if (width === 0 || !this.picture) return;
    const height = Math.round(this.parts.height(width));
    for (const canvas of [this.base, this.layer]) {
      canvas.style.width = `${width}px`;
      canvas.style.height = `${height}px`;
    }
    // Lines sit on whole device pixels: at least two a CSS pixel keep them smooth.
    const scale = Math.max(2, devicePixelRatio);
    this.drawnStale = this.parts.stale();
    const options = { width, height, scale, theme: this.state.theme.get(), stale: this.drawnStale, ...this.parts.view?.() };
    const panels = this.picture.draw(this.base, options);
    this.failed.hidden = panels !== undefined;
    this.panels = panels ?? [];
    this.layer.width = Math.round(width * scale);
    this.layer.height = Math.round(height * scale);
    this.drawOverlay();
  }

  private drawOverlay(): void {
    const context = this.layer.getContext("2d");
    if (!context || this.panels.length === 0) return;
    const scale = this.layer.width / Math.max(1, this.base.clientWidth);
    context.setTransform(1, 0, 0, 1, 0, 0);
    context.clearRect(0, 0, this.layer.width, this.layer.height);
    context.setTransform(scale, 0, 0, scale, 0, 0);
    this.parts.overlay(context, this.panels);
  }
}

/** A figure of the flight that the page shows, whichever that is. */
export function flightFigure(state: State, client: Client, name: FigureName, parts: Omit<FigureParts, "name" | "stale">): Figure {
  const figure = new Figure(state, { ...parts, name, stale: () => state.verdict.get().link === null });
  let figures: Figures | undefined;
  state.shown.watch((shown) => {
    client.guard(() => figures?.free());
    const mine = shown ? client.figures(shown.solved) : undefined;
    figures = mine;
    figure.show(
      mine && {
        draw: (canvas, options) => client.guard(() => mine.draw(canvas, name, options))?.panels,
        words: () => client.guard(() => mine.describe(name)) ?? "",
      },
    );
  });
  return figure;
}

/** Place of a value in a panel, CSS pixels from the left and the top. */
export function place(panel: FigurePanel, x: number, y: number): [number, number] {
  const scaled = panel.y_log ? Math.log : (value: number) => value;
  const down = (scaled(panel.y_max) - scaled(y)) / (scaled(panel.y_max) - scaled(panel.y_min));
  return [panel.left + ((x - panel.x_min) / (panel.x_max - panel.x_min)) * panel.width, panel.top + down * panel.height];
}

/** Place of a heliocentric position (au) in the orbit picture, CSS pixels from the left and the top. */
export function project({ project: m, center_x, center_y }: FigurePanel, [x, y, z]: Vector): [number, number] {
  if (!m) return [Number.NaN, Number.NaN];
  return [(center_x ?? 0) + m[0] * x + m[1] * y + m[2] * z, (center_y ?? 0) + m[3] * x + m[4] * y + m[5] * z];
}

/** A colour of the style sheet, by token. */
export function token(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim();
}
