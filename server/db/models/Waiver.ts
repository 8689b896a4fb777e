import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";
import type { WaiverState } from "../../../shared/domain/vocabulary.ts";

/** An accepted disagreement with a reason, a bound and an end date. */
export class Waiver extends Model<InferAttributes<Waiver>, InferCreationAttributes<Waiver>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare state: WaiverState;
  /** JSON: Selector. */
  declare selector: string;
  declare reason: string;
  /** Largest relative error accepted. */
  declare maxError: number;
  /** Milliseconds since 1970. */
  declare expiresAt: number;
  declare askedById: CreationOptional<number | null>;
  declare askedAt: number;
  declare decidedById: CreationOptional<number | null>;
  declare decidedAt: CreationOptional<number | null>;

  static initialise(sequelize: Sequelize): void {
    Waiver.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        state: { type: DataTypes.STRING, allowNull: false },
        selector: { type: DataTypes.TEXT, allowNull: false },
        reason: { type: DataTypes.TEXT, allowNull: false },
        maxError: { type: DataTypes.DOUBLE, allowNull: false },
        expiresAt: { type: DataTypes.INTEGER, allowNull: false },
        askedById: { type: DataTypes.INTEGER, allowNull: true },
        askedAt: { type: DataTypes.INTEGER, allowNull: false },
        decidedById: { type: DataTypes.INTEGER, allowNull: true },
        decidedAt: { type: DataTypes.INTEGER, allowNull: true },
      },
      { sequelize, tableName: "waivers", timestamps: false },
    );
  }
}
