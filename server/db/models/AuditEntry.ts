import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** Who did what, when; written in the transaction of the deed. */
export class AuditEntry extends Model<InferAttributes<AuditEntry>, InferCreationAttributes<AuditEntry>> {
  declare id: CreationOptional<number>;
  /** Milliseconds since 1970. */
  declare at: number;
  declare actorKind: "person" | "token" | "system";
  declare actorId: CreationOptional<number | null>;
  /** As it was then. */
  declare actorName: string;
  declare projectId: CreationOptional<number | null>;
  declare action: string;
  /** What it was done to, in words. */
  declare target: string;
  /** JSON object. */
  declare detail: CreationOptional<string>;

  static initialise(sequelize: Sequelize): void {
    AuditEntry.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        at: { type: DataTypes.INTEGER, allowNull: false },
        actorKind: { type: DataTypes.STRING, allowNull: false },
        actorId: { type: DataTypes.INTEGER, allowNull: true },
        actorName: { type: DataTypes.STRING, allowNull: false },
        projectId: { type: DataTypes.INTEGER, allowNull: true },
        action: { type: DataTypes.STRING, allowNull: false },
        target: { type: DataTypes.STRING, allowNull: false },
        detail: { type: DataTypes.TEXT, allowNull: false, defaultValue: "{}" },
      },
      { sequelize, tableName: "audit_entries", timestamps: false },
    );
  }
}
