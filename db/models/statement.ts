import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import { readNumber } from './read-number.ts';
import type { Imprint } from './imprint.ts';

/** An imprint’s statement over a period. */
export class Statement extends Model<InferAttributes<Statement>, InferCreationAttributes<Statement>> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare currency: string;
  declare periodStart: string;
  declare periodEnd: string;
  declare openingMinor: number;
  declare closingMinor: number;
  declare csv: string;
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
}

Statement.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    periodStart: { type: DataTypes.DATEONLY, allowNull: false },
    periodEnd: { type: DataTypes.DATEONLY, allowNull: false },
    openingMinor: { type: DataTypes.BIGINT, allowNull: false, get: readNumber('openingMinor') },
    closingMinor: { type: DataTypes.BIGINT, allowNull: false, get: readNumber('closingMinor') },
    csv: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'statements' },
);
