import type { BlockDetail } from "../../shared/schemas/block.ts";

/** A block's numbers, decoded once: row-major, rows x columns. */
export interface BlockPlanes {
  readonly rows: number;
  readonly columns: number;
  readonly derivative: Float64Array;
  readonly reference: Float64Array;
  readonly uncertainty: Float64Array;
  readonly error: Float64Array;
  /** Index into VERDICTS; 255 none. */
  readonly verdict: Uint8Array;
  /** Index into MOTIONS; 255 none. Null for the first build of a lane. */
  readonly motion: Uint8Array | null;
  readonly source: Uint8Array;
  /** Builds since an entry was checked, 255 = too long ago or never; null where this build checked whatever has a verdict. */
  readonly age: Uint8Array | null;
}

function bytesOf(base64: string): Uint8Array<ArrayBuffer> {
  const binary = atob(base64);
  const bytes = new Uint8Array(binary.length);
  for (let k = 0; k < binary.length; k += 1) bytes[k] = binary.charCodeAt(k);
  return bytes;
}

/** Base64 of little-endian binary64, whatever the order of this machine's own bytes. */
export function floatsOf(base64: string): Float64Array {
  const bytes = bytesOf(base64);
  const view = new DataView(bytes.buffer);
  return Float64Array.from({ length: bytes.length / 8 }, (_, k) => view.getFloat64(8 * k, true));
}

/** Throws RangeError where a plane has not rows x columns entries. */
export function decodePlanes(block: BlockDetail): BlockPlanes {
  const { rows, columns } = block;
  const checked = <T extends { length: number }>(name: string, plane: T): T => {
    if (plane.length !== rows * columns) {
      throw new RangeError(`${name} has ${plane.length} entries, expected ${rows} x ${columns}`);
    }
    return plane;
  };
  const floats = (name: "derivative" | "reference" | "uncertainty" | "error") =>
    checked(name, floatsOf(String(block[name])));
  return {
    rows,
    columns,
    derivative: floats("derivative"),
    reference: floats("reference"),
    uncertainty: floats("uncertainty"),
    error: floats("error"),
    verdict: checked("verdict", bytesOf(String(block.verdict))),
    motion: block.motionPlane === null ? null : checked("motion", bytesOf(String(block.motionPlane))),
    source: checked("source", bytesOf(String(block.source))),
    age: block.age === null ? null : checked("age", bytesOf(String(block.age))),
  };
}
