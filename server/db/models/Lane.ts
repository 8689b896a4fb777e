import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A configuration that is compared only with itself. */
export class Lane extends Model<InferAttributes<Lane>, InferCreationAttributes<Lane>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare name: string;
  /** True while builds of the lane are stored but not yet traced. */
  declare dirty: CreationOptional<boolean>;

  static initialise(sequelize: Sequelize): void {
    Lane.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        name: { type: DataTypes.STRING, allowNull: false },
        dirty: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      },
      { sequelize, tableName: "lanes", timestamps: false },
    );
  }
}
