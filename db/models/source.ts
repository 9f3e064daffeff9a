import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Imprint } from './imprint.ts';

/** A tracked link of an imprint. */
export class Source extends Model<InferAttributes<Source>, InferCreationAttributes<Source>> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare slug: string;
  declare label: string;
  declare kind: 'video' | 'page' | 'newsletter' | 'talk' | 'other';
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
}

Source.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    slug: { type: DataTypes.TEXT, allowNull: false },
    label: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'sources' },
);
