import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Order } from './order.ts';
import type { User } from './user.ts';

/** A refund made by the payment service. */
export class Refund extends Model<InferAttributes<Refund>, InferCreationAttributes<Refund>> {
  declare id: CreationOptional<string>;
  declare orderId: string;
  declare paymentRefundId: string;
  declare amountMinor: number;
  declare reason: CreationOptional<string>;
  declare requestedBy: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;

  declare order?: NonAttribute<Order | null>;
  declare requester?: NonAttribute<User | null>;
}

Refund.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    orderId: { type: DataTypes.UUID, allowNull: false },
    paymentRefundId: { type: DataTypes.TEXT, allowNull: false },
    amountMinor: { type: DataTypes.INTEGER, allowNull: false },
    reason: { type: DataTypes.TEXT },
    requestedBy: { type: DataTypes.UUID },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'refunds' },
);
