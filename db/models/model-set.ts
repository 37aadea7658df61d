import {
  type CreationOptional,
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
} from "sequelize";
import { database } from "../connect.ts";

/** A versioned folder of models, data and notes. */
export class ModelSet extends Model<InferAttributes<ModelSet>, InferCreationAttributes<ModelSet>> {
  declare teamId: string;
  declare id: CreationOptional<string>;
  /** Its name in addresses, unique in the team. */
  declare slug: string;
  declare name: string;
  declare description: CreationOptional<string>;
  declare createdAt: CreationOptional<Date>;
  declare archivedAt: CreationOptional<Date | null>;
}

ModelSet.init(
  {
    teamId: { type: DataTypes.UUID, primaryKey: true },
    id: { type: DataTypes.UUID, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
    slug: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    description: { type: DataTypes.TEXT, defaultValue: "" },
    createdAt: { type: DataTypes.DATE, defaultValue: DataTypes.NOW },
    archivedAt: DataTypes.DATE,
  },
  { sequelize: database, tableName: "model_sets", underscored: true, timestamps: false },
);
