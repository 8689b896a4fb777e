import { isBadVerdict, VERDICT_CODE } from "../domain/vocabulary.ts";
import type { EntryClass, Test } from "./types.ts";

const UNTESTED = 0;
const GOOD = 1;
const BAD = 2;
const TEST_OF: readonly (Test | null)[] = [null, "good", "bad"];

/** Lowest bit of each byte of a 32-bit word. */
const LOW_BITS = 0x01010101;

/**
 * Splits the entries of one block that were ever bad into classes with the same answer in every plane; entries that
 * never were bad are in no class. Classes come by their first entry, entries ascending.
 *
 * `planes`: the block's distinct verdict planes, one byte an entry (codes of VERDICT_CODE), all of one length.
 * `agrees` is good, `disagrees` and `invalid` are bad, all else does not test. Cost: one pass of four entries a step
 * over all planes, then O(ever-bad entries x planes).
 * @throws RangeError where planes differ in length.
 */
export function partitionEntries(planes: readonly Uint8Array[]): EntryClass[] {
  const size = planes[0]?.length ?? 0;
  for (const plane of planes) {
    if (plane.length !== size) throw new RangeError(`planes: lengths ${size} and ${plane.length} differ`);
  }
  const entries = everBad(planes, size);
  const classOf = new Int32Array(entries.length);
  let classes = entries.length > 0 ? 1 : 0;
  for (const plane of planes) classes = refine(classOf, classes, entries, plane);
  const members: number[][] = Array.from({ length: classes }, () => []);
  entries.forEach((entry, at) => members[classOf[at]!]!.push(entry));
  return members.map((list) => ({
    entries: Uint32Array.from(list),
    tests: planes.map((plane) => TEST_OF[answer(plane[list[0]!]!)]!),
  }));
}

function answer(code: number): number {
  if (code === VERDICT_CODE.agrees) return GOOD;
  return isBadVerdict(code) ? BAD : UNTESTED;
}

/** Splits classes by one more plane and numbers them by first entry again; answers with the new count. */
function refine(classOf: Int32Array, classes: number, entries: Uint32Array, plane: Uint8Array): number {
  const renamed = new Int32Array(classes * 3).fill(-1);
  let count = 0;
  for (let at = 0; at < entries.length; at++) {
    const key = classOf[at]! * 3 + answer(plane[entries[at]!]!);
    if (renamed[key] === -1) renamed[key] = count++;
    classOf[at] = renamed[key]!;
  }
  return count;
}

/** Indices, ascending, of the entries that are bad in any plane. */
function everBad(planes: readonly Uint8Array[], size: number): Uint32Array {
  const words = new Uint32Array(Math.ceil(size / 4));
  for (const plane of planes) {
    const whole = size >>> 2;
    const view = plane.byteOffset % 4 === 0 ? plane : plane.slice();
    const codes = new Uint32Array(view.buffer, view.byteOffset, whole);
    for (let at = 0; at < whole; at++) words[at]! |= badBytes(codes[at]!);
    for (let entry = whole * 4; entry < size; entry++) {
      if (answer(plane[entry]!) === BAD) words[whole]! |= 1 << (entry % 4);
    }
  }
  const found: number[] = [];
  words.forEach((word, at) => {
    if (word === 0) return;
    const end = Math.min(size, at * 4 + 4);
    for (let entry = at * 4; entry < end; entry++) {
      if (planes.some((plane) => answer(plane[entry]!) === BAD)) found.push(entry);
    }
  });
  return Uint32Array.from(found);
}

/**
 * Not 0 where one of four codes is bad. Of the codes 0..4 the bad ones, 1 and 4, are those with bit 2 set or with
 * bit 0 set and bit 1 clear; a test compares this with the vocabulary.
 */
function badBytes(codes: number): number {
  return ((codes >>> 2) | (codes & ~(codes >>> 1))) & LOW_BITS;
}
