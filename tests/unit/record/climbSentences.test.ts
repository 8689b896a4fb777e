import { expect, it } from "vitest";
import { climbSentence } from "../../../server/features/climbs/sentence.ts";

const facts = {
  kind: "climb",
  open: true,
  jumped: false,
  model: "rotor.thrust",
  entryCount: 1,
  decades: 1.62,
  builds: 18,
  disagrees: false,
} as const;

it.each([
  ["an open climb", {}, "One partial of rotor.thrust has climbed 1.6 decades over 18 builds, within the tolerance."],
  [
    "one that crossed the tolerance",
    { entryCount: 2, disagrees: true },
    "Two partials of rotor.thrust have climbed 1.6 decades over 18 builds, and the worst is past the tolerance.",
  ],
  [
    "a jump that stayed",
    { jumped: true, builds: 3 },
    "One partial of rotor.thrust jumped 1.6 decades and has stayed there for three builds, within the tolerance.",
  ],
  ["a climb that ended", { open: false }, "One partial of rotor.thrust climbed 1.6 decades; that has ended."],
  [
    "a jump",
    { kind: "jump", open: false, decades: 1.04 },
    "One partial of rotor.thrust jumped 1.0 decade in one build, within the tolerance.",
  ],
] as const)("%s is told in a sentence", (_name, more, sentence) => {
  expect(climbSentence({ ...facts, ...more })).toBe(sentence);
});
