/** Names blocks by glob: `*` stands for any run of characters, `?` for one. A missing field matches all. */
export interface Selector {
  readonly model?: string | undefined;
  readonly output?: string | undefined;
  readonly input?: string | undefined;
  readonly point?: string | undefined;
  readonly lane?: string | undefined;
  /** Zero-based rows and columns; missing = all. */
  readonly rows?: readonly number[] | undefined;
  readonly columns?: readonly number[] | undefined;
}

/** What a selector is matched against. */
export interface BlockName {
  readonly model: string;
  readonly output: string;
  readonly input: string;
  readonly point: string;
}

/** Compiles a glob to an anchored regular expression; every other character stands for itself. */
export function globToRegExp(glob: string): RegExp {
  const body = glob
    .replace(/[.+^${}()|[\]\\]/g, "\\$&")
    .replace(/\*/g, ".*")
    .replace(/\?/g, ".");
  return new RegExp(`^${body}$`, "u");
}

/** True where the selector covers the entry, in a block that it selects. */
export function selectsEntry({ rows, columns }: Selector, row: number, column: number): boolean {
  return (rows?.includes(row) ?? true) && (columns?.includes(column) ?? true);
}

/** The same text for the same block, another for any other. */
export function blockKey({ model, point, output, input }: BlockName): string {
  return JSON.stringify([model, point, output, input]);
}

/** True where the selector's name fields and lane cover the block (rows and columns are not looked at). */
export function selects(selector: Selector, block: BlockName, lane: string): boolean {
  const covers = (glob: string | undefined, name: string) => glob === undefined || globToRegExp(glob).test(name);
  return (
    covers(selector.model, block.model) &&
    covers(selector.output, block.output) &&
    covers(selector.input, block.input) &&
    covers(selector.point, block.point) &&
    covers(selector.lane, lane)
  );
}
