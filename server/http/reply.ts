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
