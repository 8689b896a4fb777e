import type { ServerResponse } from "node:http";
import { pipeline } from "node:stream/promises";
import type { StreamedReply } from "./reply.ts";

/**
 * Sends chunks no faster than the other side reads them; where it goes away, no more are made. A failure before the
 * first chunk is thrown like any other; a later one cuts the connection as well, so that half an answer is not taken
 * for a whole one.
 */
export async function sendStream(response: ServerResponse, reply: StreamedReply): Promise<void> {
  const source = reply.chunks[Symbol.asyncIterator]();
  const first = await source.next();
  response.setHeader("Cache-Control", "no-store");
  for (const [name, value] of Object.entries(reply.headers)) response.setHeader(name, value);
  response.setHeader("Content-Type", reply.contentType);
  const failure: { error?: unknown } = {};
  try {
    await pipeline(told(first, source, failure), response);
  } catch {
    // Whatever is no failure of ours is the other side's leaving.
    if ("error" in failure) throw failure.error;
  }
}

async function* told(
  first: IteratorResult<string>,
  source: AsyncIterator<string>,
  failure: { error?: unknown },
): AsyncGenerator<string> {
  try {
    for (let next = first; next.done !== true; next = await source.next()) yield next.value;
  } catch (error) {
    failure.error = error;
    throw error;
  } finally {
    await source.return?.();
  }
}
