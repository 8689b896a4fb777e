import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";
import type { Motion } from "../../../shared/domain/vocabulary.ts";
import type { OnsetKind } from "../../../shared/history/types.ts";

/** A set of entries of a lane that stopped agreeing at the same commit. */
export class Break extends Model<InferAttributes<Break>, InferCreationAttributes<Break>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare laneId: number;
  /** Running number within the project. */
  declare number: number;
  declare state: "open" | "repaired";
  declare kind: OnsetKind;
  declare onset: string;
  declare onsetBuildId: number;
  declare lastGood: CreationOptional<string | null>;
  declare lastGoodBuildId: CreationOptional<number | null>;
  declare repairedBy: CreationOptional<string | null>;
  declare repairedByBuildId: CreationOptional<number | null>;
  /** JSON: StoredTrace, suspects with scores and the next test. */
  declare trace: string;
  /** JSON: string[]. */
  declare models: string;
  declare entryCount: number;
  /** JSON: StoredWorst, the entry to show first, at the onset. */
  declare worst: string;
  declare motion: CreationOptional<Motion | null>;
  declare assigneeId: CreationOptional<number | null>;
  declare createdAt: number;
  /** The break that a later build showed this one to be part of. */
  declare supersededById: CreationOptional<number | null>;
  /** Set when a later build showed that there is no such break. */
  declare withdrawnAt: CreationOptional<number | null>;

  static initialise(sequelize: Sequelize): void {
    Break.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        laneId: { type: DataTypes.INTEGER, allowNull: false },
        number: { type: DataTypes.INTEGER, allowNull: false },
        state: { type: DataTypes.STRING, allowNull: false },
        kind: { type: DataTypes.STRING, allowNull: false },
        onset: { type: DataTypes.STRING, allowNull: false },
        onsetBuildId: { type: DataTypes.INTEGER, allowNull: false },
        lastGood: { type: DataTypes.STRING, allowNull: true },
        lastGoodBuildId: { type: DataTypes.INTEGER, allowNull: true },
        repairedBy: { type: DataTypes.STRING, allowNull: true },
        repairedByBuildId: { type: DataTypes.INTEGER, allowNull: true },
        trace: { type: DataTypes.TEXT, allowNull: false },
        models: { type: DataTypes.TEXT, allowNull: false },
        entryCount: { type: DataTypes.INTEGER, allowNull: false },
        worst: { type: DataTypes.TEXT, allowNull: false },
        motion: { type: DataTypes.STRING, allowNull: true },
        assigneeId: { type: DataTypes.INTEGER, allowNull: true },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        supersededById: { type: DataTypes.INTEGER, allowNull: true },
        withdrawnAt: { type: DataTypes.INTEGER, allowNull: true },
      },
      { sequelize, tableName: "breaks", timestamps: false },
    );
  }
}
