import { expect, it } from "vitest";
import { climbSentence } from "../../../server/features/climbs/sentence.ts";

const facts = {
  kind: "climb",
  open: true,
  jumped: false,
  model: "rotor.thrust",
  partials: 1,
  probes: [] as readonly string[],
  decades: 1.62,
  builds: 18,
  beyond: 0,
} as const;

it.each([
  ["an open climb", {}, "One partial of rotor.thrust has climbed 1.6 decades over 18 builds, within the tolerance."],
  [
    "one that crossed the tolerance",
    { partials: 3, beyond: 2 },
    "Three partials of rotor.thrust have climbed 1.6 decades over 18 builds, two of them past the tolerance by now.",
  ],
  [
    "that of a probe",
    { partials: 0, probes: ["taylor: seed 7"], beyond: 1 },
    "Probe taylor: seed 7 of rotor.thrust has climbed 1.6 decades over 18 builds, past the tolerance by now.",
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
