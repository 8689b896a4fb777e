import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { TILE_ENTRIES } from "../../../shared/domain/limits.ts";
import { assemble } from "../../../server/ingest/assemble.ts";
import { PLANE_KIND, PLANE_WIDTH, packPlanes, unpackPlanes } from "../../../server/ingest/planes.ts";
import type { PlaneName } from "../../../server/ingest/planes.ts";
import { decodeTile, encodePlane } from "../../../server/ingest/tiles.ts";
import type { Width } from "../../../server/ingest/tiles.ts";
import { TileSet, unpackTiles } from "../../../server/ingest/tileSet.ts";
import { mulberry32 } from "../../support/random.ts";

const sameBytes = (a: ArrayBuffer, b: ArrayBufferView) =>
  Buffer.from(a).equals(Buffer.from(b.buffer, b.byteOffset, b.byteLength));
const never = () => false;
const WIDTHS: readonly Width[] = [8, 4, 1];
/** A plane of each width. */
const NAMED = { 8: "derivative", 4: "resolution", 1: "verdict" } as const;

/** Bytes that deflate well, badly, not at all, or are all one number. */
function bytesLike(kind: "noise" | "ramp" | "constant" | "mixed", entries: number, width: Width, seed: number) {
  const random = mulberry32(seed);
  const noise = () => Math.floor(random() * 256);
  const value = Array.from({ length: width }, noise);
  return Uint8Array.from({ length: entries * width }, (_, at) => {
    if (kind === "constant") return value[at % width] as number;
    if (kind === "ramp") return at % width === width - 1 ? 64 : Math.floor(at / 997);
    return kind === "noise" || Math.floor(at / (TILE_ENTRIES * width)) % 2 === 0 ? noise() : 7;
  });
}

describe("tiles", () => {
  it("give back every plane, whatever its width, length and content", () => {
    const encodings = new Set<number>();
    fc.assert(
      fc.property(
        fc.constantFrom(...WIDTHS),
        fc.constantFrom("noise", "ramp", "constant", "mixed"),
        fc.oneof(fc.integer({ min: 0, max: 40 }), fc.integer({ min: TILE_ENTRIES - 2, max: 2 * TILE_ENTRIES + 2 })),
        fc.integer(),
        (width, kind, entries, seed) => {
          const bytes = bytesLike(kind, entries, width, seed);
          const tiles = encodePlane(bytes, width, never);
          expect(tiles).toHaveLength(Math.ceil(entries / TILE_ENTRIES));
          for (const { encoding } of tiles) encodings.add(encoding);
          expect(sameBytes(assemble(NAMED[width], tiles, entries), bytes)).toBe(true);
        },
      ),
      { numRuns: 80 },
    );
    expect([...encodings].sort()).toEqual([0, 1, 2]);
  });

  it("of one number take a few bytes, a partial last tile included", () => {
    for (const width of WIDTHS) {
      const tiles = encodePlane(bytesLike("constant", TILE_ENTRIES + 3, width, 5), width, never);
      expect(tiles.map((tile) => tile.data.length)).toEqual([width + 4, width + 4]);
      expect(tiles.map((tile) => decodeTile(tile.encoding, tile.data, width).length)).toEqual([
        TILE_ENTRIES * width,
        3 * width,
      ]);
    }
  });

  it("are named by width and content, not by how they are written", () => {
    // The ramp is deflated as a plane of its own, and kept raw after noise, which is the sample.
    const ramp = bytesLike("ramp", TILE_ENTRIES, 8, 1);
    const noise = bytesLike("noise", TILE_ENTRIES, 8, 2);
    const alone = encodePlane(ramp, 8, never)[0];
    const after = encodePlane(Uint8Array.from([...noise, ...ramp]), 8, never)[1];
    expect(alone?.encoding).not.toBe(after?.encoding);
    expect(alone?.hash).toEqual(after?.hash);
    const asBytes = encodePlane(ramp.subarray(0, TILE_ENTRIES), 1, never)[0];
    const asFloats = encodePlane(ramp.subarray(0, TILE_ENTRIES), 4, never)[0];
    expect(asBytes?.hash).not.toEqual(asFloats?.hash);
  });

  it("that are known are not written again", () => {
    const bytes = bytesLike("noise", TILE_ENTRIES, 8, 3);
    const [first] = encodePlane(bytes, 8, never);
    const [again] = encodePlane(bytes, 8, () => true);
    expect(again?.hash).toEqual(first?.hash);
    expect(again?.data).toHaveLength(0);
  });

  it("keep -0, subnormal and not finite numbers bit for bit", () => {
    const values = Float64Array.of(-0, 0, 5e-324, -5e-324, NaN, Infinity, -Infinity, 1.7976931348623157e308);
    const tiles = encodePlane(new Uint8Array(values.buffer), 8, never);
    const back = new Float64Array(assemble("derivative", tiles, values.length));
    expect([...back].map((value, at) => Object.is(value, values[at]))).not.toContain(false);
  });

  it("of a wrong length, and encodings that nobody knows, are faults", () => {
    const tiles = encodePlane(new Uint8Array(16), 8, never);
    expect(() => assemble("derivative", tiles, 3)).toThrow(RangeError);
    expect(() => decodeTile(99, Buffer.alloc(12), 8)).toThrow(RangeError);
  });
});

describe("a set of tiles", () => {
  it("holds each content once, and gives planes back whole, small and large ones alike", () => {
    const large = Float64Array.from({ length: 200_000 }, (_, at) => Math.sin(at));
    const small = Float64Array.from({ length: 5 }, (_, at) => Math.cos(at));
    const set = new TileSet();
    const planes = [
      set.addPlane("derivative", large),
      set.addPlane("reference", small),
      set.addPlane("posted", small, 1, 2),
      set.addPlane("inputValues", large.subarray(0, TILE_ENTRIES)),
    ];
    expect(planes[2]).toEqual({ name: "posted", reference: 1, step: 2, tiles: planes[1]?.tiles });
    expect(planes[3]?.tiles).toEqual(planes[0]?.tiles.slice(0, 1));
    const tiles = unpackTiles(set.pack());
    expect(tiles).toHaveLength(Math.ceil(large.length / TILE_ENTRIES) + 1);
    const read = (at: number, length: number) =>
      assemble(
        "derivative",
        (planes[at]?.tiles ?? []).map((tile) => tiles[tile] ?? { encoding: 0, data: new Uint8Array() }),
        length,
      );
    expect(sameBytes(read(0, large.length), large)).toBe(true);
    expect(sameBytes(read(1, small.length), small)).toBe(true);
  });
});

describe("the list of planes", () => {
  const names = Object.keys(PLANE_KIND) as PlaneName[];

  it("packs into bytes and back", () => {
    const plane = fc.record({
      name: fc.constantFrom(...names),
      reference: fc.nat(31),
      step: fc.nat(63),
      tiles: fc.array(fc.nat(2 ** 32 - 1), { maxLength: 20 }),
    });
    fc.assert(
      fc.property(fc.array(plane), (planes) => {
        expect(unpackPlanes(packPlanes(planes))).toEqual(planes);
      }),
    );
  });

  it("has a number of its own and a width for every plane", () => {
    expect(new Set(Object.values(PLANE_KIND)).size).toBe(names.length);
    expect(Object.keys(PLANE_WIDTH).sort()).toEqual(names.toSorted());
    expect(() => unpackPlanes(Buffer.from(Uint32Array.of(99, 0, 0, 0).buffer))).toThrow(RangeError);
  });
});
