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
import type { LedgerEntry } from './ledger-entry.ts';

/** An account of the ledger in one currency. */
export class LedgerAccount extends Model<
  InferAttributes<LedgerAccount>,
  InferCreationAttributes<LedgerAccount>
> {
  declare id: CreationOptional<string>;
  declare kind: 'clearing' | 'fees' | 'tax' | 'house' | 'imprint';
  declare imprintId: CreationOptional<string | null>;
  declare currency: string;
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
  declare entries?: NonAttribute<LedgerEntry[]>;
}

LedgerAccount.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    kind: { type: DataTypes.TEXT, allowNull: false },
    imprintId: { type: DataTypes.UUID },
    currency: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'ledger_accounts' },
);
