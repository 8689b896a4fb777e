import { createHash } from "node:crypto";
import type { Limits } from "../../shared/domain/limits.ts";
import { blockKey } from "../../shared/domain/selector.ts";
import type { BlockName } from "../../shared/domain/selector.ts";
import { tolerancesFor } from "../../shared/domain/tolerances.ts";
import type { ToleranceRule, Tolerances } from "../../shared/domain/tolerances.ts";
import type { Verdict } from "../../shared/domain/vocabulary.ts";
import type { WireNumber } from "../../shared/schemas/common.ts";
import type { BlockNumbers, VerdictCounts } from "../../shared/numerics/types.ts";
import { judgeBlock } from "../../shared/numerics/verdict/judgeBlock.ts";
import { costsOf, detailsOf, hashedDetails } from "./blockDetails.ts";
import { Complaints } from "./complaints.ts";
import { cutBlock } from "./cutBlock.ts";
import { decodeBlock } from "./decodeBlock.ts";
import { extractMatrices } from "./extractMatrices.ts";
import { inflateBody } from "./inflateBody.ts";
import { judgeProbes } from "./judgeProbes.ts";
import { parseJson } from "./parseJson.ts";
import type { PlaneTiles } from "./planes.ts";
import type { ResolutionBins } from "./resolutionBins.ts";
import { invalid, readSkeleton } from "./skeleton.ts";
import type { SkeletonBlock, SkeletonDocument } from "./skeleton.ts";
import { TileSet } from "./tileSet.ts";
import type { PackedTiles } from "./tileSet.ts";

export interface Posting {
  /** Taken out as soon as it is read, so that a large body is not held while its blocks are judged. */
  body: Uint8Array;
  readonly encoding: "identity" | "gzip";
  readonly limits: Limits;
  readonly tolerances: Tolerances;
  /** Other tolerances for some blocks. */
  readonly rules?: readonly ToleranceRule[];
}

/** A posting, decoded, checked and judged, ready to be stored. */
export interface JudgedPosting {
  readonly header: Omit<SkeletonDocument, "blocks">;
  /** SHA-256 of the decoded body. */
  readonly bodyHash: Uint8Array;
  readonly bytes: number;
  readonly blocks: readonly JudgedPostedBlock[];
  readonly tiles: PackedTiles;
}

export interface JudgedPostedBlock extends BlockName {
  readonly snapshot: PostedSnapshot;
  /** JSON of BlockDetails, and its SHA-256. */
  readonly details: string;
  readonly detailsHash: Uint8Array;
  /** JSON of BlockCosts, or null. */
  readonly costs: string | null;
}

/** The judged numbers of a block; planes are indices into the posting's tiles. */
export interface PostedSnapshot {
  readonly hash: Uint8Array;
  readonly rows: number;
  readonly columns: number;
  readonly planes: readonly PlaneTiles<number>[];
  readonly rtol: number;
  readonly floor: number;
  readonly counts: VerdictCounts;
  readonly worst: StoredWorst | null;
  readonly resolutions: ResolutionBins;
}

/** The entry to show first, as it stands in the record. */
export interface StoredWorst {
  readonly row: number;
  readonly column: number;
  readonly verdict: Verdict;
  readonly error: WireNumber | null;
  readonly derivative: WireNumber;
  readonly reference: WireNumber | null;
  readonly uncertainty: WireNumber | null;
}

/**
 * One posting from its bytes to judged blocks. Pure; runs in a worker. Blocks are decoded, judged and cut into tiles
 * one after another, and let go, so that the peak is one parsed document and its tiles.
 * @throws RejectedPosting with everything that is wrong with the document.
 */
