import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** One received posting of a build. */
export class Shard extends Model<InferAttributes<Shard>, InferCreationAttributes<Shard>> {
  declare id: CreationOptional<number>;
  declare buildId: number;
  declare position: number;
  /** SHA-256 of the body as decoded. */
  declare bodyHash: Buffer;
  declare bytes: number;
  declare receivedAt: number;
  /** JSON of the answer, deflated, for retries; null until it was given. */
  declare answer: CreationOptional<Buffer | null>;

  static initialise(sequelize: Sequelize): void {
    Shard.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        buildId: { type: DataTypes.INTEGER, allowNull: false },
        position: { type: DataTypes.INTEGER, allowNull: false },
        bodyHash: { type: DataTypes.BLOB, allowNull: false },
        bytes: { type: DataTypes.INTEGER, allowNull: false },
        receivedAt: { type: DataTypes.INTEGER, allowNull: false },
        answer: { type: DataTypes.BLOB, allowNull: true },
      },
      { sequelize, tableName: "shards", timestamps: false },
    );
  }
}
