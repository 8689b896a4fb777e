import type { EChartsCoreOption } from "echarts/core";
import type { ColumnStudyRow } from "../../shared/schemas/steps.ts";
import type { StepBranch } from "../../shared/numerics/steps/types.ts";
import { numberText } from "../format/number.ts";
import type { Palette } from "./palette.ts";
import type { Decades } from "./stepRange.ts";
import { bestStepOf, branchesAt, sampledSteps, stepDecades, uncertaintyDecades } from "./stepRange.ts";

const NUMBERS = '"Atkinson Hyperlegible Mono Variable", ui-monospace, monospace';
const TEXT = '"Atkinson Hyperlegible Next Variable", system-ui, sans-serif';

/** Shape of a step's mark by its branch: told apart without colour. */
export const BRANCH_SYMBOL: Record<StepBranch, string> = { truncation: "triangle", rounding: "rect", floor: "circle" };

export function branchColour(branch: StepBranch, palette: Palette): string {
  if (branch === "truncation") return palette.trace;
  return branch === "rounding" ? palette.reference : palette.verdicts.agrees;
}

/** A power of ten without the one before it. */
export const powerText = (value: number) => numberText(value, 1).replace(/^1\u00a0×\u00a0/, "");

/** Uncertainty against step, both logarithmic: measured steps, modelled branches, chosen and best step, tolerance. */
export function stepStudyOption(column: ColumnStudyRow, rtol: number, palette: Palette): EChartsCoreOption {
  const steps = stepDecades(column);
  const heights = uncertaintyDecades(column, rtol);
  return {
    animation: false,
    aria: { enabled: false },
    textStyle: { fontFamily: TEXT, color: palette.ink },
    grid: { left: 64, right: 20, top: 26, bottom: 52 },
    tooltip: tooltip(palette),
    xAxis: axis("step, in the unit of the input", steps, palette, 30),
    yAxis: axis("", heights, palette, 0),
    series: [
      ...curves(column, steps, heights, palette),
      ...marks(column, heights, palette),
      lines(column, rtol, palette),
    ],
  };
}

function axis(name: string, { min, max }: Decades, palette: Palette, nameGap: number) {
  return {
    type: "log",
    min,
    max,
    name,
    nameLocation: "middle",
    nameGap,
    nameTextStyle: { color: palette.quiet, fontSize: 13 },
    axisLine: { show: true, onZero: false, lineStyle: { color: palette.gridCoarse } },
    axisTick: { lineStyle: { color: palette.gridCoarse } },
    axisLabel: { formatter: powerText, color: palette.quiet, fontFamily: NUMBERS, fontSize: 12, hideOverlap: true },
    splitLine: { lineStyle: { color: palette.gridFine } },
  };
}

function tooltip(palette: Palette) {
  return {
    trigger: "item",
    // Drawn on the canvas: no markup, and nothing that the content policy would have to allow.
    renderMode: "richText",
    confine: true,
    backgroundColor: palette.sheet,
    borderColor: palette.gridCoarse,
    textStyle: { color: palette.ink, fontFamily: TEXT, fontSize: 13 },
    formatter: ({ value }: { value: [number, number] }) =>
      `step ${numberText(value[0], 2)}\nuncertainty ${numberText(value[1], 2)}`,
  };
}

function curves(column: ColumnStudyRow, steps: Decades, { min, max }: Decades, palette: Palette) {
  const { curve } = column;
  if (curve === null) return [];
  const sampled = sampledSteps(steps).map((h) => ({ h, ...branchesAt(curve, h) }));
  const line = (part: "truncation" | "rounding" | "sum", color: string, type: "dashed" | "dotted" | "solid") => ({
    type: "line",
    name: part,
    silent: true,
    symbol: "none",
    lineStyle: { color, type, width: part === "sum" ? 1 : 1.6 },
    data: sampled.filter((point) => point[part] >= min && point[part] <= max).map((point) => [point.h, point[part]]),
  });
  return [
    line("sum", palette.quiet, "solid"),
    line("truncation", palette.trace, "dashed"),
    line("rounding", palette.reference, "dotted"),
  ];
}

function marks(column: ColumnStudyRow, { min, max }: Decades, palette: Palette) {
  const place = (value: number) => Math.min(max, Math.max(min, value));
  const most = column.steps.reduce((largest, { chosen }) => Math.max(largest, chosen), 0);
  const points = column.steps.map((step) => ({
    value: [step.step, place(Number(step.uncertainty.median))],
    symbol: BRANCH_SYMBOL[step.branch],
    itemStyle: { color: branchColour(step.branch, palette), opacity: 1 },
  }));
  const chosen = column.steps.filter((step) => step.chosen > 0 && step.chosen === most);
  return [
    {
      type: "scatter",
      name: "largest",
      silent: true,
      symbol: "rect",
      symbolSize: [14, 1.5],
      itemStyle: { color: palette.quiet },
      data: column.steps.map(({ step, uncertainty }) => [step, place(Number(uncertainty.largest))]),
    },
    { type: "scatter", name: "steps", symbolSize: 10, z: 4, data: points },
    {
      type: "scatter",
      name: "chosen",
      silent: true,
      symbol: "circle",
      symbolSize: 22,
      z: 3,
      itemStyle: { color: "transparent", borderColor: palette.ink, borderWidth: 1.8 },
      label: { show: true, position: "top", formatter: "chosen", color: palette.ink, fontFamily: TEXT, fontSize: 13 },
      data: chosen.map(({ step, uncertainty }) => [step, place(Number(uncertainty.median))]),
    },
  ];
}

/** The tolerance across, the best step up and down. */
function lines(column: ColumnStudyRow, rtol: number, palette: Palette) {
  const label = { color: palette.ink, fontFamily: TEXT, fontSize: 13 };
  const best = bestStepOf(column);
  // Of complex steps every smaller one is as good.
  const words = column.candidates[0]?.method === "complex-step" ? "good below" : "best step";
  const tolerance = {
    yAxis: rtol,
    lineStyle: { color: palette.ink, type: "solid", width: 1.6 },
    label: { ...label, position: "insideEndTop", formatter: `tolerance ${powerText(rtol)}` },
  };
  const upright = {
    xAxis: best,
    lineStyle: { color: palette.ink, type: [6, 4], width: 1.2 },
    label: { ...label, position: "end", formatter: `${words} ${powerText(best ?? 0)}` },
  };
  return {
    type: "line",
    name: "marks",
    data: [],
    // Positions are rounded to so many decimals, two if nothing is said.
    markLine: { silent: true, symbol: "none", precision: 20, data: best === null ? [tolerance] : [tolerance, upright] },
  };
}
