import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** The Jacobian of one output with respect to one input of a model, at one point, or a probe of it. */
export class Block extends Model<InferAttributes<Block>, InferCreationAttributes<Block>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare model: string;
  declare point: string;
  declare output: string;
  declare input: string;
  /** Empty for the Jacobian itself; else the probe of it that this is, as "<kind>: <label>". */
  declare probe: CreationOptional<string>;

  static initialise(sequelize: Sequelize): void {
    Block.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        model: { type: DataTypes.STRING, allowNull: false },
        point: { type: DataTypes.STRING, allowNull: false },
        output: { type: DataTypes.STRING, allowNull: false },
        input: { type: DataTypes.STRING, allowNull: false },
        probe: { type: DataTypes.STRING, allowNull: false, defaultValue: "" },
      },
      { sequelize, tableName: "blocks", timestamps: false },
    );
  }
}
