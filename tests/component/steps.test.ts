import { flushPromises } from "@vue/test-utils";
import { describe, expect, it, vi } from "vitest";
import { stepStudy } from "../../shared/schemas/steps.ts";
import StepStudy from "../../src/components/block/StepStudy.vue";
import StepStudyChoice from "../../src/components/block/StepStudyChoice.vue";
import type { Palette } from "../../src/drawing/palette.ts";
import { sampledSteps, stepDecades, uncertaintyDecades } from "../../src/drawing/stepRange.ts";
import { stepStudyOption } from "../../src/drawing/stepStudyOption.ts";
import BlockDetailView from "../../src/views/BlockDetailView.vue";
import { blockFixture } from "./fixtures/blocks.ts";
import { stripFixture } from "./fixtures/history.ts";
import { stepStudyFixture, SWEEP } from "./fixtures/steps.ts";
import { answerByPath, mountAt } from "./support.ts";

// The chart library draws on a canvas, which jsdom has not; what is drawn is tested by its option.
vi.mock("../../src/plugins/charts.ts", () => ({ VChart: { props: ["option"], render: () => null } }));

const block = blockFixture(stripFixture());
const study = stepStudyFixture(block);
const BLOCK_PATH = `/projects/tidewheel/builds/${block.buildId}/blocks/wake-deficit`;
const plain = (text: string) => text.replaceAll("\u00a0", " ");

const palette: Palette = {
  paper: "paper",
  sheet: "sheet",
  ink: "ink",
  quiet: "quiet",
  gridFine: "fine",
  gridCoarse: "coarse",
  trace: "trace",
  reference: "reference",
  verdicts: { agrees: "green", disagrees: "red", unresolved: "orange", unreferenced: "grey", invalid: "purple" },
};
interface Series {
  readonly name: string;
  readonly type: string;
  readonly data: ({ readonly value?: number[]; readonly symbol?: string } & { readonly [at: number]: number })[];
  readonly markLine?: { data: { yAxis?: number; xAxis?: number; lineStyle: { type: unknown } }[] };
}
const seriesOf = (column: (typeof study.columns)[number], rtol = study.rtol) =>
  stepStudyOption(column, rtol, palette).series as Series[];
const named = (list: readonly Series[], name: string) => list.find((one) => one.name === name)!;

describe("the drawing of a step study", () => {
  const column = study.columns[0]!;

  it("has every step with the shape of its branch, and a ring about the chosen one", () => {
    const series = seriesOf(column);
    const { data } = named(series, "steps");
    expect(data.map(({ value }) => value?.[0])).toEqual([...SWEEP]);
    const shapes = column.steps.map(
      ({ branch }) => ({ truncation: "triangle", rounding: "rect", floor: "circle" })[branch],
    );
    expect(data.map(({ symbol }) => symbol)).toEqual(shapes);
    expect(new Set(shapes)).toEqual(new Set(["triangle", "rect"]));
    const chosen = column.steps.reduce((most, step) => (step.chosen > most.chosen ? step : most));
    expect(named(series, "chosen").data.map((point) => point[0])).toEqual([chosen.step]);
  });

  it("has the tolerance as a solid line and the best step upright", () => {
    const [tolerance, best] = named(seriesOf(column), "marks").markLine!.data;
    expect(tolerance).toMatchObject({ yAxis: study.rtol, lineStyle: { type: "solid", color: "ink" } });
    expect(best?.xAxis).toBe(column.candidates[0]?.step);
  });

  it("has branches that cross near the best step, within the axes", () => {
    const series = seriesOf(column);
    const { min, max } = uncertaintyDecades(column, study.rtol);
    for (const name of ["truncation", "rounding", "sum"]) {
      const { data } = named(series, name);
      expect(data.length).toBeGreaterThan(20);
      for (const { 1: height } of data) expect(height >= min && height <= max).toBe(true);
    }
    const sum = named(series, "sum").data;
    const lowest = sum.reduce((least, point) => (point[1] < least[1] ? point : least));
    expect(Math.abs(Math.log10(lowest[0] / column.candidates[0]!.step!))).toBeLessThan(0.1);
  });

  it("shows a single step within three decades of its model, and axes that are whole decades", () => {
    const single = { ...column, steps: [column.steps[0]!] };
    const { min, max } = stepDecades(single);
    expect(min).toBeLessThanOrEqual(1e-8);
    expect(max).toBeGreaterThanOrEqual(1);
    const samples = sampledSteps({ min: 1e-8, max: 1e-2 }, 7).map((h) => Number(h.toPrecision(6)));
    expect(samples).toEqual([1e-8, 1e-7, 1e-6, 1e-5, 1e-4, 1e-3, 1e-2]);
  });

  it("stays on paper where an uncertainty is 0 or infinite", () => {
    const [first, second, ...rest] = column.steps;
    const nothing = { median: 0, largest: "Infinity" } as const;
    const odd = { ...column, steps: [{ ...first!, uncertainty: nothing }, second!, ...rest] };
    const { min, max } = uncertaintyDecades(odd, study.rtol);
    expect(named(seriesOf(odd), "steps").data[0]!.value![1]).toBe(min);
    expect(named(seriesOf(odd), "largest").data[0]![1]).toBe(max);
  });
});

