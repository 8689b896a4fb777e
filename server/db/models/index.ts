import type { Sequelize } from "sequelize";
import { AuditEntry } from "./AuditEntry.ts";
import { Baseline } from "./Baseline.ts";
import { Block } from "./Block.ts";
import { Break } from "./Break.ts";
import { Build } from "./Build.ts";
import { Comment } from "./Comment.ts";
import { Commit } from "./Commit.ts";
import { EndedSession } from "./EndedSession.ts";
import { Invitation } from "./Invitation.ts";
import { Lane } from "./Lane.ts";
import { Membership } from "./Membership.ts";
import { Project } from "./Project.ts";
import { Shard } from "./Shard.ts";
import { Snapshot } from "./Snapshot.ts";
import { Token } from "./Token.ts";
import { User } from "./User.ts";
import { Waiver } from "./Waiver.ts";
import { WantedBuild } from "./WantedBuild.ts";

const MODELS = [
  AuditEntry,
  Baseline,
  Block,
  Break,
  Build,
  Comment,
  Commit,
  EndedSession,
  Invitation,
  Lane,
  Membership,
  Project,
  Shard,
  Snapshot,
  Token,
  User,
  Waiver,
  WantedBuild,
];

/** Binds every model to the open database. */
export function initialiseModels(sequelize: Sequelize): void {
  for (const model of MODELS) model.initialise(sequelize);
}
