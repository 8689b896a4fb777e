import { DataTypes, Model } from "sequelize";
import type { InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A session that was signed out before its time; its cookie, wherever a copy of it is, opens nothing any more. */
export class EndedSession extends Model<InferAttributes<EndedSession>, InferCreationAttributes<EndedSession>> {
  declare sessionId: string;
  /** Milliseconds since 1970; afterwards the row has no use. */
  declare expiresAt: number;

  static initialise(sequelize: Sequelize): void {
    EndedSession.init(
      {
        sessionId: { type: DataTypes.STRING, primaryKey: true },
        expiresAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "ended_sessions", timestamps: false },
    );
  }
}
