import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A level of error that a lead accepted as the one that drift is measured from. */
export class Baseline extends Model<InferAttributes<Baseline>, InferCreationAttributes<Baseline>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  /** JSON: Selector. */
  declare selector: string;
  declare sha: string;
  declare reason: string;
  declare acceptedById: number | null;
  declare acceptedAt: number;

  static initialise(sequelize: Sequelize): void {
    Baseline.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        selector: { type: DataTypes.TEXT, allowNull: false },
        sha: { type: DataTypes.STRING, allowNull: false },
        reason: { type: DataTypes.TEXT, allowNull: false },
        acceptedById: { type: DataTypes.INTEGER, allowNull: true },
        acceptedAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "baselines", timestamps: false },
    );
  }
}
