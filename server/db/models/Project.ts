import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";
import { DEFAULT_CHECK_LIMIT } from "../../../shared/domain/limits.ts";

/** A code base. */
export class Project extends Model<InferAttributes<Project>, InferCreationAttributes<Project>> {
  declare id: CreationOptional<number>;
  /** Its name in addresses. */
  declare slug: string;
  declare name: string;
  declare defaultBranch: string;
  /** Address of a commit, with `{sha}` in it. */
  declare commitUrl: CreationOptional<string | null>;
  /** JSON: Partial<GatePolicy>, over the defaults. */
  declare policy: CreationOptional<string>;
  /** JSON: Partial<Tolerances>, over the defaults. */
  declare tolerances: CreationOptional<string>;
  /** JSON: ToleranceRule[], for some of the blocks. */
  declare toleranceRules: CreationOptional<string>;
  /** Builds after which an entry that was not checked again counts as unreferenced. */
  declare checkLimit: CreationOptional<number>;
  declare createdAt: number;

  static initialise(sequelize: Sequelize): void {
    Project.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        slug: { type: DataTypes.STRING, allowNull: false },
        name: { type: DataTypes.STRING, allowNull: false },
        defaultBranch: { type: DataTypes.STRING, allowNull: false },
        commitUrl: { type: DataTypes.STRING, allowNull: true },
        policy: { type: DataTypes.TEXT, allowNull: false, defaultValue: "{}" },
        tolerances: { type: DataTypes.TEXT, allowNull: false, defaultValue: "{}" },
        toleranceRules: { type: DataTypes.TEXT, allowNull: false, defaultValue: "[]" },
        checkLimit: { type: DataTypes.INTEGER, allowNull: false, defaultValue: DEFAULT_CHECK_LIMIT },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "projects", timestamps: false },
    );
  }
}
