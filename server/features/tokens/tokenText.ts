import { createHash, randomInt } from "node:crypto";
import { crc32 } from "node:zlib";

const ALPHABET = "0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz";
const PREFIX = "clg_";
/** 30 of 62 letters are 178 random bits. */
const RANDOM_LETTERS = 30;
/** Six letters hold 32 bits. */
const CHECK_LETTERS = 6;
const SHAPE = new RegExp(`^${PREFIX}[0-9A-Za-z]{${RANDOM_LETTERS + CHECK_LETTERS}}$`);

function checksum(random: string): string {
  let rest = crc32(random);
  let letters = "";
  for (let i = 0; i < CHECK_LETTERS; i++) {
    letters = (ALPHABET[rest % ALPHABET.length] as string) + letters;
    rest = Math.floor(rest / ALPHABET.length);
  }
  return letters;
}

/** A new token: a prefix that secret scanners can look for, random letters, and a checksum that finds typing mistakes. */
export function newTokenText(): string {
  const random = Array.from({ length: RANDOM_LETTERS }, () => ALPHABET[randomInt(ALPHABET.length)]).join("");
  return `${PREFIX}${random}${checksum(random)}`;
}

/** False for what cannot be a token of ours, without a look into the database. */
export function isTokenText(text: string): boolean {
  if (!SHAPE.test(text)) return false;
  const random = text.slice(PREFIX.length, PREFIX.length + RANDOM_LETTERS);
  return text.endsWith(checksum(random));
}

/** What people tell tokens apart by: 4 + 6 characters. */
export function shownPrefix(text: string): string {
  return text.slice(0, PREFIX.length + 6);
}

/** Secrets of enough random bits need no slow hash. */
export function hashSecret(text: string): Buffer {
  return createHash("sha256").update(text).digest();
}
