import { DECADES, LANDMARKS, rulerPlace } from "./decades.ts";
import type { Palette } from "./palette.ts";
import { columnX, placeY } from "./stripGeometry.ts";
import type { StripGeometry } from "./stripGeometry.ts";

const TEXT = '"Atkinson Hyperlegible Next Variable", sans-serif';
const MONO = '"Atkinson Hyperlegible Mono Variable", monospace';
export const textFont = (size: number, weight = 400) => `${weight} ${size}px ${TEXT}`;
export const monoFont = (size: number) => `400 ${size}px ${MONO}`;

/** Half pixels keep a hairline one pixel wide. */
export const crisp = (value: number) => Math.round(value) + 0.5;

export function line(c: CanvasRenderingContext2D, x0: number, y0: number, x1: number, y1: number): void {
  c.moveTo(x0, y0);
  c.lineTo(x1, y1);
}

/** 10 with a raised exponent, right-aligned at x. */
export function powerOfTen(c: CanvasRenderingContext2D, exponent: number, x: number, y: number): void {
  const raised = String(exponent).replace("-", "\u2212");
  c.textAlign = "right";
  c.font = monoFont(9);
  c.fillText(raised, x, y - 4);
  const width = c.measureText(raised).width;
  c.font = monoFont(12);
  c.fillText("10", x - width - 1, y);
}

function holes(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette): void {
  c.strokeStyle = palette.gridCoarse;
  c.beginPath();
  const spacing = 24;
  for (let x = -(g.scroll % spacing) + spacing / 2; x < g.width; x += spacing) {
    for (const y of [9, g.height - 9]) {
      c.moveTo(x + 2.5, y);
      c.arc(x, y, 2.5, 0, 2 * Math.PI);
    }
  }
  c.stroke();
}

/** Vertical lines stand on commits: fine ones as close as they stay a grid, coarse ones every tenth of those. */
function grid(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette): void {
  const every = [1, 2, 5, 10, 20, 50, 100].find((n) => n * g.pitch >= 10) ?? 200;
  const first = Math.floor(g.scroll / g.pitch / every) * every;
  for (const coarse of [false, true]) {
    c.strokeStyle = coarse ? palette.gridCoarse : palette.gridFine;
    c.globalAlpha = coarse ? 0.7 : 1;
    c.beginPath();
    for (let i = first; columnX(g, i) < g.right; i += every) {
      const x = columnX(g, i);
      if (x >= g.left && (i % (10 * every) === 0) === coarse) line(c, crisp(x), g.top, crisp(x), g.foot);
    }
    for (let decade = 0; decade <= DECADES; decade += 1) {
      if ((decade % 4 === 0) !== coarse) continue;
      const y = crisp(placeY(g, decade / DECADES));
      line(c, g.left, y, g.right, y);
    }
    c.stroke();
  }
  c.globalAlpha = 1;
}

function landmarks(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette): void {
  c.strokeStyle = palette.quiet;
  c.setLineDash([1.5, 3.5]);
  c.beginPath();
  for (const { at } of LANDMARKS) {
    const y = crisp(placeY(g, rulerPlace(at)));
    line(c, g.left, y, g.right, y);
  }
  c.stroke();
  c.setLineDash([]);
}

/** Names stand in their lines, as on a contour map, each on a breath of paper. */
function lineNames(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette, rtol: number): void {
  c.textAlign = "left";
  c.textBaseline = "middle";
  const write = (text: string, x: number, at: number, colour: string) => {
    const width = c.measureText(text).width;
    const y = placeY(g, rulerPlace(at));
    c.fillStyle = palette.sheet;
    c.fillRect(x - 4, y - 5, width + 8, 11);
    c.fillStyle = colour;
    c.fillText(text, x, y + 0.5);
  };
  if (g.width >= 600 && g.foot - g.top > 110) {
    c.font = textFont(11);
    for (const { name, at } of LANDMARKS) write(name, g.left + (name === "binary32" ? 118 : 10), at, palette.quiet);
  }
  c.font = textFont(11, 600);
  write("tolerance", g.right - c.measureText("tolerance").width - 10, rtol, palette.ink);
  c.textBaseline = "alphabetic";
}

/** The paper: holes, grid, landmarks and the tolerance as a solid line. */
export function drawPaper(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette, rtol: number): void {
  c.lineWidth = 1;
  holes(c, g, palette);
  grid(c, g, palette);
  landmarks(c, g, palette);
  c.strokeStyle = palette.ink;
  c.lineWidth = 1.25;
  c.beginPath();
  const y = crisp(placeY(g, rulerPlace(rtol)));
  line(c, g.left, y, g.right, y);
  c.stroke();
  lineNames(c, g, palette, rtol);
}

/** The ruler's figures, in the margin that does not scroll. */
export function drawRulerFigures(c: CanvasRenderingContext2D, g: StripGeometry, palette: Palette): void {
  c.fillStyle = palette.sheet;
  c.fillRect(0, g.top - 4, g.left, g.foot - g.top + 8);
  c.fillStyle = palette.quiet;
  for (const exponent of [0, -4, -8, -12, -16]) {
    powerOfTen(c, exponent, g.left - 8, placeY(g, 1 + exponent / DECADES) + 4);
  }
}
