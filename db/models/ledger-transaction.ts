import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { LedgerEntry } from './ledger-entry.ts';
import type { OrderLine } from './order-line.ts';

/** Something that moved money, named once. */
export class LedgerTransaction extends Model<
  InferAttributes<LedgerTransaction>,
  InferCreationAttributes<LedgerTransaction>
> {
  declare id: CreationOptional<string>;
  declare reference: string;
  declare kind: 'sale' | 'refund' | 'dispute' | 'payout' | 'adjustment';
  declare orderLineId: CreationOptional<string | null>;
  declare memo: CreationOptional<string>;
  declare happenedAt: CreationOptional<Date>;
  declare createdAt: CreationOptional<Date>;

  declare orderLine?: NonAttribute<OrderLine | null>;
  declare entries?: NonAttribute<LedgerEntry[]>;
}

LedgerTransaction.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    reference: { type: DataTypes.TEXT, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    orderLineId: { type: DataTypes.UUID },
    memo: { type: DataTypes.TEXT },
    happenedAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'ledger_transactions' },
);
