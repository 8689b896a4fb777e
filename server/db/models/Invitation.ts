import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A one-time link: the first set-up, or a person's first password. Only the hash of its secret is kept. */
export class Invitation extends Model<InferAttributes<Invitation>, InferCreationAttributes<Invitation>> {
  declare id: CreationOptional<number>;
  /** SHA-256, 32 bytes. */
  declare tokenHash: Buffer;
  declare purpose: "set-up" | "invitation";
  /** Who is invited; null for the first set-up. */
  declare userId: CreationOptional<number | null>;
  declare projectId: CreationOptional<number | null>;
  declare createdById: CreationOptional<number | null>;
  declare createdAt: number;
  /** Milliseconds since 1970. */
  declare expiresAt: number;
  declare usedAt: CreationOptional<number | null>;

  static initialise(sequelize: Sequelize): void {
    Invitation.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        tokenHash: { type: DataTypes.BLOB, allowNull: false },
        purpose: { type: DataTypes.STRING, allowNull: false },
        userId: { type: DataTypes.INTEGER, allowNull: true },
        projectId: { type: DataTypes.INTEGER, allowNull: true },
        createdById: { type: DataTypes.INTEGER, allowNull: true },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
        expiresAt: { type: DataTypes.INTEGER, allowNull: false },
        usedAt: { type: DataTypes.INTEGER, allowNull: true },
      },
      { sequelize, tableName: "invitations", timestamps: false },
    );
  }
}
