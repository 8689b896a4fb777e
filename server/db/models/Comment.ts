import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** What a person said of a break. */
export class Comment extends Model<InferAttributes<Comment>, InferCreationAttributes<Comment>> {
  declare id: CreationOptional<number>;
  declare breakId: number;
  declare authorId: number;
  declare body: string;
  declare createdAt: number;

  static initialise(sequelize: Sequelize): void {
    Comment.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        breakId: { type: DataTypes.INTEGER, allowNull: false },
        authorId: { type: DataTypes.INTEGER, allowNull: false },
        body: { type: DataTypes.TEXT, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "comments", timestamps: false },
    );
  }
}
