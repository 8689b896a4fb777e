import { gzipSync } from "node:zlib";
import fc from "fast-check";
import { describe, expect, it } from "vitest";
import type { JudgedPosting } from "../../../server/ingest/judgePosting.ts";
import { findJsonFault } from "../../../server/ingest/findJsonFault.ts";
import { build, judge, refusal } from "./documents.ts";

/** What is said of a body that is not JSON, without the words that all have in common. */
function said(body: string | Uint8Array): string {
  const rejection = refusal(body);
  if (rejection.kind !== "malformed-json") throw new Error(JSON.stringify(rejection));
  return rejection.detail.replace("The body is not JSON: ", "");
}

const valid = JSON.stringify(build());
/** Long enough that the engine quotes only a part of it. */
const long = `{"a": [${"1, ".repeat(200)}\n`;

describe("a body that is not JSON", () => {
  it.each([
    ["{]", 'line 1, column 2: unexpected "]".'],
    ['{"a": 1,}', 'line 1, column 9: unexpected "}".'],
    ["{'a': 1}", 'line 1, column 2: unexpected "\'".'],
    ["[1 2]", 'line 1, column 4: unexpected "2".'],
    ['{\n  "a": [1,\n    x]\n}', 'line 3, column 5: unexpected "x".'],
    ['{\r\n  "a": [1,\r\n    x]\r\n}', 'line 3, column 5: unexpected "x".'],
    ["[1]]", 'line 1, column 4: unexpected "]".'],
    ["[01]", 'line 1, column 3: unexpected "1".'],
    ["[+1]", 'line 1, column 2: unexpected "+".'],
    [`${long}   oops]}`, 'line 2, column 4: unexpected "o".'],
    ['["\\x"]', 'line 1, column 4: unexpected "x".'],
    ['["\\u12g4"]', 'line 1, column 7: unexpected "g".'],
    ['["a\tb"]', 'line 1, column 4: unexpected "\\t".'],
    ["[1.e5]", 'line 1, column 4: unexpected "e".'],
    ["[trux]", 'line 1, column 5: unexpected "x".'],
    ['{"a" 1}', 'line 1, column 6: unexpected "1".'],
    ['["é", x]', 'line 1, column 7: unexpected "x".'],
  ])("%j is told line and column", (body, expected) => {
    expect(said(body)).toBe(expected);
  });

  it.each([
    ['{"a": [1, NaN]}', 'line 1, column 11: NaN is no JSON number; send it as the string "NaN".'],
    ['{\n"a": Infinity}', 'line 2, column 6: Infinity is no JSON number; send it as the string "Infinity".'],
    [`${long}NaN]}`, 'line 2, column 1: NaN is no JSON number; send it as the string "NaN".'],
    [`${long}Infinity]}`, 'line 2, column 1: Infinity is no JSON number; send it as the string "Infinity".'],
  ])("%j is told to send words as strings", (body, expected) => {
    expect(said(body)).toBe(expected);
  });

  it("is told so of -Infinity and -NaN at the minus", () => {
    for (const word of ["-Infinity", "-NaN"]) {
      for (const start of ["[1, ", `${long}`]) {
        expect(said(`${start}${word}]`), `${start}${word}`).toContain(`: ${word} is no JSON number`);
      }
    }
    expect(said("[1, -Infinity]")).toContain("line 1, column 5:");
    expect(said(`${long}-Infinity]}`)).toContain("line 2, column 1:");
  });

  it.each([
    "{",
    '{"a"',
    '{"a": [1, 2',
    '{"a": "text',
    "[1, ",
    "[1, -",
    "[1.",
    "[1e+",
    "[tr",
    '["\\',
    '["\\u12',
    `${long}1`,
    valid.slice(0, -1),
  ])("%j ends too early", (body) => {
    const lines = body.split("\n");
    expect(said(body)).toBe(`line ${lines.length}, column ${(lines.at(-1) ?? "").length + 1}: it ends too early.`);
  });

  it("is told so at every cut of a valid document", () => {
    for (let end = 1; end < valid.length; end++) expect(said(valid.slice(0, end))).toContain("it ends too early.");
  });

  it.each(["", " \r\n\t"])("%j is empty", (body) => {
    expect(said(body)).toBe("The body is empty.");
  });

  it.each([
    ["a lone continuation byte", [0x22, 0x80, 0x22]],
    ["Latin-1", [0x22, 0xe9, 0x22]],
    ["UTF-16", [0xff, 0xfe, 0x7b, 0x00]],
    ["an encoded surrogate", [0x22, 0xed, 0xa0, 0x80, 0x22]],
    ["an overlong slash", [0x22, 0xc0, 0xaf, 0x22]],
  ])("%s is not UTF-8", (_, bytes) => {
    expect(said(Uint8Array.from(bytes))).toBe("The body is not UTF-8.");
  });

  it("counts columns after a byte order mark", () => {
    expect(said("\ufeff{]")).toBe('line 1, column 2: unexpected "]".');
    expect(judge(`\ufeff${valid}`).blocks).toHaveLength(1);
  });

  it.each(["null", "3", '"text"', "[]", "true"])("%s is JSON, but no document", (body) => {
    expect(refusal(body)).toMatchObject({ kind: "invalid", errors: [{ pointer: "#" }] });
  });
});

it("the place of a fault is never where a parser would go on", () => {
  const parses = (text: string) => {
    try {
      JSON.parse(text);
      return true;
    } catch {
      return false;
    }
  };
  const characters = [...'{}[]":,\\ \n\t0123.eE+-truefalsnu'];
  const piece = fc.oneof(fc.constantFrom(...characters), fc.json());
  fc.assert(
    fc.property(fc.array(piece, { maxLength: 12 }), (pieces) => {
      const text = pieces.join("");
      const fault = findJsonFault(text);
      if (parses(text)) expect(fault).toBe(text.length);
      // What comes before the fault can be gone on with; what includes it cannot, whatever follows.
      expect(findJsonFault(text.slice(0, fault))).toBe(fault);
      if (fault < text.length) expect(parses(text)).toBe(false);
    }),
    { numRuns: 500 },
  );
});

describe("a body that is gzipped", () => {
  const zipped = gzipSync(valid);
  const told = ({ bodyHash, bytes, blocks }: JudgedPosting) => ({ bodyHash, bytes, blocks });

  it("is the same posting", () => {
    expect(told(judge(zipped, { encoding: "gzip" }))).toEqual(told(judge(valid)));
  });

  it.each([
    ["truncated", zipped.subarray(0, -9)],
    ["cut after its head", zipped.subarray(0, 10)],
    ["empty", new Uint8Array(0)],
    ["not gzipped at all", new TextEncoder().encode(valid)],
    ["damaged", zipped.map((byte, at) => (at === zipped.length - 6 ? byte ^ 1 : byte))],
  ])("and %s is refused", (_, bytes) => {
    expect(refusal(bytes, { encoding: "gzip" }).kind).toBe("malformed-encoding");
  });

  it("may not grow beyond the limit, which is told", () => {
    const bomb = gzipSync(Buffer.alloc(5_000_000, 32));
    expect(bomb.length).toBeLessThan(10_000);
    expect(refusal(bomb, { encoding: "gzip", limits: { decodedBytes: 100_000 } })).toEqual({
      kind: "too-large",
      detail: "The decoded body is larger than 100000 bytes.",
    });
    expect(refusal(valid, { limits: { decodedBytes: 100 } }).kind).toBe("too-large");
    expect(judge(zipped, { encoding: "gzip", limits: { decodedBytes: valid.length } }).bytes).toBe(valid.length);
  });
});
