import type { PlantKey } from "./history/step.ts";

/**
 * How the server tells of a planted mistake: as a break of a model; as a reference signature of a block of it; or as a
 * lane that fell silent.
 */
export type Told = "break" | "reference" | "silence";

export interface Planted {
  readonly key: PlantKey;
  readonly what: string;
  readonly model: string;
  readonly told: Told;
}

/** Every mistake of the history, in its order. */
export const PLANTED: readonly Planted[] = [
  { key: "flipped-sign", what: "a sign flipped", model: "drivetrain.torque", told: "break" },
  { key: "degrees", what: "degrees taken for radians", model: "blade.section", told: "break" },
  { key: "left-behind", what: "a derivative left behind by its model", model: "rotor.thrust", told: "break" },
  { key: "single-precision", what: "a detour through single precision", model: "wake.deficit", told: "break" },
  { key: "dropped-term", what: "a term dropped, on a branch", model: "cost.energy", told: "break" },
  { key: "silent-lane", what: "a lane that goes silent", model: "clang-arm", told: "silence" },
  { key: "swallowed-imaginary", what: "a clip that swallows imaginary parts", model: "cost.energy", told: "reference" },
  { key: "loosened-solve", what: "an inner solve loosened step by step", model: "mooring.tension", told: "break" },
  { key: "reordered-rows", what: "rows filled in another order", model: "wake.deficit", told: "break" },
  { key: "per-cent", what: "an efficiency in per cent", model: "drivetrain.torque", told: "break" },
];
