/** What was posted contradicts what is recorded (HTTP 409), or cannot be part of it (422). */
export class RecordConflict extends Error {
  readonly kind: "conflict" | "invalid" | "too-large";
  readonly pointer: string;

  constructor(kind: RecordConflict["kind"], detail: string, pointer = "#") {
    super(detail);
    this.kind = kind;
    this.pointer = pointer;
  }
}
