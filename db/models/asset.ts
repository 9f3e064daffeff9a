import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Revision } from './revision.ts';

/** A picture of a revision. */
export class Asset extends Model<InferAttributes<Asset>, InferCreationAttributes<Asset>> {
  declare id: CreationOptional<string>;
  declare revisionId: string;
  declare name: string;
  declare contentType: 'image/jpeg' | 'image/png' | 'image/webp';
  declare width: number;
  declare height: number;
  declare bytes: number;
  declare sha256: string;
  declare objectKey: string;
  declare isPublic: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;

  declare revision?: NonAttribute<Revision | null>;
}

Asset.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    revisionId: { type: DataTypes.UUID, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    contentType: { type: DataTypes.TEXT, allowNull: false },
    width: { type: DataTypes.INTEGER, allowNull: false },
    height: { type: DataTypes.INTEGER, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    objectKey: { type: DataTypes.TEXT, allowNull: false },
    isPublic: { type: DataTypes.BOOLEAN },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'assets' },
);
