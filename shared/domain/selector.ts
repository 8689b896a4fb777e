/** Names blocks by glob: `*` stands for any run of characters, `?` for one. A missing field matches all. */
export interface Selector {
  readonly model?: string | undefined;
  readonly output?: string | undefined;
  readonly input?: string | undefined;
  readonly point?: string | undefined;
  readonly lane?: string | undefined;
  /** Names probes, as "<kind>: <label>"; a selector with it covers no Jacobian. */
  readonly probe?: string | undefined;
  /** Zero-based rows and columns; missing = all. */
  readonly rows?: readonly number[] | undefined;
  readonly columns?: readonly number[] | undefined;
}

/** The Jacobian that a block is, or is a probe of: what a selector is matched against. */
export interface JacobianName {
  readonly model: string;
  readonly output: string;
  readonly input: string;
  readonly point: string;
}

export interface BlockName extends JacobianName {
  /** Empty for the Jacobian itself; else the probe of it, as "<kind>: <label>". */
  readonly probe: string;
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
export function blockKey({ model, point, output, input, probe }: BlockName): string {
  return JSON.stringify([model, point, output, input, probe]);
}

/** The same text for a Jacobian and all its probes. */
export function jacobianKey({ model, point, output, input }: JacobianName): string {
  return JSON.stringify([model, point, output, input]);
}

/**
 * True where the selector's name fields and lane cover the block; which rows and columns it takes is not looked at, but
 * they are those of the Jacobian: a selector with some of them covers no probe that it does not name.
 */
export function selects(
  selector: Selector,
  block: JacobianName & { readonly probe?: string | undefined },
  lane: string,
): boolean {
  const covers = (glob: string | undefined, name: string) => glob === undefined || globToRegExp(glob).test(name);
  return (
    covers(selector.model, block.model) &&
    covers(selector.output, block.output) &&
    covers(selector.input, block.input) &&
    covers(selector.point, block.point) &&
    covers(selector.lane, lane) &&
    coversProbe(selector, block.probe ?? "")
  );
}

function coversProbe({ probe, rows, columns }: Selector, name: string): boolean {
  if (probe !== undefined) return name !== "" && globToRegExp(probe).test(name);
  return name === "" || (rows === undefined && columns === undefined);
}
