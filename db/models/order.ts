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
import type { Code } from './code.ts';
import type { CodeUse } from './code-use.ts';
import type { OrderLine } from './order-line.ts';
import type { Refund } from './refund.ts';
import type { Source } from './source.ts';
import type { User } from './user.ts';

/** How far an order has come. */
export type OrderState = 'pending' | 'paid' | 'partly_refunded' | 'refunded' | 'expired' | 'failed';

/** A purchase. */
export class Order extends Model<InferAttributes<Order>, InferCreationAttributes<Order>> {
  declare id: CreationOptional<string>;
  declare number: CreationOptional<number>;
  declare userId: CreationOptional<string | null>;
  declare email: string;
  declare name: string;
  declare state: CreationOptional<OrderState>;
  declare currency: string;
  declare subtotalMinor: number;
  declare discountMinor: CreationOptional<number>;
  declare taxMinor: CreationOptional<number>;
  declare totalMinor: number;
  declare refundedMinor: CreationOptional<number>;
  declare feeMinor: CreationOptional<number>;
  declare country: CreationOptional<string | null>;
  declare sourceId: CreationOptional<string | null>;
  declare codeId: CreationOptional<string | null>;
  declare consent: CreationOptional<string>;
  declare requestKey: string;
  declare checkoutSessionId: CreationOptional<string | null>;
  declare checkoutUrl: CreationOptional<string | null>;
  declare paymentIntentId: CreationOptional<string | null>;
  declare chargeId: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare expiresAt: CreationOptional<Date | null>;
  declare paidAt: CreationOptional<Date | null>;
  declare updatedAt: CreationOptional<Date>;

  declare code?: NonAttribute<Code | null>;
  declare source?: NonAttribute<Source | null>;
  declare user?: NonAttribute<User | null>;
  declare lines?: NonAttribute<OrderLine[]>;
  declare refunds?: NonAttribute<Refund[]>;
  declare codeUse?: NonAttribute<CodeUse | null>;
}

Order.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    number: { type: DataTypes.BIGINT, get: readNumber('number') },
    userId: { type: DataTypes.UUID },
    email: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    currency: { type: DataTypes.TEXT, allowNull: false },
    subtotalMinor: { type: DataTypes.INTEGER, allowNull: false },
    discountMinor: { type: DataTypes.INTEGER },
    taxMinor: { type: DataTypes.INTEGER },
    totalMinor: { type: DataTypes.INTEGER, allowNull: false },
    refundedMinor: { type: DataTypes.INTEGER },
    feeMinor: { type: DataTypes.INTEGER },
    country: { type: DataTypes.TEXT },
    sourceId: { type: DataTypes.UUID },
    codeId: { type: DataTypes.UUID },
    consent: { type: DataTypes.TEXT },
    requestKey: { type: DataTypes.TEXT, allowNull: false },
    checkoutSessionId: { type: DataTypes.TEXT },
    checkoutUrl: { type: DataTypes.TEXT },
    paymentIntentId: { type: DataTypes.TEXT },
    chargeId: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
    expiresAt: { type: DataTypes.DATE },
    paidAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'orders', timestamps: true, createdAt: false },
);
