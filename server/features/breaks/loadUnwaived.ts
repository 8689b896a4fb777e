import type { Reader } from "../../db/reader.ts";
import { loadBreaks } from "./loadBreaks.ts";
import type { LoadedBreak } from "./loadBreaks.ts";
import { loadActiveWaivers, loadWaived } from "./waived.ts";

/** The open breaks that nobody accepted: those that waivers do not cover as a whole. Newest first. */
export async function loadUnwaived(
  reader: Reader,
  projectId: number,
  lane: string | null,
  now: number,
): Promise<LoadedBreak[]> {
  const open = await loadBreaks(reader, projectId, { lane, state: "open" });
  const waived = await loadWaived(reader, open, await loadActiveWaivers(reader, projectId, now));
  return open.filter((one) => !waived.has(one.id));
}