export function judgePosting(posting: Posting): JudgedPosting {
  const { document, bodyHash, bytes } = takeDocument(posting);
  const complaints = new Complaints();
  const names = new Map<string, number>();
  const tiles = new TileSet();
  const judged: JudgedPostedBlock[] = [];
  document.blocks.forEach((block, at) => {
    const path = ["blocks", at];
    const name = nameOf(block);
    const twin = names.get(blockKey(name));
    if (twin !== undefined) complaints.add(path, `is the same block as number ${twin} of this document`);
    names.set(blockKey(name), at);
    const { numbers, outputValues } = decodeBlock(block, path, complaints);
    block.derivative.values = null;
    if (!complaints.any) {
      const tolerances = tolerancesFor(posting.tolerances, posting.rules ?? [], name, document.lane);
      if (numbers !== null) judged.push({ ...name, ...judgeAndCut(block, numbers, tolerances, tiles) });
      judged.push(...judgeProbes(block, name, outputValues, tolerances, tiles));
    }
    block.references = [];
  });
  if (complaints.any) throw invalid(complaints);
  const { format, commit, history, lane, run, shard } = document;
  const header = { format, commit, history, lane, run, shard };
  return { header, bodyHash, bytes, blocks: judged, tiles: tiles.pack() };
}

interface Document {
  readonly document: SkeletonDocument;
  readonly bodyHash: Uint8Array;
  readonly bytes: number;
}

/** Smaller bodies are parsed as a whole: that is quick enough, and one way less to go. */
const LARGE_BYTES = 1024 * 1024;

function takeDocument(posting: Posting): Document {
  const { parsed, ...told } = parseBody(posting);
  return { document: readSkeleton(parsed, posting.limits), ...told };
}

/** The body is let go when this returns, before anything is judged. */
function parseBody(posting: Posting): Omit<Document, "document"> & { readonly parsed: unknown } {
  const inflated = inflateBody(posting.body, posting.encoding, posting.limits.decodedBytes);
  posting.body = NOTHING;
  const bodyHash = createHash("sha256").update(inflated).digest();
  return { parsed: parseLarge(inflated, posting.limits.entries), bodyHash, bytes: inflated.byteLength };
}

function parseLarge(bytes: Uint8Array, mostNumbers: number): unknown {
  const buffer = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const extraction = bytes.length < LARGE_BYTES ? null : extractMatrices(buffer, mostNumbers);
  const parsed = extraction === null ? undefined : parsedOrUndefined(extraction.rest);
  // What is wrong with a document is told from the whole of it: its lines and columns are those of the sender.
  if (extraction === null || parsed === undefined) return parseJson(bytes);
  restoreMatrices(parsed, extraction.restore);
  return parsed;
}

function parsedOrUndefined(bytes: Buffer): unknown {
  try {
    return parseJson(bytes);
  } catch {
    return undefined;
  }
}

/** Puts the extracted matrices where the format has matrices; anywhere else their marks are refused as what they are. */
function restoreMatrices(parsed: unknown, restore: (value: unknown) => unknown): void {
  for (const block of listOf(parsed, "blocks")) {
    restoreIn((block as { derivative?: unknown } | null)?.derivative, restore);
    for (const reference of listOf(block, "references")) {
      restoreIn(reference, restore);
      for (const step of listOf(reference, "sweep")) restoreIn(step, restore);
    }
  }
}

function listOf(owner: unknown, name: string): unknown[] {
  const list = (owner as Record<string, unknown> | null | undefined)?.[name];
  return Array.isArray(list) ? list : [];
}

function restoreIn(owner: unknown, restore: (value: unknown) => unknown): void {
  if (typeof owner !== "object" || owner === null || !Object.hasOwn(owner, "values")) return;
  const holder = owner as { values: unknown };
  holder.values = restore(holder.values);
}

const NOTHING = new Uint8Array(0);

function nameOf({ model, point, output, input }: SkeletonBlock): BlockName {
  return { model, point, output: output.name, input: input.name, probe: "" };
}

function judgeAndCut(
  block: SkeletonBlock,
  numbers: BlockNumbers,
  tolerances: Tolerances,
  tiles: TileSet,
): Omit<JudgedPostedBlock, keyof BlockName> {
  const judged = judgeBlock(numbers, tolerances);
  const costs = costsOf(block);
  return {
    snapshot: cutBlock(numbers, judged, tiles),
    ...hashedDetails(detailsOf(block, numbers, judged)),
    costs: costs && JSON.stringify(costs),
  };
}
