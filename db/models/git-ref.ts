import { DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { database } from "../connect.ts";

/** Where a branch stands. It moves by compare-and-swap only. */
export class GitRef extends Model<InferAttributes<GitRef>, InferCreationAttributes<GitRef>> {
  declare teamId: string;
  declare setId: string;
  /** In full: `refs/heads/main`. */
  declare name: string;
  declare oid: string;
}

GitRef.init(
  {
    teamId: { type: DataTypes.UUID, primaryKey: true },
    setId: { type: DataTypes.UUID, primaryKey: true },
    name: { type: DataTypes.TEXT, primaryKey: true },
    oid: { type: DataTypes.TEXT, allowNull: false },
  },
  { sequelize: database, tableName: "git_refs", underscored: true, timestamps: false },
);
