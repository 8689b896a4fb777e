import { mergeNodes } from "./mergeNodes.ts";
import { topologicalOrder } from "./topologicalOrder.ts";
import type { CommitNode } from "./types.ts";

/** Ancestor sets kept at hand: at 50,000 commits one takes 6 KB. */
const KEPT_ANCESTOR_SETS = 512;

/**
 * The commits that are known and their parents. Immutable and the same whatever order the nodes came in.
 *
 * Inside, a commit is its *place* in topological order (0 = oldest): parents always have smaller places, so that a
 * sweep over falling places meets every commit before its parents, and a search may stop below the smallest place it
 * looks for. Parents that were never told are left out of the edges and reported by `hasUnknownParents`.
 */
export class CommitGraph {
  /** Number of known commits. */
  readonly size: number;
  private readonly order: readonly string[];
  private readonly placeBySha: ReadonlyMap<string, number>;
  /** For sweeps over all edges: the parents of a place are parentPlaces[parentStart[place] .. parentStart[place + 1]). */
  readonly parentStart: Int32Array;
  readonly parentPlaces: Int32Array;
  private readonly childStart: Int32Array;
  private readonly childPlaces: Int32Array;
  private readonly cut: Uint8Array;
  private readonly ancestorSets = new Map<number, Uint32Array>();

  /**
   * Builds the graph; the same sha told twice is one commit. Cost O(n log n) time, O(n + edges) memory.
   * @throws CommitCycleError where the parents run in a circle.
   */
  static from(nodes: Iterable<CommitNode>): CommitGraph {
    const bySha = mergeNodes(nodes);
    return new CommitGraph(bySha, topologicalOrder(bySha));
  }

  private constructor(bySha: ReadonlyMap<string, CommitNode>, order: readonly string[]) {
    this.order = order;
    this.size = order.length;
    this.placeBySha = new Map(order.map((sha, place) => [sha, place]));
    this.cut = new Uint8Array(this.size);
    this.parentStart = new Int32Array(this.size + 1);
    const parentPlaces: number[] = [];
    const childCount = new Int32Array(this.size + 1);
    order.forEach((sha, place) => {
      for (const parent of bySha.get(sha)!.parents) {
        const parentPlace = this.placeBySha.get(parent);
        if (parentPlace === undefined) {
          this.cut[place] = 1;
        } else {
          parentPlaces.push(parentPlace);
          childCount[parentPlace]! += 1;
        }
      }
      this.parentStart[place + 1] = parentPlaces.length;
    });
    this.parentPlaces = Int32Array.from(parentPlaces);
    this.childStart = new Int32Array(this.size + 1);
    for (let place = 0; place < this.size; place++) {
      this.childStart[place + 1] = this.childStart[place]! + childCount[place]!;
    }
    const next = this.childStart.slice();
    this.childPlaces = new Int32Array(parentPlaces.length);
    for (let place = 0; place < this.size; place++) {
      for (const parent of this.parentsAt(place)) this.childPlaces[next[parent]!++] = place;
    }
  }

  has(sha: string): boolean {
    return this.placeBySha.has(sha);
  }

  /** Known parents, first parent first. @throws RangeError for a commit that is not known (so do all below). */
  parents(sha: string): string[] {
    return Array.from(this.parentsAt(this.placeOf(sha)), (place) => this.shaAt(place));
  }

  /** Known children, in topological order. */
  children(sha: string): string[] {
    return Array.from(this.childrenAt(this.placeOf(sha)), (place) => this.shaAt(place));
  }

  /** True where the commit has a parent that was never told (a shallow clone, history not yet posted). */
  hasUnknownParents(sha: string): boolean {
    return this.cutAt(this.placeOf(sha));
  }

  /** The commit and all its known ancestors, in topological order. */
  ancestors(sha: string): Set<string> {
    const bits = this.ancestorBits(this.placeOf(sha));
    const found = new Set<string>();
    for (let place = 0; place < bits.length * 32; place++) {
      if (bits[place >>> 5]! & (1 << (place & 31))) found.add(this.shaAt(place));
    }
    return found;
  }

  /** The commit and all its known descendants, in topological order. */
  descendants(sha: string): Set<string> {
    const from = this.placeOf(sha);
    const marks = this.descendantMarks(from);
    const found = new Set<string>();
    for (let place = from; place < this.size; place++) if (marks[place]) found.add(this.shaAt(place));
    return found;
  }

  /** True where `ancestor` is `descendant` or one of its ancestors. */
  isAncestor(ancestor: string, descendant: string): boolean {
    const place = this.placeOf(ancestor);
    const of = this.placeOf(descendant);
    if (place > of) return false;
    return (this.ancestorBits(of)[place >>> 5]! & (1 << (place & 31))) !== 0;
  }

  /** All commits, every parent before its children, oldest first; see `topologicalOrder` for ties. */
  topological(): string[] {
    return this.order.slice();
  }

  /** Place in topological order. @throws RangeError for a commit that is not known. */
  placeOf(sha: string): number {
    const place = this.placeBySha.get(sha);
    if (place === undefined) throw new RangeError(`commit ${sha} is not in the graph`);
    return place;
  }

  /** Place in topological order, or -1 for a commit that is not known. */
  findPlace(sha: string): number {
    return this.placeBySha.get(sha) ?? -1;
  }

  shaAt(place: number): string {
    return this.order[place]!;
  }

  parentsAt(place: number): Int32Array {
    return this.parentPlaces.subarray(this.parentStart[place], this.parentStart[place + 1]);
  }

  childrenAt(place: number): Int32Array {
    return this.childPlaces.subarray(this.childStart[place], this.childStart[place + 1]);
  }

  cutAt(place: number): boolean {
    return this.cut[place] === 1;
  }

  /**
   * Marks (1) the given places and their ancestors, down to place `floor`; the answer is indexed by place.
   * Cost O(highest given place - floor).
   */
  ancestorMarks(places: Iterable<number>, floor = 0): Uint8Array {
    const marks = new Uint8Array(this.size);
    let highest = -1;
    for (const place of places) {
      marks[place] = 1;
      if (place > highest) highest = place;
    }
    for (let place = highest; place > floor; place--) {
      if (!marks[place]) continue;
      for (let edge = this.parentStart[place]!; edge < this.parentStart[place + 1]!; edge++) {
        marks[this.parentPlaces[edge]!] = 1;
      }
    }
    return marks;
  }

  /** Marks (1) a place and its descendants; the answer is indexed by place. */
  descendantMarks(from: number): Uint8Array {
    const marks = new Uint8Array(this.size);
    marks[from] = 1;
    for (let place = from; place < this.size; place++) {
      if (!marks[place]) continue;
      for (let edge = this.childStart[place]!; edge < this.childStart[place + 1]!; edge++) {
        marks[this.childPlaces[edge]!] = 1;
      }
    }
    return marks;
  }

  /** Ancestors-or-self of a place as a bit set, made on demand; the least recently used sets are dropped. */
  private ancestorBits(place: number): Uint32Array {
    const kept = this.ancestorSets.get(place);
    if (kept) {
      this.ancestorSets.delete(place);
      this.ancestorSets.set(place, kept);
      return kept;
    }
    const marks = this.ancestorMarks([place]);
    const bits = new Uint32Array((place >>> 5) + 1);
    for (let at = 0; at <= place; at++) if (marks[at]) bits[at >>> 5]! |= 1 << (at & 31);
    this.ancestorSets.set(place, bits);
    if (this.ancestorSets.size > KEPT_ANCESTOR_SETS) {
      this.ancestorSets.delete(this.ancestorSets.keys().next().value!);
    }
    return bits;
  }
}
