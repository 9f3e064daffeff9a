import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Licence } from './licence.ts';
import type { LicenceOffer } from './licence-offer.ts';
import type { Order } from './order.ts';
import type { Plan } from './plan.ts';
import type { Revision } from './revision.ts';
import type { SavedFit } from './saved-fit.ts';

/** One licence bought in an order. */
export class OrderLine extends Model<InferAttributes<OrderLine>, InferCreationAttributes<OrderLine>> {
  declare id: CreationOptional<string>;
  declare orderId: string;
  declare planId: string;
  declare revisionId: string;
  declare offerId: CreationOptional<string | null>;
  declare fitId: CreationOptional<string | null>;
  declare kind: 'personal' | 'workshop';
  declare pieces: CreationOptional<number | null>;
  declare title: string;
  declare priceMinor: number;
  declare discountMinor: CreationOptional<number>;
  declare taxMinor: CreationOptional<number>;
  declare feeMinor: CreationOptional<number>;
  declare sharePermille: CreationOptional<number>;
  declare refundedMinor: CreationOptional<number>;

  declare savedFit?: NonAttribute<SavedFit | null>;
  declare offer?: NonAttribute<LicenceOffer | null>;
  declare order?: NonAttribute<Order | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare revision?: NonAttribute<Revision | null>;
  declare licence?: NonAttribute<Licence | null>;
}

OrderLine.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    orderId: { type: DataTypes.UUID, allowNull: false },
    planId: { type: DataTypes.UUID, allowNull: false },
    revisionId: { type: DataTypes.UUID, allowNull: false },
    offerId: { type: DataTypes.UUID },
    fitId: { type: DataTypes.UUID },
    kind: { type: DataTypes.TEXT, allowNull: false },
    pieces: { type: DataTypes.INTEGER },
    title: { type: DataTypes.TEXT, allowNull: false },
    priceMinor: { type: DataTypes.INTEGER, allowNull: false },
    discountMinor: { type: DataTypes.INTEGER },
    taxMinor: { type: DataTypes.INTEGER },
    feeMinor: { type: DataTypes.INTEGER },
    sharePermille: { type: DataTypes.INTEGER },
    refundedMinor: { type: DataTypes.INTEGER },
  },
  { sequelize, tableName: 'order_lines' },
);
