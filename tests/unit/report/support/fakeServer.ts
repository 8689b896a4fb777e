import { createServer } from "node:http";
import type { IncomingHttpHeaders } from "node:http";
import type { AddressInfo } from "node:net";
import { gunzipSync } from "node:zlib";
import type { PostedBuild } from "../../../../shared/schemas/build.ts";

export interface Received {
  readonly method: string;
  readonly url: string;
  readonly headers: IncomingHttpHeaders;
  /** As sent. */
  readonly bytes: Buffer;
  /** Decompressed and parsed. */
  readonly document: Record<string, unknown> | null;
}

export interface Reply {
  readonly status: number;
  readonly body?: unknown;
  readonly headers?: Readonly<Record<string, string>>;
  /** Cuts the connection instead of answering. */
  readonly cut?: boolean;
}

export interface FakeServer {
  readonly url: string;
  readonly received: Received[];
  close(): Promise<void>;
}

/** A real HTTP server that answers as told, by the number of the request. */
export async function fakeServer(answer: (request: Received, at: number) => Reply): Promise<FakeServer> {
  const received: Received[] = [];
  const server = createServer((request, response) => {
    const chunks: Buffer[] = [];
    request.on("data", (chunk: Buffer) => chunks.push(chunk));
    request.on("end", () => {
      const bytes = Buffer.concat(chunks);
      const plain = request.headers["content-encoding"] === "gzip" ? gunzipSync(bytes) : bytes;
      const document = plain.length > 0 ? (JSON.parse(plain.toString()) as Record<string, unknown>) : null;
      const one = { method: request.method!, url: request.url!, headers: request.headers, bytes, document };
      const reply = answer(one, received.length);
      received.push(one);
      if (reply.cut) {
        request.socket.destroy();
        return;
      }
      const type = reply.status < 400 ? "application/json" : "application/problem+json";
      response.writeHead(reply.status, { "Content-Type": type, ...reply.headers });
      response.end(reply.body === undefined ? "" : JSON.stringify(reply.body));
    });
  });
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    received,
    close: () =>
      new Promise((resolve) => {
        server.closeAllConnections();
        server.close(() => resolve());
      }),
  };
}

export const SHA = "a".repeat(40);

/** An answer to a posting that passes; the parts given stand above it. */
export function posted(parts: {
  readonly build?: Partial<PostedBuild["build"]>;
  readonly gate?: Partial<PostedBuild["gate"]>;
  readonly breaks?: PostedBuild["breaks"];
  readonly summary?: Partial<PostedBuild["summary"]>;
}): PostedBuild {
  const url = "http://clinograph.example/projects/hull/builds/12";
  return {
    build: { id: "12", url, state: "complete", lane: "gcc", commit: SHA, ...parts.build },
    summary: {
      blocks: 2,
      entries: 12,
      agrees: 11,
      disagrees: 0,
      unresolved: 1,
      unreferenced: 0,
      invalid: 0,
      carried: 0,
      probes: { agrees: 0, disagrees: 0, unresolved: 0, invalid: 0 },
      ...parts.summary,
    },
    gate: { decision: "pass", lane: "gcc", commit: SHA, base: null, reasons: [], url, ...parts.gate },
    breaks: parts.breaks ?? [],
  };
}
