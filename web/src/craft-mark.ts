// The craft at the time cursor: its place, the line from the Sun, and the sail as the reader sees it.
import type { FigurePanel } from "./engine/core";
import type { Histories } from "./engine/histories";
import { project, token, type Vector } from "./figure";

/** Half the sail's width, CSS pixels. */
const HALF_PX = 15;

const RADIANS = Math.PI / 180;
const length = (a: Vector) => Math.hypot(...a);
const scaled = (a: Vector, k: number): Vector => [a[0] * k, a[1] * k, a[2] * k];
const unit = (a: Vector) => scaled(a, 1 / length(a));
const dot = (a: Vector, b: Vector) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vector, b: Vector): Vector => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];

/** Draws what the cursor marks on a layer whose panel is the orbit picture. */
export function drawCraft(context: CanvasRenderingContext2D, panel: FigurePanel, histories: Histories, day: number): void {
  const at: Vector = [histories.at("x_au", day), histories.at("y_au", day), histories.at("z_au", day)];
  const [left, top] = project(panel, at);
  const [sunLeft, sunTop] = project(panel, [0, 0, 0]);
  context.save();
  context.beginPath();
  context.rect(panel.left, panel.top, panel.width, panel.height);
  context.clip();
  context.lineWidth = 1;
  context.strokeStyle = token("edge");
  context.globalAlpha = 0.6;
  context.beginPath();
  context.moveTo(sunLeft, sunTop);
  context.lineTo(left, top);
  context.stroke();
  context.globalAlpha = 1;
  const normal = normalAt(histories, at, day);
  if (normal) drawSail(context, panel, [left, top], normal);
  context.fillStyle = token("sail");
  context.strokeStyle = token("sheet");
  context.lineWidth = 2;
  context.beginPath();
  context.arc(left, top, 5, 0, 2 * Math.PI);
  context.fill();
  context.stroke();
  context.restore();
}

/**
 * The sail's normal from its angles: the cone from the Sun line, the clock about it from the direction of motion. A
 * negative cone angle pushes backward, as a clock of 180 degrees does.
 */
function normalAt(histories: Histories, at: Vector, day: number): Vector | undefined {
  const velocity: Vector = [histories.at("vx_km_s", day), histories.at("vy_km_s", day), histories.at("vz_km_s", day)];
  const cone = histories.at("cone_deg", day) * RADIANS;
  const clock = cone < 0 ? 0 : histories.at("clock_deg", day) * RADIANS;
  if (!Number.isFinite(cone)) return undefined;
  const out = unit(at);
  const pole = unit(cross(at, velocity));
  const along = cross(pole, out);
  const turned = Number.isFinite(clock) ? clock : 0;
  const [a, b, c] = [Math.cos(cone), Math.sin(cone) * Math.cos(turned), Math.sin(cone) * Math.sin(turned)];
  return [0, 1, 2].map((i) => a * (out[i] ?? 0) + b * (along[i] ?? 0) + c * (pole[i] ?? 0)) as unknown as Vector;
}

/** A round plate, a bar where it is seen from its edge, with the normal on the side away from the Sun. */
function drawSail(context: CanvasRenderingContext2D, panel: FigurePanel, [left, top]: readonly [number, number], normal: Vector): void {
  const m = panel.project;
  if (!m) return;
  const [right, down] = [unit([m[0], m[1], m[2]]), unit([m[3], m[4], m[5]])];
  const [nx, ny] = [dot(right, normal), dot(down, normal)];
  const inPicture = Math.hypot(nx, ny);
  const towards = dot(cross(down, right), normal);
  const arrow = () => {
    context.lineWidth = 1.5;
    context.beginPath();
    context.moveTo(left, top);
    context.lineTo(left + 1.4 * HALF_PX * nx, top + 1.4 * HALF_PX * ny);
    context.stroke();
  };
  context.strokeStyle = token("sail");
  if (towards < 0) arrow();
  context.beginPath();
  context.ellipse(left, top, HALF_PX * Math.abs(towards), HALF_PX, inPicture > 1e-6 ? Math.atan2(ny, nx) : 0, 0, 2 * Math.PI);
  context.lineWidth = Math.abs(towards) * HALF_PX < 1.5 ? 3 : 1.5;
  context.save();
  context.globalAlpha = 0.25;
  context.fillStyle = token("sail");
  context.fill();
  context.restore();
  context.stroke();
  if (towards >= 0) arrow();
}
