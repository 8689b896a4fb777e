import { isAscii, isUtf8 } from "node:buffer";
import { findJsonFault } from "./findJsonFault.ts";
import { RejectedPosting } from "./rejection.ts";

/**
 * Parses UTF-8 JSON.
 * @throws RejectedPosting with line and column, and a hint where NaN or Infinity was written bare.
 */
export function parseJson(bytes: Uint8Array): unknown {
  const text = decodeText(bytes);
  try {
    return JSON.parse(text) as unknown;
  } catch {
    throw malformed(explain(text));
  }
}

/**
 * Text of UTF-8 bytes. Documents are nearly always ASCII, which is read several times faster. A byte order mark is
 * passed over.
 * @throws RejectedPosting
 */
function decodeText(bytes: Uint8Array): string {
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (isAscii(buffer)) return buffer.toString("latin1");
  if (!isUtf8(buffer)) throw malformed("The body is not UTF-8.");
  const text = buffer.toString("utf8");
  return text.charCodeAt(0) === 0xfeff ? text.slice(1) : text;
}

function malformed(detail: string): RejectedPosting {
  return new RejectedPosting({ kind: "malformed-json", detail });
}

const BARE_WORD = /-?(?:NaN|Infinity)\b/y;

function explain(text: string): string {
  if (text.trim() === "") return "The body is empty.";
  const fault = findJsonFault(text);
  // The minus of -Infinity might begin a number: only the letter after it is a fault.
  const begin = text[fault - 1] === "-" ? fault - 1 : fault;
  BARE_WORD.lastIndex = begin;
  const word = BARE_WORD.exec(text)?.[0];
  const where = `The body is not JSON: ${placeOf(text, word === undefined ? fault : begin)}`;
  if (fault >= text.length) return `${where}: it ends too early.`;
  if (word !== undefined) return `${where}: ${word} is no JSON number; send it as the string "${word}".`;
  return `${where}: unexpected ${JSON.stringify(text[fault])}.`;
}

function placeOf(text: string, offset: number): string {
  const before = text.slice(0, offset);
  const line = (before.match(/\n/g)?.length ?? 0) + 1;
  return `line ${line}, column ${offset - (before.lastIndexOf("\n") + 1) + 1}`;
}
