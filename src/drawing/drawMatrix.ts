import type { Palette } from "./palette.ts";

export interface MatrixView {
  readonly rows: number;
  readonly columns: number;
  readonly width: number;
  readonly height: number;
}
export interface Crosshair {
  readonly row: number;
  readonly column: number;
}

/** Largest rectangle of one entry: a matrix of few entries stays a small picture. */
const MOST = { width: 96, height: 48 } as const;

export const matrixWidth = (columns: number) => Math.max(1, columns) * MOST.width;

/** Entries are square where that keeps the whole between 160 and 560 pixels and none of them too tall. */
export function matrixHeight(width: number, rows: number, columns: number): number {
  if (rows === 0 || columns === 0) return 160;
  const entry = Math.min(MOST.height, Math.max(width / columns, 160 / rows));
  return Math.round(Math.min(560, entry * rows));
}

export function entryAt(view: MatrixView, x: number, y: number): Crosshair {
  const clamp = (value: number, count: number) => Math.min(count - 1, Math.max(0, Math.floor(value)));
  return {
    row: clamp((y / view.height) * view.rows, view.rows),
    column: clamp((x / view.width) * view.columns, view.columns),
  };
}

function hatchPaper(c: CanvasRenderingContext2D, view: MatrixView, palette: Palette): void {
  c.fillStyle = palette.sheet;
  c.fillRect(0, 0, view.width, view.height);
  c.strokeStyle = palette.gridCoarse;
  c.lineWidth = 1;
  c.beginPath();
  for (let x = -view.height; x < view.width; x += 8) {
    c.moveTo(x, view.height);
    c.lineTo(x + view.height, 0);
  }
  c.stroke();
}

function entryGrid(c: CanvasRenderingContext2D, view: MatrixView, palette: Palette): void {
  const [w, h] = [view.width / view.columns, view.height / view.rows];
  c.strokeStyle = palette.sheet;
  c.globalAlpha = 0.5;
  c.lineWidth = 1;
  c.beginPath();
  if (w >= 6) for (let j = 1; j < view.columns; j += 1) lineTo(c, j * w, 0, j * w, view.height);
  if (h >= 6) for (let i = 1; i < view.rows; i += 1) lineTo(c, 0, i * h, view.width, i * h);
  c.stroke();
  c.globalAlpha = 1;
}

function lineTo(c: CanvasRenderingContext2D, x0: number, y0: number, x1: number, y1: number): void {
  c.moveTo(Math.round(x0) + 0.5, Math.round(y0) + 0.5);
  c.lineTo(Math.round(x1) + 0.5, Math.round(y1) + 0.5);
}

function crosshairLines(c: CanvasRenderingContext2D, view: MatrixView, at: Crosshair, palette: Palette): void {
  const [w, h] = [view.width / view.columns, view.height / view.rows];
  const [x, y] = [at.column * w, at.row * h];
  for (const [colour, width] of [
    [palette.sheet, 4],
    [palette.verdicts.disagrees, 1.5],
  ] as const) {
    c.strokeStyle = colour;
    c.lineWidth = width;
    c.beginPath();
    c.moveTo(x + w / 2, 0);
    c.lineTo(x + w / 2, y);
    c.moveTo(x + w / 2, y + h);
    c.lineTo(x + w / 2, view.height);
    c.moveTo(0, y + h / 2);
    c.lineTo(x, y + h / 2);
    c.moveTo(x + w, y + h / 2);
    c.lineTo(view.width, y + h / 2);
    c.stroke();
  }
  c.strokeStyle = palette.sheet;
  c.lineWidth = 4;
  c.strokeRect(x - 1, y - 1, Math.max(w, 3) + 2, Math.max(h, 3) + 2);
  c.strokeStyle = palette.ink;
  c.lineWidth = 2;
  c.strokeRect(x - 1, y - 1, Math.max(w, 3) + 2, Math.max(h, 3) + 2);
}

/** Paper, hatched where nothing is; the image of the entries; a grid where they are large; the crosshair. */
export function drawMatrix(
  c: CanvasRenderingContext2D,
  view: MatrixView,
  image: CanvasImageSource | null,
  at: Crosshair | null,
  palette: Palette,
): void {
  hatchPaper(c, view, palette);
  c.imageSmoothingEnabled = false;
  if (image) c.drawImage(image, 0, 0, view.width, view.height);
  entryGrid(c, view, palette);
  if (at) crosshairLines(c, view, at, palette);
}
