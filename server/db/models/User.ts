import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A person who may sign in. Never removed: what they did stays told. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<number>;
  /** Lower-case. */
  declare email: string;
  declare name: string;
  /** Argon2id; null until an invitation is accepted. */
  declare passwordHash: CreationOptional<string | null>;
  declare admin: CreationOptional<boolean>;
  /** Raised to end every session of the person. */
  declare sessionVersion: CreationOptional<number>;
  /** Milliseconds since 1970. */
  declare disabledAt: CreationOptional<number | null>;
  declare createdAt: number;

  static initialise(sequelize: Sequelize): void {
    User.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        email: { type: DataTypes.STRING, allowNull: false },
        name: { type: DataTypes.STRING, allowNull: false },
        passwordHash: { type: DataTypes.STRING, allowNull: true },
        admin: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
        sessionVersion: { type: DataTypes.INTEGER, allowNull: false, defaultValue: 1 },
        disabledAt: { type: DataTypes.INTEGER, allowNull: true },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "users", timestamps: false },
    );
  }
}
