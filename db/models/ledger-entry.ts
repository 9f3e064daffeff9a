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
import type { LedgerAccount } from './ledger-account.ts';
import type { LedgerTransaction } from './ledger-transaction.ts';

/** One leg of a ledger transaction; only ever added. */
export class LedgerEntry extends Model<InferAttributes<LedgerEntry>, InferCreationAttributes<LedgerEntry>> {
  declare id: CreationOptional<string>;
  declare transactionId: string;
  declare accountId: string;
  declare currency: string;
  declare amountMinor: number;

  declare account?: NonAttribute<LedgerAccount | null>;
  declare transaction?: NonAttribute<LedgerTransaction | null>;
}

LedgerEntry.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    transactionId: { type: DataTypes.UUID, allowNull: false },
    accountId: { type: DataTypes.UUID, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    amountMinor: { type: DataTypes.BIGINT, allowNull: false, get: readNumber('amountMinor') },
  },
  { sequelize, tableName: 'ledger_entries' },
);
