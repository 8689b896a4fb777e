/**
 * A reader of RFC 4180 that knows nothing of the writer: records end with CRLF, a quoted field may hold commas, line
 * ends and doubled quotes, and nothing may stand beside the quotes of a field.
 * @throws where the text is not such a table.
 */
export function parseCsv(text: string): string[][] {
  const records: string[][] = [];
  let record: string[] = [];
  let field = "";
  let state: "start" | "plain" | "quoted" | "closed" = "start";
  const endField = () => {
    record.push(field);
    field = "";
    state = "start";
  };
  for (let at = 0; at < text.length; at++) {
    const character = text[at];
    if (state === "quoted") {
      if (character !== '"') field += character;
      else if (text[at + 1] === '"') field += text[++at];
      else state = "closed";
    } else if (character === ",") {
      endField();
    } else if (character === "\r" && text[at + 1] === "\n") {
      endField();
      records.push(record);
      record = [];
      at += 1;
    } else if (character === '"' && state === "start") {
      state = "quoted";
    } else if (state === "closed" || character === '"' || character === "\r" || character === "\n") {
      throw new Error(`a stray character ${JSON.stringify(character)} at ${at}`);
    } else {
      field += character;
      state = "plain";
    }
  }
  if (record.length > 0 || field !== "" || state !== "start") throw new Error("the last record does not end");
  return records;
}

/** Records by the names of the header. @throws where a record has another number of fields. */
export function parseTable(text: string): Record<string, string>[] {
  const [header = [], ...records] = parseCsv(text);
  return records.map((record, at) => {
    if (record.length !== header.length) throw new Error(`record ${at} has ${record.length} fields`);
    return Object.fromEntries(header.map((name, column) => [name, record[column]]));
  });
}
