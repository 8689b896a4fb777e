import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** An API token of a project. Only its hash is kept. */
export class Token extends Model<InferAttributes<Token>, InferCreationAttributes<Token>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare name: string;
  /** First characters, by which people tell tokens apart. */
  declare prefix: string;
  /** SHA-256, 32 bytes. */
  declare hash: Buffer;
  /** JSON: Scope[]. */
  declare scopes: string;
  declare createdById: CreationOptional<number | null>;
  declare createdAt: number;
  /** To the minute. */
  declare lastUsedAt: CreationOptional<number | null>;
  /** Milliseconds since 1970. */
  declare expiresAt: CreationOptional<number | null>;
  declare revokedAt: CreationOptional<number | null>;

  static initialise(sequelize: Sequelize): void {
    Token.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        name: { type: DataTypes.STRING, allowNull: false },
        prefix: { type: DataTypes.STRING, allowNull: false },
        hash: { type: DataTypes.BLOB, allowNull: false },
        scopes: { type: DataTypes.STRING, allowNull: false },
        createdById: { type: DataTypes.INTEGER, allowNull: true },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        lastUsedAt: { type: DataTypes.INTEGER, allowNull: true },
        expiresAt: { type: DataTypes.INTEGER, allowNull: true },
        revokedAt: { type: DataTypes.INTEGER, allowNull: true },
      },
      { sequelize, tableName: "tokens", timestamps: false },
    );
  }
}
