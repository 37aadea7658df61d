import { DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { database } from "../connect.ts";

/** What the pages ask of a commit, beside the git object that is the commit. */
export class Commit extends Model<InferAttributes<Commit>, InferCreationAttributes<Commit>> {
  declare teamId: string;
  declare setId: string;
  declare oid: string;
  declare tree: string;
  declare parents: string[];
  /** 1 for a first commit, else one more than that of the first parent. */
  declare position: number;
  declare authorId: string | null;
  declare authorName: string;
  declare time: Date;
  declare message: string;
  /** Against the first parent. */
  declare changedPaths: string[];
  declare fileCount: number;
}

Commit.init(
  {
    teamId: { type: DataTypes.UUID, primaryKey: true },
    setId: { type: DataTypes.UUID, primaryKey: true },
    oid: { type: DataTypes.TEXT, primaryKey: true },
    tree: { type: DataTypes.TEXT, allowNull: false },
    parents: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
    position: { type: DataTypes.INTEGER, allowNull: false },
    authorId: DataTypes.UUID,
    authorName: { type: DataTypes.TEXT, allowNull: false },
    time: { type: DataTypes.DATE, allowNull: false },
    message: { type: DataTypes.TEXT, allowNull: false },
    changedPaths: { type: DataTypes.ARRAY(DataTypes.TEXT), allowNull: false },
    fileCount: { type: DataTypes.INTEGER, allowNull: false },
  },
  { sequelize: database, tableName: "commits", underscored: true, timestamps: false },
);
