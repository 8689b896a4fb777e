import { expect, it } from "vitest";
import { remember } from "../../../scripts/demo/remember.ts";

interface Wind {
  readonly blows: boolean;
  readonly knots: number;
  readonly from: string;
}

it("works out again only what reads something that changed", () => {
  let times = 0;
  const force = remember((wind: Wind) => {
    times += 1;
    return wind.blows ? wind.knots ** 2 : 0;
  });
  expect(force({ blows: false, knots: 5, from: "N" })).toBe(0);
  // Not read where nothing blows, and never read.
  expect(force({ blows: false, knots: 6, from: "S" })).toBe(0);
  expect(times).toBe(1);
  expect(force({ blows: true, knots: 6, from: "S" })).toBe(36);
  expect(force({ blows: true, knots: 7, from: "S" })).toBe(49);
  expect(times).toBe(3);
  expect(force({ blows: true, knots: 6, from: "W" })).toBe(36);
  expect(force({ blows: false, knots: 7, from: "W" })).toBe(0);
  expect(times).toBe(3);
});
