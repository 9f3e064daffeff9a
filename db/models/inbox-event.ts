import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
} from 'sequelize';
import { sequelize } from '#db/client.ts';

/** An event of the payment service, stored once. */
export class InboxEvent extends Model<InferAttributes<InboxEvent>, InferCreationAttributes<InboxEvent>> {
  declare id: string;
  declare type: string;
  declare objectId: string;
  declare receivedAt: CreationOptional<Date>;
  declare processedAt: CreationOptional<Date | null>;
  declare attempts: CreationOptional<number>;
  declare error: CreationOptional<string | null>;
}

InboxEvent.init(
  {
    id: { type: DataTypes.TEXT, allowNull: false, primaryKey: true },
    type: { type: DataTypes.TEXT, allowNull: false },
    objectId: { type: DataTypes.TEXT, allowNull: false },
    receivedAt: { type: DataTypes.DATE },
    processedAt: { type: DataTypes.DATE },
    attempts: { type: DataTypes.INTEGER },
    error: { type: DataTypes.TEXT },
  },
  { sequelize, tableName: 'inbox_events' },
);
