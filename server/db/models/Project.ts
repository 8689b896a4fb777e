import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

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
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "projects", timestamps: false },
    );
  }
}
