import { expect, it } from "vitest";
import { inPowers, powerOfTen } from "../../../shared/domain/powerOfTen.ts";

it.each([
  [0, "10⁰"],
  [-8, "10⁻⁸"],
  [10, "10¹⁰"],
  [-308, "10⁻³⁰⁸"],
])("ten to the %i is written %s", (exponent, text) => {
  expect(powerOfTen(exponent)).toBe(text);
});

it.each([
  [3.2e-7, 2, "3.2 × 10⁻⁷"],
  [1e-8, 1, "10⁻⁸"],
  [1e-8, 2, "1.0 × 10⁻⁸"],
  [-5e300, 1, "-5 × 10³⁰⁰"],
  [5e-324, 1, "5 × 10⁻³²⁴"],
])("%d with %i digits is written %s", (value, digits, text) => {
  expect(inPowers(value, digits)).toBe(text);
});
