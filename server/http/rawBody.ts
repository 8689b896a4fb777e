import { setImmediate } from "node:timers/promises";
import type { Request, Response } from "express";
import type { z } from "zod";
import { MalformedRequest, PayloadTooLarge, UnsupportedMedia } from "./problem.ts";

/** A body that the handler decodes itself, off the event loop; the schema is for the document. */
export interface RawBody {
  readonly kind: "raw";
  readonly describedBy: z.ZodType;
}

/** The body as sent: still compressed where `encoding` says so. */
export interface RawContent {
  readonly bytes: Buffer;
  readonly encoding: "identity" | "gzip";
}

export function raw(options: { readonly describedBy: z.ZodType }): RawBody {
  return { kind: "raw", describedBy: options.describedBy };
}

export type BodyReader<T> = (request: Request, response: Response) => Promise<T>;

/**
 * Reads whole bodies of at most `maxBytes` as sent, into memory of their own that can be handed to another thread. A
 * body that tells its length is read into its place at once: a parser that gathers pieces and joins them holds a large
 * body twice.
 * @throws UnsupportedMedia for another content type or encoding; PayloadTooLarge; MalformedRequest when it ends early.
 */
export function rawBodyReader(maxBytes: number): BodyReader<RawContent> {
  return async (request) => {
    requireJson(request);
    const encoding = (request.headers["content-encoding"] ?? "identity").trim().toLowerCase();
    if (encoding !== "identity" && encoding !== "gzip") {
      throw new UnsupportedMedia(`The Content-Encoding ${encoding} is not one that this address takes.`, {
        "Accept-Encoding": "gzip, identity",
      });
    }
    return { bytes: await readBytes(request, maxBytes), encoding };
  };
}

const FIRST_GUESS = 64 * 1024;
const PAUSE_BYTES = 256 * 1024;

async function readBytes(request: Request, maxBytes: number): Promise<Buffer> {
  const told = request.headers["content-length"];
  const length = told === undefined ? null : Number(told);
  if (length !== null && length > maxBytes) throw tooLarge(maxBytes);
  let bytes = new Uint8Array(length ?? FIRST_GUESS);
  let size = 0;
  let pausedAt = 0;
  try {
    // Leaving the loop must not end the connection: the refusal has to arrive, so the rest is let in and dropped.
    for await (const chunk of request.iterator({ destroyOnReturn: false }) as AsyncIterable<Buffer>) {
      if (size + chunk.length > maxBytes) throw tooLarge(maxBytes);
      if (size + chunk.length > bytes.length) bytes = enlarged(bytes, size + chunk.length);
      bytes.set(chunk, size);
      size += chunk.length;
      // A fast line would keep the loop to itself: every now and then the others come first.
      if (size - pausedAt >= PAUSE_BYTES) {
        pausedAt = size;
        await setImmediate();
      }
    }
  } catch (error) {
    request.resume();
    throw error instanceof PayloadTooLarge ? error : new MalformedRequest("The body ended before it was whole.");
  }
  return Buffer.from(size === bytes.length ? bytes.buffer : bytes.slice(0, size).buffer);
}

function enlarged(bytes: Uint8Array, needed: number): Uint8Array<ArrayBuffer> {
  const larger = new Uint8Array(Math.max(needed, 2 * bytes.length));
  larger.set(bytes);
  return larger;
}

function tooLarge(maxBytes: number): PayloadTooLarge {
  return new PayloadTooLarge(`The body is larger than ${maxBytes} bytes.`);
}

/** JSON is UTF-8 (RFC 8259): another charset would be read wrongly. */
export function requireJson(request: Request): void {
  const [type, ...parameters] = (request.headers["content-type"] ?? "").toLowerCase().split(";");
  const charset = parameters.map((p) => p.trim()).find((p) => p.startsWith("charset="));
  const utf8 = charset === undefined || /^charset="?utf-8"?$/.test(charset);
  if (type?.trim() !== "application/json" || !utf8) {
    throw new UnsupportedMedia("The Content-Type must be application/json, in UTF-8.", { Accept: "application/json" });
  }
}
