import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";
import type { BuildState } from "../../../shared/domain/vocabulary.ts";

/** One posting for one commit in one lane, possibly in shards. */
export class Build extends Model<InferAttributes<Build>, InferCreationAttributes<Build>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare laneId: number;
  declare commitId: number;
  declare runId: string;
  declare runUrl: CreationOptional<string | null>;
  declare startedAt: CreationOptional<number | null>;
  declare finishedAt: CreationOptional<number | null>;
  declare state: BuildState;
  declare shardCount: number;
  /** JSON: number[], shards that had not come when the build was closed. */
  declare missingShards: CreationOptional<string>;
  declare createdAt: number;
  declare completedAt: CreationOptional<number | null>;
  /** Build of the nearest judged ancestor, that motion is told against. */
  declare baselineBuildId: CreationOptional<number | null>;
  /** JSON: BuildSummary, of complete builds. */
  declare summary: CreationOptional<string | null>;

  static initialise(sequelize: Sequelize): void {
    Build.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        laneId: { type: DataTypes.INTEGER, allowNull: false },
        commitId: { type: DataTypes.INTEGER, allowNull: false },
        runId: { type: DataTypes.STRING, allowNull: false },
        runUrl: { type: DataTypes.STRING, allowNull: true },
        startedAt: { type: DataTypes.INTEGER, allowNull: true },
        finishedAt: { type: DataTypes.INTEGER, allowNull: true },
        state: { type: DataTypes.STRING, allowNull: false },
        shardCount: { type: DataTypes.INTEGER, allowNull: false },
        missingShards: { type: DataTypes.TEXT, allowNull: false, defaultValue: "[]" },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        completedAt: { type: DataTypes.INTEGER, allowNull: true },
        baselineBuildId: { type: DataTypes.INTEGER, allowNull: true },
        summary: { type: DataTypes.TEXT, allowNull: true },
      },
      { sequelize, tableName: "builds", timestamps: false },
    );
  }
}
