import { TILE_ENTRIES } from "../../../shared/domain/limits.ts";
import { absoluteUncertainty } from "../../../shared/numerics/uncertainty/absoluteUncertainty.ts";
import { relativeErrors } from "../../../shared/numerics/verdict/relativeErrors.ts";
import type { Reader } from "../../db/reader.ts";
import { PLANE_WIDTH, unpackPlanes } from "../../ingest/planes.ts";
import type { PlaneName } from "../../ingest/planes.ts";
import { decodeTile } from "../../ingest/tiles.ts";
import { loadPlane, loadTiles, tilesOf } from "../../record/readPlanes.ts";

/** Rows first <= i < last and columns likewise. */
export interface Window {
  readonly rows: readonly [number, number];
  readonly columns: readonly [number, number];
}

/** The numbers of a window, row-major. */
export interface BlockPlanes {
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  readonly uncertainty: Float64Array;
  readonly error: Float64Array;
  readonly verdict: Uint8Array;
  readonly source: Uint8Array;
  /** Null where there is no build to compare with. */
  readonly motion: Uint8Array | null;
  /** Builds since an entry was checked, 255 = too long ago or never; null where this build checked all that it tells. */
  readonly age: Uint8Array | null;
}

export interface PlanesWanted {
  readonly snapshotPlanes: Buffer;
  readonly motionPlanes: Buffer | null;
  readonly coveragePlanes: Buffer | null;
  readonly columns: number;
  readonly floor: number;
  readonly window: Window;
}

/** Reads a window of a block's numbers, only the tiles that hold its rows. */
export async function loadBlockPlanes(reader: Reader, wanted: PlanesWanted): Promise<BlockPlanes> {
  const planes = unpackPlanes(wanted.snapshotPlanes);
  const cut = (name: PlaneName, from = planes) => loadWindow(reader, name, tilesOf(from, name), wanted);
  const derivative = new Float64Array(await cut("derivative"));
  const reference = new Float64Array(await cut("reference"));
  const resolution = new Float32Array(await cut("resolution"));
  const { floor } = wanted;
  const coverage = wanted.coveragePlanes && unpackPlanes(wanted.coveragePlanes);
  return {
    derivative,
    reference,
    uncertainty: Float64Array.from(resolution, (share, at) => absoluteUncertainty(share, reference[at], floor)),
    error: relativeErrors(derivative, reference, floor, new Float64Array(derivative.length)),
    verdict: new Uint8Array(await cut("verdict", coverage ?? planes)),
    source: new Uint8Array(await cut("source")),
    motion: wanted.motionPlanes && new Uint8Array(await cut("motion", unpackPlanes(wanted.motionPlanes))),
    age: coverage && new Uint8Array(await cut("age", coverage)),
  };
}

/** Output and input values as posted, or null. */
export async function loadSideValues(
  reader: Reader,
  packed: Buffer,
  name: "outputValues" | "inputValues",
  size: number,
): Promise<Float64Array | null> {
  const planes = unpackPlanes(packed);
  if (!planes.some((plane) => plane.name === name)) return null;
  return new Float64Array(await loadPlane(reader, planes, name, size));
}

/**
 * What one posted reference said within the window at one of its steps, NaN where it said nothing; null where there is
 * no such reference or step. `covered`: the columns that it has, in its order, or null for all.
 */
export async function loadPostedPlane(
  reader: Reader,
  wanted: Pick<PlanesWanted, "snapshotPlanes" | "columns" | "window">,
  posted: { readonly reference: number; readonly step: number; readonly covered: readonly number[] | null },
): Promise<Float64Array | null> {
  const { columns, window } = wanted;
  const planes = unpackPlanes(wanted.snapshotPlanes);
  const { reference, step, covered } = posted;
  if (!planes.some((p) => p.name === "posted" && p.reference === reference && p.step === step)) return null;
  const tiles = tilesOf(planes, "posted", reference, step);
  if (covered === null) return new Float64Array(await loadWindow(reader, "posted", tiles, { columns, window }));
  const whole = { rows: window.rows, columns: [0, covered.length] } as const;
  const narrow = new Float64Array(
    await loadWindow(reader, "posted", tiles, { columns: covered.length, window: whole }),
  );
  const [firstColumn, lastColumn] = window.columns;
  const width = lastColumn - firstColumn;
  const rows = window.rows[1] - window.rows[0];
  const values = new Float64Array(rows * width).fill(NaN);
  covered.forEach((column, at) => {
    if (column < firstColumn || column >= lastColumn) return;
    for (let row = 0; row < rows; row++) values[row * width + column - firstColumn] = narrow[row * covered.length + at];
  });
  return values;
}

async function loadWindow(
  reader: Reader,
  name: PlaneName,
  planeTiles: readonly number[],
  { columns, window }: Pick<PlanesWanted, "columns" | "window">,
): Promise<ArrayBuffer> {
  const width = PLANE_WIDTH[name];
  const [firstRow, lastRow] = window.rows;
  const [firstColumn, lastColumn] = window.columns;
  const taken = (lastColumn - firstColumn) * width;
  const out = new Uint8Array((lastRow - firstRow) * taken);
  if (out.length === 0) return out.buffer;
  const firstTile = Math.floor((firstRow * columns) / TILE_ENTRIES);
  const ids = planeTiles.slice(firstTile, Math.ceil((lastRow * columns) / TILE_ENTRIES));
  const tiles = await loadTiles(reader, ids);
  const bytes = Buffer.concat(
    ids.map((id) => {
      const tile = tiles.get(id);
      if (!tile) throw new RangeError(`tile ${id} of plane ${name} is not in the record`);
      return decodeTile(tile.encoding, tile.data, width);
    }),
  );
  for (let row = firstRow; row < lastRow; row += 1) {
    const start = (row * columns + firstColumn - firstTile * TILE_ENTRIES) * width;
    out.set(bytes.subarray(start, start + taken), (row - firstRow) * taken);
  }
  return out.buffer;
}
