import { isAscii, isUtf8 } from "node:buffer";
import { RejectedPosting } from "./rejection.ts";

/**
 * Parses UTF-8 JSON.
 * @throws RejectedPosting with line and column, and a hint where NaN or Infinity was written bare.
 */
export function parseJson(bytes: Uint8Array): unknown {
  const text = decodeText(bytes);
  try {
    return JSON.parse(text) as unknown;
  } catch (error) {
    throw malformed(explain(text, (error as SyntaxError).message));
  }
}

/** Documents are nearly always ASCII, which is read several times faster. A byte order mark is passed over. */
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

const BARE_WORD = /^-?(NaN|Infinity)\b/;

function explain(text: string, message: string): string {
  if (text.trim() === "") return "The body is empty.";
  const position = positionIn(message, text);
  const before = text.slice(0, position);
  const line = (before.match(/\n/g)?.length ?? 0) + 1;
  const column = position - (before.lastIndexOf("\n") + 1) + 1;
  const where = `The body is not JSON: line ${line}, column ${column}`;
  if (position >= text.trimEnd().length) return `${where}: it ends too early.`;
  // A parser stops at the first letter it cannot use: at the N of NaN, or after the minus of -Infinity.
  const word = [position, position - 1].map((at) => BARE_WORD.exec(text.slice(Math.max(0, at), at + 12))).find(Boolean);
  if (word) return `${where}: ${word[0]} is no JSON number; send it as the string "${word[0]}".`;
  return `${where}: unexpected ${JSON.stringify(text.slice(position, position + 1))}.`;
}

/** V8 tells the position in its message, except at the end of the text and where it quotes the text instead. */
function positionIn(message: string, text: string): number {
  const told = /at position (\d+)/.exec(message);
  if (told) return Number(told[1]);
  return /end of JSON|Unterminated/.test(message) ? text.length : firstSurprise(text);
}

/** Where V8 only quotes a short text, the first place at which no prefix of JSON goes on: found by halving. */
function firstSurprise(text: string): number {
  let low = 0;
  let high = text.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (isPrefix(text.slice(0, middle + 1))) low = middle + 1;
    else high = middle;
  }
  return low;
}

function isPrefix(text: string): boolean {
  try {
    JSON.parse(text);
    return true;
  } catch (error) {
    return /end of JSON|Unterminated/.test((error as SyntaxError).message);
  }
}
