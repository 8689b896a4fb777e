import { createHash } from "node:crypto";
import { deflateRawSync, inflateRawSync } from "node:zlib";
import { TILE_ENTRIES } from "../../shared/domain/limits.ts";

/** Bytes of a number in a plane: binary64, binary32 or one byte. */
export type Width = 8 | 4 | 1;

/** How a stored tile is written; the number is in the database. */
export const RAW = 0;
const SHUFFLED_DEFLATED = 1;
const CONSTANT = 2;

/** A hash as a key of maps. */
export function hashKey(hash: Uint8Array): string {
  return asBuffer(hash).toString("latin1");
}

export interface EncodedTile {
  /** SHA-256 of the width and the plain bytes, so that it does not depend on the encoding. */
  readonly hash: Buffer;
  readonly encoding: number;
  readonly data: Buffer;
}

/** Tiles are deflated only where a sample shrinks below this share: full mantissas shrink by a tenth for much work. */
const WORTH_DEFLATING = 0.75;
/** One tile of so many is a sample. */
const SAMPLE_EVERY = 32;

/**
 * Cuts a plane's bytes into encoded tiles of 4,096 entries. Raw tiles are views of the plane; tiles that are `known`
 * by their hash are not encoded again and carry no data.
 */
export function encodePlane(bytes: Uint8Array, width: Width, known: (hash: Buffer) => boolean): EncodedTile[] {
  const size = TILE_ENTRIES * width;
  const count = Math.ceil(bytes.length / size);
  let deflate: boolean | null = width === 1 ? true : null;
  return Array.from({ length: count }, (_, at) => {
    const part = bytes.subarray(at * size, (at + 1) * size);
    const hash = createHash("sha256").update(Uint8Array.of(width)).update(part).digest();
    if (known(hash)) return { hash, encoding: RAW, data: NOTHING };
    if (isConstant(part, width)) return { hash, encoding: CONSTANT, data: constant(part, width) };
    // The first tile of a plane that has to be stored, and every 32nd after it, tells whether deflating is worth it.
    if (width > 1 && (deflate === null || at % SAMPLE_EVERY === 0)) deflate = shrinks(part, width);
    const data = deflate ? deflateRawSync(shuffle(part, width), { level: 1 }) : part;
    const smaller = data.length < part.length;
    return { hash, encoding: smaller ? SHUFFLED_DEFLATED : RAW, data: asBuffer(smaller ? data : part) };
  });
}

const NOTHING = Buffer.alloc(0);

function asBuffer(part: Uint8Array): Buffer {
  return Buffer.from(part.buffer, part.byteOffset, part.byteLength);
}

function shrinks(part: Uint8Array, width: Width): boolean {
  return deflateRawSync(shuffle(part, width), { level: 1 }).length < WORTH_DEFLATING * part.length;
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
export function decodeTile(encoding: number, data: Uint8Array, width: Width): Uint8Array {
  if (encoding === RAW) return data;
  if (encoding === SHUFFLED_DEFLATED) return unshuffle(inflateRawSync(data), width);
  if (encoding !== CONSTANT) throw new RangeError(`encoding: ${encoding} is not known`);
  const bytes = new Uint8Array(asBuffer(data).readUInt32LE(width) * width);
  for (let at = 0; at < bytes.length; at++) bytes[at] = data[at % width];
  return bytes;
}

/** The bytes of one number of a stored tile, without putting the whole tile in order. */
export function oneOfTile(encoding: number, data: Uint8Array, width: Width, index: number): Uint8Array {
  if (encoding === CONSTANT) return data.subarray(0, width);
  if (encoding !== SHUFFLED_DEFLATED || width === 1) {
    return decodeTile(encoding, data, width).subarray(index * width, (index + 1) * width);
  }
  const shuffled = inflateRawSync(data);
  const count = shuffled.length / width;
  return Uint8Array.from({ length: width }, (_, byte) => shuffled[byte * count + index]);
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
