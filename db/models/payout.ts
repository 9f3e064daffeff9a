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

/** Money sent to an imprint. */
export class Payout extends Model<InferAttributes<Payout>, InferCreationAttributes<Payout>> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare amountMinor: number;
  declare currency: string;
  declare state: CreationOptional<'started' | 'sent' | 'failed'>;
  declare paymentTransferId: CreationOptional<string | null>;
  declare failure: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare sentAt: CreationOptional<Date | null>;

  declare imprint?: NonAttribute<Imprint | null>;
}

Payout.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    amountMinor: { type: DataTypes.INTEGER, allowNull: false },
    currency: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    paymentTransferId: { type: DataTypes.TEXT },
    failure: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
    sentAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'payouts' },
);
