import { describe, expect, it } from "vitest";
import { decodeTile, encodePlane, oneOfTile } from "../../../server/ingest/tiles.ts";
import type { Width } from "../../../server/ingest/tiles.ts";
import { mulberry32 } from "../../support/random.ts";

/** One plane for each way in which a tile may be written. */
function planes(width: Width): Record<string, Uint8Array> {
  const random = mulberry32(7);
  const size = 4096 * width;
  const noise = Uint8Array.from({ length: size }, () => Math.floor(random() * 256));
  return {
    noise,
    "slowly changing": Uint8Array.from({ length: size }, (_, at) => Math.floor(at / (64 * width))),
    constant: Uint8Array.from({ length: size }, (_, at) => 17 + (at % width)),
    "partly filled": noise.slice(0, 100 * width),
  };
}

describe.each([8, 4, 1] as const)("one number of a tile of width %i", (width) => {
  it.each(Object.entries(planes(width)))("is the one that the whole tile has there: %s", (_, bytes) => {
    const [tile] = encodePlane(bytes, width, () => false);
    const whole = decodeTile(tile?.encoding ?? -1, tile?.data ?? Buffer.alloc(0), width);
    expect(Buffer.from(whole).equals(bytes)).toBe(true);
    const count = bytes.length / width;
    for (const index of [0, 1, Math.floor(count / 2), count - 1]) {
      const one = oneOfTile(tile?.encoding ?? -1, tile?.data ?? Buffer.alloc(0), width, index);
      expect([...one]).toEqual([...bytes.slice(index * width, (index + 1) * width)]);
    }
  });

  it("is written in all three ways here", () => {
    const encodings = Object.values(planes(width)).map((bytes) => encodePlane(bytes, width, () => false)[0]?.encoding);
    expect(new Set(encodings).size).toBe(3);
  });
});
