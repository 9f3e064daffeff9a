import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Fit } from '#lib/plan/types.ts';
import { readNumber } from './read-number.ts';
import type { Plan } from './plan.ts';
import type { User } from './user.ts';

/** A fit saved by its owner: the row of the table `fits`. */
export class SavedFit extends Model<InferAttributes<SavedFit>, InferCreationAttributes<SavedFit>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare planId: string;
  declare name: string;
  declare values: CreationOptional<Fit['values']>;
  declare measured: CreationOptional<Fit['measured']>;
  declare prices: CreationOptional<NonNullable<Fit['prices']>>;
  declare units: 'mm' | 'in';
  declare kerfNm: CreationOptional<number>;
  declare stock: CreationOptional<unknown>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  declare plan?: NonAttribute<Plan | null>;
  declare user?: NonAttribute<User | null>;
}

SavedFit.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    userId: { type: DataTypes.UUID, allowNull: false },
    planId: { type: DataTypes.UUID, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    values: { type: DataTypes.JSONB },
    measured: { type: DataTypes.JSONB },
    prices: { type: DataTypes.JSONB },
    units: { type: DataTypes.TEXT, allowNull: false },
    kerfNm: { type: DataTypes.BIGINT, get: readNumber('kerfNm') },
    stock: { type: DataTypes.JSONB },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'fits', timestamps: true, createdAt: false },
);
