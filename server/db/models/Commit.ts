import { DataTypes, Model } from "sequelize";
import type { CreationOptional, InferAttributes, InferCreationAttributes, Sequelize } from "sequelize";

/** A commit as postings told it; the graph is in commit_parents. */
export class Commit extends Model<InferAttributes<Commit>, InferCreationAttributes<Commit>> {
  declare id: CreationOptional<number>;
  declare projectId: number;
  declare sha: string;
  declare subject: CreationOptional<string | null>;
  declare authorName: CreationOptional<string | null>;
  declare authorEmail: CreationOptional<string | null>;
  /** Milliseconds since 1970, like every time in the record. */
  declare committedAt: CreationOptional<number | null>;
  /** JSON: string[]. */
  declare changedPaths: CreationOptional<string | null>;

  static initialise(sequelize: Sequelize): void {
    Commit.init(
      {
        id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
        projectId: { type: DataTypes.INTEGER, allowNull: false },
        sha: { type: DataTypes.STRING, allowNull: false },
        subject: { type: DataTypes.STRING, allowNull: true },
        authorName: { type: DataTypes.STRING, allowNull: true },
        authorEmail: { type: DataTypes.STRING, allowNull: true },
        committedAt: { type: DataTypes.INTEGER, allowNull: true },
        changedPaths: { type: DataTypes.TEXT, allowNull: true },
      },
      { sequelize, tableName: "commits", timestamps: false },
    );
  }
}
