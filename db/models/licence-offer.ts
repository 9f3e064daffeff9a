import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Plan } from './plan.ts';

/** What a plan costs, by kind of licence and currency. */
export class LicenceOffer extends Model<
  InferAttributes<LicenceOffer>,
  InferCreationAttributes<LicenceOffer>
> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare kind: 'personal' | 'workshop';
  declare priceMinor: number;
  declare currency: 'EUR' | 'USD' | 'GBP' | 'CAD' | 'AUD' | 'JPY';
  declare pieces: CreationOptional<number | null>;
  declare isActive: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;

  declare plan?: NonAttribute<Plan | null>;
}

LicenceOffer.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    priceMinor: { type: DataTypes.INTEGER, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    pieces: { type: DataTypes.INTEGER },
    isActive: { type: DataTypes.BOOLEAN },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'licence_offers' },
);
