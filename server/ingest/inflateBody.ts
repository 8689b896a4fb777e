import { gunzipSync } from "node:zlib";
import { RejectedPosting } from "./rejection.ts";

/**
 * The body as sent, or what it holds gzipped, never more than `maxBytes` of it.
 * @throws RejectedPosting when it is larger, or is no gzip.
 */
export function inflateBody(body: Uint8Array, encoding: "identity" | "gzip", maxBytes: number): Uint8Array {
  if (encoding === "gzip") return gunzipped(body, maxBytes);
  if (body.byteLength > maxBytes) throw tooLarge(maxBytes);
  return body;
}

function gunzipped(body: Uint8Array, maxBytes: number): Uint8Array {
  try {
    return gunzipSync(body, { maxOutputLength: maxBytes });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === "ERR_BUFFER_TOO_LARGE") throw tooLarge(maxBytes);
    throw new RejectedPosting({ kind: "malformed-encoding", detail: "The body is not a whole gzip stream." });
  }
}

function tooLarge(maxBytes: number): RejectedPosting {
  return new RejectedPosting({ kind: "too-large", detail: `The decoded body is larger than ${maxBytes} bytes.` });
}
