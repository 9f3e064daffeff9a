import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Code } from './code.ts';
import type { Order } from './order.ts';
import type { User } from './user.ts';

/** A use of a discount code by one order. */
export class CodeUse extends Model<InferAttributes<CodeUse>, InferCreationAttributes<CodeUse>> {
  declare id: CreationOptional<string>;
  declare codeId: string;
  declare orderId: string;
  declare userId: CreationOptional<string | null>;
  declare state: CreationOptional<'held' | 'used' | 'released'>;
  declare createdAt: CreationOptional<Date>;

  declare code?: NonAttribute<Code | null>;
  declare order?: NonAttribute<Order | null>;
  declare user?: NonAttribute<User | null>;
}

CodeUse.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    codeId: { type: DataTypes.UUID, allowNull: false },
    orderId: { type: DataTypes.UUID, allowNull: false },
    userId: { type: DataTypes.UUID },
    state: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'code_uses' },
);
