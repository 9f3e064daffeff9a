import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { CodeUse } from './code-use.ts';
import type { Imprint } from './imprint.ts';
import type { Plan } from './plan.ts';
import type { Source } from './source.ts';

/** A discount code. */
export class Code extends Model<InferAttributes<Code>, InferCreationAttributes<Code>> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare planId: CreationOptional<string | null>;
  declare code: string;
  declare percentOff: CreationOptional<number | null>;
  declare amountOffMinor: CreationOptional<number | null>;
  declare currency: CreationOptional<string | null>;
  declare maxUses: CreationOptional<number | null>;
  declare used: CreationOptional<number>;
  declare perPerson: CreationOptional<number>;
  declare startsAt: CreationOptional<Date>;
  declare endsAt: CreationOptional<Date | null>;
  declare sourceId: CreationOptional<string | null>;
  declare note: CreationOptional<string>;
  declare isActive: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare source?: NonAttribute<Source | null>;
  declare uses?: NonAttribute<CodeUse[]>;
}

Code.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    planId: { type: DataTypes.UUID },
    code: { type: DataTypes.TEXT, allowNull: false },
    percentOff: { type: DataTypes.INTEGER },
    amountOffMinor: { type: DataTypes.INTEGER },
    currency: { type: DataTypes.TEXT },
    maxUses: { type: DataTypes.INTEGER },
    used: { type: DataTypes.INTEGER },
    perPerson: { type: DataTypes.INTEGER },
    startsAt: { type: DataTypes.DATE },
    endsAt: { type: DataTypes.DATE },
    sourceId: { type: DataTypes.UUID },
    note: { type: DataTypes.TEXT },
    isActive: { type: DataTypes.BOOLEAN },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'codes' },
);
