import { useQuery } from "@pinia/colada";
import type { StepStudyAnswer } from "../../shared/schemas/steps.ts";
import { MAX_STUDIED_COLUMNS } from "../../shared/schemas/steps.ts";
import { client } from "../api/client.ts";
import { keys } from "./keys.ts";
import { projectPath } from "./projects.ts";

export interface StudyWanted {
  readonly build: string;
  readonly block: string;
  readonly reference: number;
  /** Columns are studied by windows: this one's is asked for. */
  readonly column: number;
  readonly columns: number;
}

/** The study of one reference, for the window of columns that holds the one wanted; null: nothing is asked. */
export const useStepStudy = (project: () => string, wanted: () => StudyWanted | null) =>
  useQuery({
    key: () => {
      const { build, block, reference, column } = wanted() ?? { build: "", block: "", reference: 0, column: 0 };
      return keys.steps(project(), build, block, reference, Math.floor(column / MAX_STUDIED_COLUMNS));
    },
    enabled: () => wanted() !== null,
    placeholderData: (previous: StepStudyAnswer | undefined) => previous,
    query: ({ signal }) => {
      const { build, block, reference, column, columns } = wanted() as StudyWanted;
      const first = Math.floor(column / MAX_STUDIED_COLUMNS) * MAX_STUDIED_COLUMNS;
      const path = `${projectPath(project())}/builds/${encodeURIComponent(build)}/blocks/${encodeURIComponent(block)}/steps`;
      const window = `${first}:${Math.min(columns, first + MAX_STUDIED_COLUMNS)}`;
      return client.get<StepStudyAnswer>(path, { query: { reference, columns: window }, signal });
    },
  });
