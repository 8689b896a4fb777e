import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";
import type { Role } from "../../../shared/domain/roles.ts";

/** What a person is in a project. */
export class Membership extends Model<InferAttributes<Membership>, InferCreationAttributes<Membership>> {
  declare id: CreationOptional<number>;
  declare userId: number;
  declare projectId: number;
  declare role: Role;
  declare createdAt: number;

  static initialise(sequelize: Sequelize): void {
    Membership.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        userId: { type: DataTypes.INTEGER, allowNull: false },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        role: { type: DataTypes.STRING, allowNull: false },
        createdAt: { type: DataTypes.INTEGER, allowNull: false },
      },
      { sequelize, tableName: "memberships", timestamps: false },
    );
  }
}
