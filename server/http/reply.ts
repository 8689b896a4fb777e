/** An answer whose status or headers are not those of the route. */
export class Reply {
  readonly status: number;
  readonly value: unknown;
  readonly headers: Readonly<Record<string, string>>;
  constructor(status: number, value: unknown, headers: Readonly<Record<string, string>>) {
    this.status = status;
    this.value = value;
    this.headers = headers;
  }
}

export function reply(status: number, value: unknown, headers: Readonly<Record<string, string>> = {}): Reply {
  return new Reply(status, value, headers);
}

/** An answer that is sent while it is made, so that its size does not matter. */
export class StreamedReply {
  readonly contentType: string;
  readonly chunks: AsyncIterable<string>;
  readonly headers: Readonly<Record<string, string>>;
  constructor(contentType: string, chunks: AsyncIterable<string>, headers: Readonly<Record<string, string>>) {
    this.contentType = contentType;
    this.chunks = chunks;
    this.headers = headers;
  }
}

export function streamed(
  contentType: string,
  chunks: AsyncIterable<string>,
  headers: Readonly<Record<string, string>> = {},
): StreamedReply {
  return new StreamedReply(contentType, chunks, headers);
}
