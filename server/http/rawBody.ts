import express from "express";
import type { Request, Response } from "express";
import type { z } from "zod";
import { UnsupportedMedia } from "./problem.ts";

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
 * Reads whole bodies of at most `maxBytes` as sent.
 * @throws UnsupportedMedia for another content type or encoding; body-parser's error when it is too large.
 */
export function rawBodyReader(maxBytes: number): BodyReader<RawContent> {
  const read = express.raw({ inflate: true, limit: maxBytes, type: () => true });
  return async (request, response) => {
    requireJson(request);
    const encoding = (request.headers["content-encoding"] ?? "identity").trim().toLowerCase();
    if (encoding !== "identity" && encoding !== "gzip") {
      throw new UnsupportedMedia(`The Content-Encoding ${encoding} is not one that this address takes.`, {
        "Accept-Encoding": "gzip, identity",
      });
    }
    // To the parser the body is as it is: what is compressed stays so.
    delete request.headers["content-encoding"];
    await new Promise<void>((resolve, reject) => read(request, response, (e?: unknown) => (e ? reject(e) : resolve())));
    const bytes = Buffer.isBuffer(request.body) ? request.body : Buffer.alloc(0);
    return { bytes, encoding };
  };
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
