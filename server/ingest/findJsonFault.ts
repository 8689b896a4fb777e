/**
 * Offset of the first character at which no JSON text could go on, or the length of the text where it only ends too
 * early. For texts that a parser refused: engines tell the place in words that change, or not at all.
 * Source: RFC 8259, sections 2 to 7.
 */
export function findJsonFault(text: string): number {
  /** Closing brackets of what is open, innermost last. */
  const open: string[] = [];
  let at = skipSpace(text, 0);
  let expected: "value" | "first item" | "name" | "first name" | "colon" | "more" = "value";
  for (;;) {
    const character = text[at];
    if (character === undefined) return text.length;
    const closes = open.at(-1);
    if (expected === "more" && closes === undefined) return at;
    if (character === closes && ["more", "first item", "first name"].includes(expected)) {
      open.pop();
      expected = "more";
      at += 1;
    } else if (expected === "more") {
      if (character !== ",") return at;
      expected = closes === "}" ? "name" : "value";
      at += 1;
    } else if (expected === "colon") {
      if (character !== ":") return at;
      expected = "value";
      at += 1;
    } else if (expected === "name" || expected === "first name") {
      if (character !== '"') return at;
      const scalar = scanString(text, at);
      if (!scalar.whole) return scalar.end;
      at = scalar.end;
      expected = "colon";
    } else if (character === "{" || character === "[") {
      open.push(character === "{" ? "}" : "]");
      expected = character === "{" ? "first name" : "first item";
      at += 1;
    } else {
      const scalar = character === '"' ? scanString(text, at) : scanWord(text, at);
      if (!scalar.whole) return scalar.end;
      at = scalar.end;
      expected = "more";
    }
    at = skipSpace(text, at);
  }
}

/** Where a string, number or word ends; not `whole`: where it cannot go on. */
interface Scalar {
  readonly end: number;
  readonly whole: boolean;
}

const SPACES = /[ \t\r\n]*/y;
const ESCAPE = /\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4})/y;
const BEGUN_ESCAPE = /\\(?:u[0-9a-fA-F]{0,3})?/y;
const NUMBER = /-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?/y;
const BEGUN_NUMBER = /-?(?:(?:0|[1-9]\d*)(?:\.\d*)?(?:(?<=\d)[eE][+-]?\d*)?)?/y;

function endOf(pattern: RegExp, text: string, at: number): number {
  pattern.lastIndex = at;
  return pattern.test(text) ? pattern.lastIndex : at;
}

function skipSpace(text: string, at: number): number {
  return endOf(SPACES, text, at);
}

function scanString(text: string, start: number): Scalar {
  let at = start + 1;
  while (at < text.length) {
    const code = text.charCodeAt(at);
    if (code === QUOTE) return { end: at + 1, whole: true };
    if (code < 0x20) return { end: at, whole: false };
    if (code !== BACKSLASH) {
      at += 1;
      continue;
    }
    const end = endOf(ESCAPE, text, at);
    if (end === at) return { end: endOf(BEGUN_ESCAPE, text, at), whole: false };
    at = end;
  }
  return { end: at, whole: false };
}

const QUOTE = 0x22;
const BACKSLASH = 0x5c;

function scanWord(text: string, at: number): Scalar {
  const word = ["true", "false", "null"].find((one) => one[0] === text[at]);
  if (word === undefined) {
    const end = endOf(BEGUN_NUMBER, text, at);
    return { end, whole: end > at && endOf(NUMBER, text, at) === end };
  }
  let same = 1;
  while (same < word.length && text[at + same] === word[same]) same += 1;
  return { end: at + same, whole: same === word.length };
}
