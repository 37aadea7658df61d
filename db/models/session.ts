import {
  type CreationOptional,
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type NonAttribute,
} from "sequelize";
import { database } from "../connect.ts";
import type { User } from "./user.ts";

/** A signed-in browser. The token itself is kept only by that browser. */
export class Session extends Model<InferAttributes<Session>, InferCreationAttributes<Session>> {
  /** SHA-256 of the token, in hexadecimal. */
  declare id: string;
  declare userId: string;
  declare userAgent: CreationOptional<string>;
  declare createdAt: CreationOptional<Date>;
  declare lastSeenAt: CreationOptional<Date>;
  declare expiresAt: Date;
  declare revokedAt: CreationOptional<Date | null>;
  /** There when the query asked for it. */
  declare user?: NonAttribute<User>;
}

Session.init(
  {
    id: { type: DataTypes.TEXT, primaryKey: true },
    userId: { type: DataTypes.UUID, allowNull: false },
    userAgent: { type: DataTypes.TEXT, defaultValue: "" },
    createdAt: { type: DataTypes.DATE, defaultValue: DataTypes.NOW },
    lastSeenAt: { type: DataTypes.DATE, defaultValue: DataTypes.NOW },
    expiresAt: { type: DataTypes.DATE, allowNull: false },
    revokedAt: DataTypes.DATE,
  },
  { sequelize: database, tableName: "sessions", underscored: true, timestamps: false },
);
