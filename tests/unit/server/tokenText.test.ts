import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { hashSecret, isTokenText, newTokenText, shownPrefix } from "../../../server/features/tokens/tokenText.ts";

const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";

describe("the text of a token", () => {
  it("is a prefix, thirty random letters and six of checksum, never the same twice", () => {
    const texts = Array.from({ length: 500 }, () => newTokenText());
    expect(new Set(texts).size).toBe(500);
    for (const text of texts) {
      expect(text).toMatch(/^clg_[0-9A-Za-z]{36}$/);
      expect(isTokenText(text)).toBe(true);
    }
  });

  it("shows every single changed letter", () => {
    const text = newTokenText();
    fc.assert(
      fc.property(fc.integer({ min: 4, max: 39 }), fc.constantFrom(...ALPHABET), (at, letter) => {
        const changed = text.slice(0, at) + letter + text.slice(at + 1);
        expect(isTokenText(changed)).toBe(changed === text);
      }),
      { numRuns: 500 },
    );
  });

  it("is nothing shorter, longer or of another make", () => {
    const text = newTokenText();
    for (const other of ["", "clg_", text.slice(0, -1), `${text}a`, text.replace("clg_", "abc_"), ` ${text}`]) {
      expect(isTokenText(other), other).toBe(false);
    }
  });

  it("is told apart by ten characters and kept as 32 bytes", () => {
    const text = newTokenText();
    expect(shownPrefix(text)).toBe(text.slice(0, 10));
    expect(hashSecret(text)).toHaveLength(32);
    // SHA-256 of "abc": FIPS 180-4, its example.
    expect(hashSecret("abc").toString("hex")).toBe("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  });
});
