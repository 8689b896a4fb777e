import { CAUTION } from "../../../shared/domain/vocabulary.ts";
import type { ExportDocument, ExportKind } from "../../../shared/schemas/export.ts";
import { EXPORT_KINDS } from "../../../shared/schemas/export.ts";
import { csvLine } from "./csv.ts";
import { cellsOf, headerOf } from "./tables.ts";
import type { ExportedRows } from "./tables.ts";

/** Rows of each kind, page by page; nothing is read before it is asked for. */
export type ExportPages = { readonly [K in ExportKind]: () => AsyncIterable<ExportedRows[K][]> };
export type ExportHead = Pick<ExportDocument, "project" | "lane" | "from" | "to">;

/** One table as text: the header, then a chunk for each page. */
export async function* csvChunks<K extends ExportKind>(pages: ExportPages, kind: K): AsyncGenerator<string> {
  yield csvLine(headerOf(kind));
  let first = true;
  for await (const rows of pages[kind]()) {
    yield rows.map((row, at) => csvLine(cellsOf(kind, row, first && at === 0))).join("");
    first = false;
  }
}

/** One JSON document as text, its sections in the order of their kinds: a chunk for each page. */
export async function* jsonChunks(
  head: ExportHead,
  pages: ExportPages,
  kinds: readonly ExportKind[] = EXPORT_KINDS,
): AsyncGenerator<string> {
  const { project, lane, from, to } = head;
  const told = JSON.stringify({ format: "clinograph.export/1", project, lane, from, to, caution: CAUTION });
  yield told.slice(0, -1);
  for (const kind of kinds) {
    yield `,\n"${kind}":[`;
    let separator = "\n";
    for await (const rows of pages[kind]()) {
      yield separator + rows.map((row) => JSON.stringify(row)).join(",\n");
      separator = ",\n";
    }
    yield "]";
  }
  yield "}\n";
}
