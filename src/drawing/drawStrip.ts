import { VERDICTS } from "../../shared/domain/vocabulary.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import { MARKS } from "./marks.ts";
import type { Palette } from "./palette.ts";
import { crisp, drawPaper, drawRulerFigures, line, monoFont, textFont } from "./drawPaper.ts";
import { columnsInView, columnX, placeY } from "./stripGeometry.ts";
import type { StripGeometry } from "./stripGeometry.ts";
import { LABEL_WIDTH, placeBrackets } from "./stripLayout.ts";
import type { StripLayout, StripMark } from "./stripLayout.ts";

export interface StripCursor {
  readonly index: number;
  readonly label: string;
}

/** The marks between two columns: `marks` is in column order, so two searches find the part in view. */
function inView(marks: readonly StripMark[], first: number, last: number): readonly StripMark[] {
  const lowerBound = (index: number) => {
    let low = 0;
    let high = marks.length;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (marks[middle]!.index < index) low = middle + 1;
      else high = middle;
    }
    return low;
  };
  return marks.slice(Math.max(0, lowerBound(first) - 1), lowerBound(last + 1) + 1);
}

/**
 * The marks of one verdict, without those that would be drawn over the one before: where commits stand closer than
 * pixels can tell, nothing is lost and the drawing stays quick.
 */
export function apartMarks(marks: readonly StripMark[], verdict: Verdict, g: StripGeometry): StripMark[] {
  const kept: StripMark[] = [];
  const nearX = g.pitch < 4 ? 3 : 0;
  let last: StripMark | undefined;
  for (const mark of marks) {
    if (mark.verdict !== verdict) continue;
    const over =
      last !== undefined &&
      (mark.index - last.index) * g.pitch < nearX &&
      Math.abs(placeY(g, mark.place) - placeY(g, last.place)) < 2;
    if (over) continue;
    kept.push(mark);
    last = mark;
  }
  return kept;
}

function drawMarks(c: CanvasRenderingContext2D, g: StripGeometry, marks: readonly StripMark[], palette: Palette): void {
  const size = Math.min(1, Math.max(0.45, g.pitch / 11));
  for (const verdict of VERDICTS) {
    const path = new Path2D();
    const shape = new Path2D(MARKS[verdict].path);
    for (const mark of apartMarks(marks, verdict, g)) {
      const scale = mark.mainline ? size : size * 0.75;
      const [x, y] = [columnX(g, mark.index) - 6 * scale, placeY(g, mark.place) - 6 * scale];
      path.addPath(shape, new DOMMatrix([scale, 0, 0, scale, x, y]));
    }
    c.fillStyle = MARKS[verdict].filled ? palette.verdicts[verdict] : palette.sheet;
    c.strokeStyle = palette.verdicts[verdict];
    c.lineWidth = 1.6 * Math.max(size, 0.7);
    if (verdict !== "invalid") c.fill(path);
    if (!MARKS[verdict].filled) c.stroke(path);
  }
}

function drawTraces(
  c: CanvasRenderingContext2D,
  g: StripGeometry,
  layout: StripLayout,
  trace: readonly StripMark[],
  view: { first: number; last: number },
  palette: Palette,
): void {
  c.strokeStyle = palette.trace;
  c.lineWidth = 0.8;
  c.globalAlpha = 0.65;
  c.beginPath();
  for (const { from, to } of layout.links) {
    if (to.index < view.first || from.index > view.last) continue;
    line(c, columnX(g, from.index), placeY(g, from.place), columnX(g, to.index), placeY(g, to.place));
  }
  c.stroke();
  c.globalAlpha = 1;
  c.lineWidth = 1.3;
  c.beginPath();
  trace.forEach((mark, k) => {
    const [x, y] = [columnX(g, mark.index), placeY(g, mark.place)];
    if (k === 0) c.moveTo(x, y);
    else c.lineTo(x, y);
  });
  c.stroke();
}

