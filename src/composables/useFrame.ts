import { inject, provide } from "vue";
import type { ComputedRef, InjectionKey } from "vue";
import type { Project } from "../../shared/schemas/project.ts";
import type { Strip, StripColumn } from "../../shared/schemas/commit.ts";

/** What the frame of a project knows and its pages speak of. */
export interface Frame {
  readonly project: ComputedRef<Project>;
  readonly lane: ComputedRef<string | null>;
  readonly strip: ComputedRef<Strip | undefined>;
  /** The commit under the cursor. */
  readonly column: ComputedRef<StripColumn | null>;
}
const FRAME: InjectionKey<Frame> = Symbol("frame");

export const provideFrame = (frame: Frame) => provide(FRAME, frame);

export function useFrame(): Frame {
  const frame = inject(FRAME);
  if (!frame) throw new Error("This page must stand in the frame of a project.");
  return frame;
}
