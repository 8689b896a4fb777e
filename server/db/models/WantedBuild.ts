import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A commit that somebody asked to be built in a lane. */
export class WantedBuild extends Model<InferAttributes<WantedBuild>, InferCreationAttributes<WantedBuild>> {
  declare id: CreationOptional<number>;
  declare laneId: number;
  declare sha: string;
  declare askedById: CreationOptional<number | null>;
  declare createdAt: number;

  static initialise(sequelize: Sequelize): void {
    WantedBuild.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        laneId: { type: DataTypes.INTEGER, allowNull: false },
        sha: { type: DataTypes.STRING, allowNull: false },
        askedById: { type: DataTypes.INTEGER, allowNull: true },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "wanted_builds", timestamps: false },
    );
  }
}
