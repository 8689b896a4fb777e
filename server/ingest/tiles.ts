import { createHash } from "node:crypto";
import { deflateRawSync, inflateRawSync } from "node:zlib";
import { TILE_ENTRIES } from "../../shared/domain/limits.ts";

/** Bytes of a number in a plane: binary64, binary32 or one byte. */
export type Width = 8 | 4 | 1;

/** How a stored tile is written; the number is in the database. */
const RAW = 0;
const SHUFFLED_DEFLATED = 1;
const CONSTANT = 2;

export interface EncodedTile {
  /** SHA-256 of the width and the plain bytes, so that it does not depend on the encoding. */
  readonly hash: Buffer;
  readonly encoding: number;
  readonly data: Buffer;
}

/** A plane is deflated only if a sample of its tiles shrinks below this share. */
const WORTH_DEFLATING = 0.85;
/** One tile of so many is the sample. */
const SAMPLE_EVERY = 32;

/** Cuts a plane's bytes into encoded tiles of 4,096 entries. */
export function encodePlane(bytes: Uint8Array, width: Width): EncodedTile[] {
  const size = TILE_ENTRIES * width;
  const count = Math.ceil(bytes.length / size);
  const parts = Array.from({ length: count }, (_, at) => bytes.subarray(at * size, (at + 1) * size));
  const deflate = width === 1 || parts.some((part, at) => at % SAMPLE_EVERY === 0 && shrinks(part, width));
  return parts.map((part) => encodeTile(part, width, deflate));
}

function shrinks(part: Uint8Array, width: Width): boolean {
  return deflateRawSync(shuffle(part, width), { level: 1 }).length < WORTH_DEFLATING * part.length;
}

function encodeTile(part: Uint8Array, width: Width, deflate: boolean): EncodedTile {
  const hash = createHash("sha256").update(Uint8Array.of(width)).update(part).digest();
  if (isConstant(part, width)) return { hash, encoding: CONSTANT, data: constant(part, width) };
  if (deflate) {
    const data = deflateRawSync(shuffle(part, width), { level: 1 });
    if (data.length < part.length) return { hash, encoding: SHUFFLED_DEFLATED, data };
  }
  return { hash, encoding: RAW, data: Buffer.from(part) };
}

function isConstant(part: Uint8Array, width: Width): boolean {
  for (let at = width; at < part.length; at++) if (part[at] !== part[at - width]) return false;
  return true;
}

/** The value once, then how often, as a 32-bit number. */
function constant(part: Uint8Array, width: Width): Buffer {
  const data = Buffer.alloc(width + 4);
  data.set(part.subarray(0, width));
  data.writeUInt32LE(part.length / width, width);
  return data;
}

/** Plain bytes of a stored tile. */
export function decodeTile(encoding: number, data: Buffer, width: Width): Uint8Array {
  if (encoding === RAW) return data;
  if (encoding === SHUFFLED_DEFLATED) return unshuffle(inflateRawSync(data), width);
  if (encoding !== CONSTANT) throw new RangeError(`encoding: ${encoding} is not known`);
  const bytes = new Uint8Array(data.readUInt32LE(width) * width);
  for (let at = 0; at < bytes.length; at++) bytes[at] = data[at % width];
  return bytes;
}

/** Puts first bytes together, then second bytes, and so on: neighbouring exponents compress, mantissas do not. */
function shuffle(bytes: Uint8Array, width: Width): Uint8Array {
  if (width === 1) return bytes;
  const count = bytes.length / width;
  const shuffled = new Uint8Array(bytes.length);
  for (let byte = 0; byte < width; byte++) {
    for (let at = 0; at < count; at++) shuffled[byte * count + at] = bytes[at * width + byte];
  }
  return shuffled;
}

function unshuffle(shuffled: Uint8Array, width: Width): Uint8Array {
  if (width === 1) return shuffled;
  const count = shuffled.length / width;
  const bytes = new Uint8Array(shuffled.length);
  for (let byte = 0; byte < width; byte++) {
    for (let at = 0; at < count; at++) bytes[at * width + byte] = shuffled[byte * count + at];
  }
  return bytes;
}
