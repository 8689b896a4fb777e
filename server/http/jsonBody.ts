import express from "express";
import { parseJson } from "../ingest/parseJson.ts";
import { requireJson } from "./rawBody.ts";
import type { BodyReader } from "./rawBody.ts";

/** Largest body of an ordinary request; builds have limits of their own. */
export const MAX_JSON_BYTES = 1024 * 1024;

/** Reads small JSON bodies, with the same words for what cannot be parsed as for a build. */
export function jsonBodyReader(maxBytes: number): BodyReader<unknown> {
  const read = express.raw({ limit: maxBytes, type: () => true });
  return async (request, response) => {
    requireJson(request);
    await new Promise<void>((resolve, reject) => read(request, response, (e?: unknown) => (e ? reject(e) : resolve())));
    return parseJson(Buffer.isBuffer(request.body) ? request.body : Buffer.alloc(0));
  };
}
