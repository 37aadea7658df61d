import {
  type CreationOptional,
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
} from "sequelize";
import { database } from "../connect.ts";

/** Who did what, when. */
export class JournalEntry extends Model<
  InferAttributes<JournalEntry>,
  InferCreationAttributes<JournalEntry>
> {
  declare teamId: string;
  declare id: CreationOptional<string>;
  declare at: CreationOptional<Date>;
  declare actorId: string | null;
  /** What was done, e.g. `set.saved`. */
  declare action: string;
  /** What it was done to: the id of a set, of a person. */
  declare subject: string;
  declare details: CreationOptional<Record<string, unknown>>;
}

JournalEntry.init(
  {
    teamId: { type: DataTypes.UUID, primaryKey: true },
    id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
    at: { type: DataTypes.DATE, defaultValue: DataTypes.NOW },
    actorId: DataTypes.UUID,
    action: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    details: { type: DataTypes.JSONB, defaultValue: {} },
  },
  { sequelize: database, tableName: "journal", underscored: true, timestamps: false },
);
