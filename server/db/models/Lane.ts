import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A configuration that is compared only with itself. */
export class Lane extends Model<InferAttributes<Lane>, InferCreationAttributes<Lane>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare name: string;

  static initialise(sequelize: Sequelize): void {
    Lane.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        name: { type: DataTypes.STRING, allowNull: false },
      },
      { sequelize, tableName: "lanes", timestamps: false },
    );
  }
}
