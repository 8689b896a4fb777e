import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A block's judged numbers, content-addressed: what counts and worst entry say follows from them. */
export class Snapshot extends Model<InferAttributes<Snapshot>, InferCreationAttributes<Snapshot>> {
  declare id: CreationOptional<number>;
  declare hash: Buffer;
  declare rowCount: number;
  declare columnCount: number;
  /** See server/ingest/planeList.ts. */
  declare planes: Buffer;
  declare rtol: number;
  declare floor: number;
  declare agrees: number;
  declare disagrees: number;
  declare unresolved: number;
  declare unreferenced: number;
  declare invalid: number;
  /** JSON of the entry to show first. */
  declare worst: CreationOptional<string | null>;
  /** JSON: number[], entries per bin of the resolution curve; see server/ingest/resolutionBins.ts. */
  declare resolutions: string;

  static initialise(sequelize: Sequelize): void {
    Snapshot.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        hash: { type: DataTypes.BLOB, allowNull: false },
        rowCount: { type: DataTypes.INTEGER, allowNull: false },
        columnCount: { type: DataTypes.INTEGER, allowNull: false },
        planes: { type: DataTypes.BLOB, allowNull: false },
        rtol: { type: DataTypes.DOUBLE, allowNull: false },
        floor: { type: DataTypes.DOUBLE, allowNull: false },
        agrees: { type: DataTypes.INTEGER, allowNull: false },
        disagrees: { type: DataTypes.INTEGER, allowNull: false },
        unresolved: { type: DataTypes.INTEGER, allowNull: false },
        unreferenced: { type: DataTypes.INTEGER, allowNull: false },
        invalid: { type: DataTypes.INTEGER, allowNull: false },
        worst: { type: DataTypes.TEXT, allowNull: true },
        resolutions: { type: DataTypes.TEXT, allowNull: false },
      },
      { sequelize, tableName: "snapshots", timestamps: false },
    );
  }
}
