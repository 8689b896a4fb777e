import type { Complaints, Path } from "./complaints.ts";
import { readNumber } from "./readNumber.ts";
import type { NumberRule } from "./readNumber.ts";

/** Reads numbers or `{"f64le": base64}` into an array of `length`; what is wrong goes to `complaints`. */
export function decodeVector(
  posted: unknown,
  length: number,
  rule: NumberRule,
  path: Path,
  complaints: Complaints,
): Float64Array {
  if (typeof posted === "object" && posted !== null && !Array.isArray(posted)) {
    const sent = (posted as { f64le?: unknown }).f64le;
    if (Object.keys(posted).join() === "f64le") {
      const values = decodeBase64Numbers(sent, length, [...path, "f64le"], complaints);
      const bad = rule.finite ? values.findIndex((value) => !Number.isFinite(value)) : -1;
      if (bad >= 0) complaints.add(path, `number ${bad} must be finite`);
      return values;
    }
  }
  // Nothing of `length` is allocated before as many numbers are there: a size may be told of any magnitude.
  if (!Array.isArray(posted)) {
    complaints.add(path, 'must be an array of numbers or {"f64le": "..."}');
    return NOTHING;
  }
  if (posted.length !== length) {
    complaints.add(path, `has ${posted.length} numbers, expected ${length}`);
    return NOTHING;
  }
  const values = new Float64Array(length);
  for (let at = 0; at < length; at++) {
    const read = readNumber(posted[at], rule);
    if (read.wrong !== null) {
      complaints.add([...path, at], read.wrong);
      return values;
    }
    values[at] = read.value;
  }
  return values;
}

const NOTHING = new Float64Array(0);
const BASE64 = /^[A-Za-z0-9+/]*={0,2}$/;
const BYTES = Float64Array.BYTES_PER_ELEMENT;

/** Little-endian binary64 numbers from base64 (RFC 4648 section 4, padded), exactly `length` of them. */
export function decodeBase64Numbers(posted: unknown, length: number, path: Path, complaints: Complaints): Float64Array {
  if (typeof posted !== "string" || posted.length % 4 !== 0 || !BASE64.test(posted)) {
    complaints.add(path, "must be base64 with padding (RFC 4648) of little-endian binary64 numbers");
    return NOTHING;
  }
  const bytes = Buffer.from(posted, "base64");
  if (bytes.length !== length * BYTES) {
    complaints.add(path, `has ${bytes.length} bytes, expected ${length * BYTES} (${length} numbers of ${BYTES})`);
    return NOTHING;
  }
  const values = new Float64Array(length);
  // Every machine that Node.js runs on is little-endian, but a view must begin at a multiple of 8.
  new Uint8Array(values.buffer).set(bytes);
  return values;
}
