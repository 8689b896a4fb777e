/** Limits that are part of the contract; those an operator may change have their defaults here too. */
export const DEFAULT_LIMITS = {
  /** Bytes of one posting as sent. */
  wireBytes: 64 * 1024 * 1024,
  /** Bytes of one posting after decompression. */
  decodedBytes: 256 * 1024 * 1024,
  /** Entries (rows x columns, summed over blocks) of one build. */
  entries: 4_000_000,
  /** Blocks of one build. */
  blocks: 20_000,
} as const;
export type Limits = { [K in keyof typeof DEFAULT_LIMITS]: number };

/** Entries in one stored tile of a plane. */
export const TILE_ENTRIES = 4096;
/** Largest window of a block answered as JSON arrays; larger ones need `format=f64le` or a window. */
export const JSON_ENTRY_LIMIT = 250_000;
/** References and steps of one block that the source planes can name. */
export const MAX_REFERENCES = 32;
export const MAX_SWEEP_STEPS = 64;
/** Probes of one block. */
export const MAX_PROBES = 1000;
/** Builds after which an entry that was not checked again counts as unreferenced; a project may set its own. */
export const DEFAULT_CHECK_LIMIT = 20;
/** Ages are kept in one byte, of which the last value means "never checked". */
export const MAX_CHECK_LIMIT = 250;
/** Problems listed in one 422 answer. */
export const MAX_LISTED_ERRORS = 50;
export const PAGE_LIMIT = { default: 50, max: 500 } as const;
