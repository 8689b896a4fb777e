import { expect, it } from "vitest";
import { judgeDrift } from "../../../server/ingest/judgeDrift.ts";
import type { DriftStep, DriftTiles } from "../../../server/ingest/judgeDrift.ts";
import { encodePlane } from "../../../server/ingest/tiles.ts";
import { VERDICT_CODE } from "../../../shared/domain/vocabulary.ts";
import { unpackDrift } from "../../../shared/numerics/drift/unpackDrift.ts";

const tilesOf = (plane: Float64Array | Float32Array | Uint8Array, width: 8 | 4 | 1) =>
  encodePlane(new Uint8Array(plane.buffer), width, () => false);

/** Entries of reference 1 that are off by these relative errors, known to 1e-14. */
function build(buildId: number, errors: readonly number[]): DriftStep {
  const entries = errors.length;
  const tiles: DriftTiles = {
    entries,
    floor: 1,
    derivative: tilesOf(
      Float64Array.from(errors, (error) => 1 + error),
      8,
    ),
    reference: tilesOf(new Float64Array(entries).fill(1), 8),
    resolution: tilesOf(new Float32Array(entries).fill(1e-14), 4),
    verdict: tilesOf(new Uint8Array(entries).fill(VERDICT_CODE.agrees), 1),
  };
  return { buildId, tiles, times: 1, restart: null };
}

it("a block with fewer rows than before says nothing of the entries that are gone, and they go on where they were", () => {
  const steps = [build(1, [1e-9, 1e-8, 1e-7]), build(2, [1e-9, 1e-8]), build(3, [1e-9, 1e-8, 1e-7])];
  const { state, quiet, happenings } = judgeDrift({ state: null, steps });
  const { count, centre } = unpackDrift(state);
  expect([...count]).toEqual([3, 3, 2]);
  expect([...centre].map((g) => Math.round(g))).toEqual([-9, -8, -7]);
  expect({ quiet, happenings }).toEqual({ quiet: true, happenings: [] });
});

it("a block with more rows than before begins with the new ones", () => {
  const { state } = judgeDrift({ state: null, steps: [build(1, [1e-9]), build(2, [1e-9, 1e-8])] });
  expect([...unpackDrift(state).count]).toEqual([2, 1]);
});
