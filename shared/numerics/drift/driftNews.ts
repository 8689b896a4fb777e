import type { DriftEventList, DriftEvents } from "./types.ts";

/** Events of one kind while a build is gone through. */
export interface NewsList {
  readonly entries: number[];
  readonly onsets: number[];
  readonly decades: number[];
}

export interface DriftNews {
  readonly climbs: NewsList;
  readonly jumps: NewsList;
  readonly ends: NewsList;
}

export function newDriftNews(): DriftNews {
  const list = (): NewsList => ({ entries: [], onsets: [], decades: [] });
  return { climbs: list(), jumps: list(), ends: list() };
}

export function tell(list: NewsList, entry: number, onset: number, decades: number): void {
  list.entries.push(entry);
  list.onsets.push(onset);
  list.decades.push(decades);
}

export function driftEventsOf(news: DriftNews): DriftEvents {
  return { climbs: packed(news.climbs), jumps: packed(news.jumps), ends: packed(news.ends) };
}

function packed(list: NewsList): DriftEventList {
  return {
    entries: Uint32Array.from(list.entries),
    onsets: Int32Array.from(list.onsets),
    decades: Float32Array.from(list.decades),
  };
}
