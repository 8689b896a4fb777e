import type { BaselineRow } from "../../../shared/schemas/baseline.ts";
import { CAUTION } from "../../../shared/domain/vocabulary.ts";
import { fromWire } from "../../../shared/schemas/common.ts";
import type { WireNumber } from "../../../shared/schemas/common.ts";
import type { ExportedBlock, ExportedBreak, ExportedWaiver, ExportKind } from "../../../shared/schemas/export.ts";
import type { Cell } from "./csv.ts";

/** The columns of a table: name and cell. */
type Table<Row> = readonly (readonly [name: string, cell: (row: Row) => Cell])[];

/** Rows of each kind, as JSON has them. */
export interface ExportedRows {
  readonly builds: ExportedBlock;
  readonly breaks: ExportedBreak;
  readonly waivers: ExportedWaiver;
  readonly baselines: BaselineRow;
}

/** NaN and infinities are words in JSON and numbers here; a number that is none is an empty cell. */
const number = (value: WireNumber | null | undefined): Cell =>
  value === null || value === undefined ? null : fromWire(value);
const words = (list: readonly (string | number)[]): Cell => (list.length === 0 ? null : list.join(" "));
const codes = (row: { readonly signatures: readonly { readonly code: string }[] }) =>
  words([...new Set(row.signatures.map(({ code }) => code))]);

const BUILDS: Table<ExportedBlock> = [
  ["commit", (row) => row.commit],
  ["committedAt", (row) => row.committedAt],
  ["receivedAt", (row) => row.receivedAt],
  ["lane", (row) => row.lane],
  ["buildId", (row) => row.buildId],
  ["runId", (row) => row.runId],
  ["speaks", (row) => row.speaks],
  ["blockId", (row) => row.blockId],
  ["model", (row) => row.model],
  ["output", (row) => row.output],
  ["input", (row) => row.input],
  ["point", (row) => row.point],
  ["probe", (row) => row.probe],
  ["rows", (row) => row.rows],
  ["columns", (row) => row.columns],
  ["entries", (row) => row.counts.entries],
  ["agrees", (row) => row.counts.agrees],
  ["disagrees", (row) => row.counts.disagrees],
  ["unresolved", (row) => row.counts.unresolved],
  ["unreferenced", (row) => row.counts.unreferenced],
  ["invalid", (row) => row.counts.invalid],
  ["carried", (row) => row.carried?.entries ?? null],
  ["oldest", (row) => row.carried?.oldest ?? null],
  ["worstRow", (row) => row.worst?.row ?? null],
  ["worstColumn", (row) => row.worst?.column ?? null],
  ["worstVerdict", (row) => row.worst?.verdict ?? null],
  ["worstError", (row) => number(row.worst?.error)],
  ["worstDerivative", (row) => number(row.worst?.derivative)],
  ["worstReference", (row) => number(row.worst?.reference)],
  ["worstUncertainty", (row) => number(row.worst?.uncertainty)],
  ["rtol", (row) => row.rtol],
  ["floor", (row) => number(row.floor)],
  ["resolution", (row) => number(row.resolution)],
  ["signatures", codes],
  ["still", (row) => row.motion?.still ?? null],
  ["together", (row) => row.motion?.together ?? null],
  ["derivativeOnly", (row) => row.motion?.["derivative-only"] ?? null],
  ["modelOnly", (row) => row.motion?.["model-only"] ?? null],
  ["apart", (row) => row.motion?.apart ?? null],
  ["breaks", (row) => words(row.breaks)],
];

const BREAKS: Table<ExportedBreak> = [
  ["number", (row) => row.number],
  ["id", (row) => row.id],
  ["state", (row) => row.state],
  ["lane", (row) => row.lane],
  ["onset", (row) => row.onset],
  ["onsetAt", (row) => row.onsetAt],
  ["onsetBuildId", (row) => row.onsetBuildId],
  ["lastGood", (row) => row.lastGood],
  ["repairedBy", (row) => row.repairedBy],
  ["kind", (row) => row.kind],
  ["models", (row) => words(row.models)],
  ["entries", (row) => row.entryCount],
  ["worstError", (row) => number(row.worstError)],
  ["motion", (row) => row.motion],
  ["signatures", codes],
  ["suspects", (row) => words(row.suspects)],
  ["assignee", (row) => row.assignee],
  ["comments", (row) => words(row.comments.map(({ author, at, body }) => `${author}, ${at}: ${body}`))],
];

const WAIVERS: Table<ExportedWaiver> = [
  ["id", (row) => row.id],
  ["state", (row) => row.state],
  ["selector", (row) => JSON.stringify(row.selector)],
  ["reason", (row) => row.reason],
  ["maxError", (row) => row.maxError],
  ["expiresAt", (row) => row.expiresAt],
  ["askedBy", (row) => row.askedBy],
  ["askedAt", (row) => row.askedAt],
  ["decidedBy", (row) => row.decidedBy],
  ["decidedAt", (row) => row.decidedAt],
];

const BASELINES: Table<BaselineRow> = [
  ["id", (row) => row.id],
  ["selector", (row) => JSON.stringify(row.selector)],
  ["commit", (row) => row.commit],
  ["reason", (row) => row.reason],
  ["acceptedBy", (row) => row.acceptedBy],
  ["acceptedAt", (row) => row.acceptedAt],
];

const TABLES: { readonly [K in ExportKind]: Table<ExportedRows[K]> } = {
  builds: BUILDS,
  breaks: BREAKS,
  waivers: WAIVERS,
  baselines: BASELINES,
};

export const headerOf = (kind: ExportKind): string[] => [...TABLES[kind].map(([name]) => name), "caution"];

/** The caution stands in the first row, so that it goes wherever the table goes and every row has as many cells. */
export function cellsOf<K extends ExportKind>(kind: K, row: ExportedRows[K], first: boolean): Cell[] {
  return [...TABLES[kind].map(([, cell]) => cell(row)), first ? CAUTION : null];
}
