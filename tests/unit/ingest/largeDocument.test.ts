import { describe, expect, it } from "vitest";
import { judgePosting } from "../../../server/ingest/judgePosting.ts";
import { RejectedPosting } from "../../../server/ingest/rejection.ts";
import { DEFAULT_LIMITS } from "../../../shared/domain/limits.ts";
import { DEFAULT_TOLERANCES } from "../../../shared/domain/tolerances.ts";
import { mulberry32 } from "../../support/random.ts";

const ROWS = 200;
const COLUMNS = 250;

/** More than the megabyte from which on matrices are read from the bytes. */
function largeDocument() {
  const random = mulberry32(3);
  const values = Array.from({ length: ROWS }, () =>
    Array.from({ length: COLUMNS }, () => random() + random() / 2 ** 32),
  );
  const near = (scale: number) => values.map((row) => row.map((value) => value * (1 + scale * random())));
  return {
    format: "clinograph.build/1",
    commit: { sha: "a".repeat(40) },
    run: { id: "1" },
    blocks: [
      {
        model: "rotor.thrust",
        output: { name: "thrust", size: ROWS },
        input: { name: "pitch", size: COLUMNS },
        derivative: { method: "analytic", values },
        references: [
          { method: "central-difference", step: 1e-5, values: near(1e-9) },
          { method: "forward-difference", sweep: [1e-6, 1e-7].map((step) => ({ step, values: near(1e-7) })) },
        ],
      },
    ],
  };
}

function judged(text: string) {
  const body = new TextEncoder().encode(text);
  return judgePosting({ body, encoding: "identity", limits: DEFAULT_LIMITS, tolerances: DEFAULT_TOLERANCES });
}

function rejected(text: string) {
  try {
    judged(text);
  } catch (error) {
    if (error instanceof RejectedPosting) return error.rejection;
    throw error;
  }
  throw new Error("the document was judged");
}

describe("a large document", () => {
  it("is judged the same whether its matrices are read from the bytes or it is parsed as a whole", () => {
    const document = largeDocument();
    const [fromBytes] = judged(JSON.stringify(document)).blocks;
    // Spaced out, no matrix is met in the bytes.
    const [whole] = judged(JSON.stringify(document, null, 1)).blocks;
    expect(fromBytes?.snapshot).toEqual(whole?.snapshot);
    expect(fromBytes?.details).toBe(whole?.details);
  });

  it("is told its mistakes like a small one", () => {
    const document = largeDocument();
    document.blocks[0]?.references[0]?.values?.pop();
    expect(rejected(JSON.stringify(document))).toEqual({
      kind: "invalid",
      errors: [{ pointer: "#/blocks/0/references/0/values", detail: `has ${ROWS - 1} rows, expected ${ROWS}` }],
      more: 0,
    });
  });

  it("is told the place of a fault in the text that was sent", () => {
    const text = JSON.stringify(largeDocument());
    const at = text.lastIndexOf("]");
    const rejection = rejected(`${text.slice(0, at)} !${text.slice(at)}`);
    expect(rejection).toMatchObject({ kind: "malformed-json" });
    expect((rejection as { detail: string }).detail).toContain(`line 1, column ${at + 2}`);
  });

  it("refuses a matrix where the format has none", () => {
    const document = { ...largeDocument(), extra: { values: [[1, 2]] } };
    expect(rejected(JSON.stringify(document))).toMatchObject({ errors: [{ pointer: "#/extra" }] });
  });
});
