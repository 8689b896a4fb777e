import type { Sequelize } from "sequelize";
import { Block } from "./Block.ts";
import { Break } from "./Break.ts";
import { Build } from "./Build.ts";
import { Comment } from "./Comment.ts";
import { Commit } from "./Commit.ts";
import { Lane } from "./Lane.ts";
import { Shard } from "./Shard.ts";
import { Snapshot } from "./Snapshot.ts";
import { Waiver } from "./Waiver.ts";
import { WantedBuild } from "./WantedBuild.ts";

const MODELS = [Block, Break, Build, Comment, Commit, Lane, Shard, Snapshot, Waiver, WantedBuild];

/** Binds every model to the open database. */
export function initialiseModels(sequelize: Sequelize): void {
  for (const model of MODELS) model.initialise(sequelize);
}
