import { DataTypes, type InferAttributes, type InferCreationAttributes, Model } from "sequelize";
import { database } from "../connect.ts";

/** A git object of a model set. It is named by its content and never rewritten. */
export class GitObject extends Model<InferAttributes<GitObject>, InferCreationAttributes<GitObject>> {
  declare teamId: string;
  declare setId: string;
  /** SHA-1 of what `content` unpacks to, in hexadecimal. */
  declare oid: string;
  declare type: "blob" | "tree" | "commit" | "tag";
  /** Bytes of the body. */
  declare size: number;
  /** The loose object as git stores it: zlib over `type size NUL body`. */
  declare content: Buffer;
}

GitObject.init(
  {
    teamId: { type: DataTypes.UUID, primaryKey: true },
    setId: { type: DataTypes.UUID, primaryKey: true },
    oid: { type: DataTypes.TEXT, primaryKey: true },
    type: { type: DataTypes.TEXT, allowNull: false },
    size: { type: DataTypes.INTEGER, allowNull: false },
    content: { type: DataTypes.BLOB, allowNull: false },
  },
  { sequelize: database, tableName: "git_objects", underscored: true, timestamps: false },
);
