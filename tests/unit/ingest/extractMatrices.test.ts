import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { ExtractedMatrix, extractMatrices } from "../../../server/ingest/extractMatrices.ts";

const MANY = 1_000_000;
const extract = (text: string, most = MANY) => extractMatrices(Buffer.from(text), most);

/** The document put together again: matrices as rows. */
function together(text: string): unknown {
  const extraction = extract(text);
  if (extraction === null) return null;
  return JSON.parse(extraction.rest.toString(), (_key, value: unknown) => {
    const restored = extraction.restore(value);
    if (!(restored instanceof ExtractedMatrix)) return restored;
    const { rows, columns, values } = restored;
    return Array.from({ length: rows }, (_, row) => [...values.subarray(row * columns, (row + 1) * columns)]);
  });
}

describe("extractMatrices", () => {
  it("gives back every matrix bit for bit, however the document is spaced", () => {
    const number = fc.double({ noNaN: true, noDefaultInfinity: true });
    const matrix = fc
      .tuple(fc.integer({ min: 1, max: 6 }), fc.integer({ min: 0, max: 6 }))
      .chain(([rows, columns]) =>
        fc.array(fc.array(number, { minLength: columns, maxLength: columns }), { minLength: rows, maxLength: rows }),
      );
    const block = fc.record({ name: fc.string({ unit: "binary" }), derivative: fc.record({ values: matrix }) });
    fc.assert(
      fc.property(fc.array(block, { maxLength: 4 }), fc.constantFrom(0, 1, 2), (blocks, indent) => {
        // JSON spells -0 as 0.
        const document = JSON.parse(JSON.stringify({ blocks })) as unknown;
        const text = JSON.stringify(document, null, indent);
        // Spaced out, the matrices may not be met; then nothing is taken and nothing is lost.
        expect(together(text)).toEqual(document);
        expect(together(text.replaceAll('"values": [\n', '"values":['))).toEqual(document);
      }),
    );
  });

  it("takes the matrices out", () => {
    const extraction = extract('{"a":{"values":[[1,-0],[2.5e-3,3]]},"b":{"values":[[4]]}}');
    expect(extraction?.rest.toString()).not.toMatch(/\[\[/);
    const { a } = JSON.parse(extraction?.rest.toString() ?? "") as { a: { values: unknown } };
    const matrix = extraction?.restore(a.values) as ExtractedMatrix;
    expect([matrix.rows, matrix.columns]).toEqual([2, 2]);
    expect([...matrix.values]).toEqual([1, -0, 2.5e-3, 3]);
  });

  it.each([
    ["rows of different lengths", '{"values":[[1,2],[3]]}'],
    ["null", '{"values":[[1,null]]}'],
    ["a word for what is not finite", '{"values":[["NaN"]]}'],
    ["a number too large for binary64", '{"values":[[1e999]]}'],
    ["deeper rows", '{"values":[[1,[2]]]}'],
    ["an end before the matrix is whole", '{"values":[[1,2],[3'],
    ["something between the rows", '{"values":[[1] [2]]}'],
    ["a comma too many", '{"values":[[1],]}'],
  ])("leaves a document with %s as it is", (_what, text) => {
    expect(extract(text)).toBeNull();
  });

  it("leaves a matrix with too many numbers to the limits", () => {
    expect(extract('{"values":[[1,2],[3,4]]}', 3)).toBeNull();
    expect(extract('{"values":[[1,2],[3,4]]}', 4)).not.toBeNull();
  });

  it("is not deceived by text in strings, or by marks that a document brings itself", () => {
    const document = { subject: '"values":[[1]]', values: { "matrix 0": 0 } };
    expect(together(JSON.stringify(document))).toEqual(document);
  });
});