describe("the step study", () => {
  it("has the advice on top, the chart told in words, and the numbers behind", async () => {
    expect(stepStudy.safeParse(study).success).toBe(true);
    const { wrapper } = await mountAt(StepStudy, { block, study, column: 0 });
    await flushPromises();
    expect(wrapper.find("li").text()).toBe(study.advice[0]);
    await vi.waitFor(() => expect(wrapper.find("[role=img][aria-label]").exists()).toBe(true));
    const label = wrapper.find("[role=img][aria-label]").attributes("aria-label");
    expect(plain(label ?? "")).toMatch(
      /^Uncertainty against step for spacing\[0\], both logarithmic; chosen step .* best step .* tolerance 1 × 10⁻⁶$/,
    );
    const rows = wrapper.findAll("details tbody tr");
    expect(rows).toHaveLength(SWEEP.length);
    expect(rows[0]!.text()).toContain("truncating");
    expect(rows.at(-1)!.text()).toContain("rounding");
    expect(wrapper.text()).toContain("as posted");
    expect(wrapper.text()).toContain("complex step");
  });

  it("says why there is nothing to draw", async () => {
    const textOf = async (column: number, answer = study) =>
      (await mountAt(StepStudy, { block, study: answer, column })).wrapper.text();
    expect(await textOf(1)).toContain("No step saw any change with spacing[1]");
    const none = { ...study, columns: study.columns.map((one) => ({ ...one, steps: [] })) };
    expect(await textOf(0, none)).toContain("No usable step was posted for spacing[0].");
    expect(await textOf(0, { ...study, columns: [] })).toContain("does not cover spacing[0]");
    const exact = { ...none, columns: none.columns.map((one) => ({ ...one, candidates: [] })) };
    expect(await textOf(0, exact)).toContain("This method has no step.");
  });
});

describe("the choice of reference and column", () => {
  it("keeps to columns that the reference covers", async () => {
    const { wrapper } = await mountAt(StepStudyChoice, { block, chosen: { reference: 0, column: 7 } });
    const [references, columns] = wrapper.findAll("select");
    expect(columns!.findAll("option")).toHaveLength(60);
    await columns!.setValue("9");
    await references!.setValue("1");
    expect(wrapper.emitted("choose")).toEqual([[{ reference: 0, column: 9 }], [{ reference: 1, column: 0 }]]);
  });
});

describe("on the page of a block", () => {
  it("is asked for with the column of the address, and puts another into the address", async () => {
    const sent = answerByPath({ [BLOCK_PATH]: block, [`${BLOCK_PATH}/steps`]: study });
    const { wrapper, router } = await mountAt(BlockDetailView, {}, `${BLOCK_PATH}?study=0.5`);
    await vi.waitFor(() => expect(wrapper.text()).toContain(study.advice[0]!));
    expect(sent.map(({ path }) => path)).toContain(`${BLOCK_PATH}/steps?reference=0&columns=0%3A60`);
    const columns = wrapper.findAll(".study-choice select").at(-1)!;
    expect((columns.element as HTMLSelectElement).value).toBe("5");
    await columns.setValue("8");
    await vi.waitFor(() => expect(router.currentRoute.value.query.study).toBe("0.8"));
    expect(router.currentRoute.value.query.at).toBe(block.commit);
  });

  it("waits to be asked where the block is large", async () => {
    const large = { ...block, rows: 25_001, columns: 10, worst: null };
    const floats = Buffer.alloc(250_010 * 8).toString("base64");
    const bytes = Buffer.alloc(250_010).toString("base64");
    const planes = { derivative: floats, reference: floats, uncertainty: floats, error: floats };
    const codes = { verdict: bytes, source: bytes, motionPlane: null };
    const sent = answerByPath({ [BLOCK_PATH]: { ...large, ...planes, ...codes }, [`${BLOCK_PATH}/steps`]: study });
    const { wrapper, router } = await mountAt(BlockDetailView, {}, BLOCK_PATH);
    await vi.waitFor(() => expect(wrapper.text()).toContain("Study the steps"));
    expect(sent.some(({ path }) => path.includes("/steps"))).toBe(false);
    await wrapper
      .findAll("button")
      .find((button) => button.text() === "Study the steps")!
      .trigger("click");
    await vi.waitFor(() => expect(wrapper.text()).toContain(study.advice[0]!));
    expect(router.currentRoute.value.query.study).toBe("0.0");
  }, 30_000);
});