function drawGaps(c: CanvasRenderingContext2D, g: StripGeometry, layout: StripLayout, palette: Palette): void {
  const { first, last } = columnsInView(g, layout.count);
  c.strokeStyle = palette.quiet;
  c.lineWidth = 1;
  // Where commits stand dense, so do their gaps: they must not blacken the foot.
  c.globalAlpha = Math.min(1, Math.max(0.25, g.pitch / 5));
  c.beginPath();
  for (const index of layout.gaps) {
    if (index < first || index > last) continue;
    const x = crisp(columnX(g, index));
    line(c, x, g.foot - 10, x, g.foot);
  }
  c.stroke();
  c.globalAlpha = 1;
}

function drawBrackets(c: CanvasRenderingContext2D, g: StripGeometry, layout: StripLayout, palette: Palette): void {
  const narrow = g.width < 600;
  const colour = palette.verdicts.disagrees;
  const placed = placeBrackets(layout.brackets, g.pitch, narrow ? LABEL_WIDTH.narrow : LABEL_WIDTH.wide);
  for (const bracket of placed) {
    const half = Math.max(4, g.pitch / 2);
    const [x0, x1] = [columnX(g, bracket.first) - half, columnX(g, bracket.last) + half];
    if (x1 < g.left || x0 > g.right) continue;
    // The first level stands above the head of the ruler, where no mark can be.
    const y = g.top - 11 + bracket.level * 14;
    c.strokeStyle = colour;
    c.lineWidth = 1.5;
    c.beginPath();
    c.moveTo(x0, y + 5);
    c.lineTo(x0, y);
    c.lineTo(x1, y);
    c.lineTo(x1, y + 5);
    c.stroke();
    if (bracket.words === "none") continue;
    const label = narrow ? String(bracket.suspects) : `${bracket.suspects} suspects`;
    c.font = textFont(12, 650);
    const width = c.measureText(label).width;
    const x = bracket.words === "inside" ? (x0 + x1 - width) / 2 : x0 - width - 6;
    c.fillStyle = palette.sheet;
    c.fillRect(x - 4, y - 6, width + 8, 13);
    c.fillStyle = colour;
    c.textAlign = "left";
    c.fillText(label, x, y + 4);
  }
}

function drawCursor(c: CanvasRenderingContext2D, g: StripGeometry, cursor: StripCursor, palette: Palette): void {
  const x = crisp(columnX(g, cursor.index));
  if (x < g.left - 8 || x > g.right + 8) return;
  c.strokeStyle = palette.ink;
  c.fillStyle = palette.ink;
  c.lineWidth = 1.5;
  c.beginPath();
  line(c, x, g.top - 14, x, g.foot + 8);
  c.stroke();
  c.beginPath();
  c.moveTo(x, g.foot + 6);
  c.lineTo(x + 5, g.foot + 14);
  c.lineTo(x - 5, g.foot + 14);
  c.fill();
  c.font = monoFont(12);
  const width = c.measureText(cursor.label).width + 12;
  const start = x + 7 + width > g.right ? x - 7 - width : x + 7;
  c.beginPath();
  c.roundRect(start, g.foot - 20, width, 18, 2);
  c.fill();
  c.fillStyle = palette.paper;
  c.textAlign = "left";
  c.fillText(cursor.label, start + 6, g.foot - 7);
}

/** Draws the part of the strip that is in view; cost is that of the columns in view. */
export function drawStrip(
  c: CanvasRenderingContext2D,
  g: StripGeometry,
  layout: StripLayout,
  cursor: StripCursor | null,
  rtol: number,
  palette: Palette,
): void {
  c.fillStyle = palette.sheet;
  c.fillRect(0, 0, g.width, g.height);
  const view = columnsInView(g, layout.count);
  const marks = inView(layout.marks, view.first, view.last);
  drawPaper(c, g, palette, rtol);
  c.save();
  c.beginPath();
  c.rect(g.left - 7, 0, g.right - g.left + 14, g.height);
  c.clip();
  drawGaps(c, g, layout, palette);
  drawTraces(c, g, layout, inView(layout.trace, view.first, view.last), view, palette);
  drawBrackets(c, g, layout, palette);
  drawMarks(
    c,
    g,
    marks.filter((mark) => !mark.mainline),
    palette,
  );
  drawMarks(
    c,
    g,
    marks.filter((mark) => mark.mainline),
    palette,
  );
  if (cursor) drawCursor(c, g, cursor, palette);
  c.restore();
  drawRulerFigures(c, g, palette);
}
