import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
} from 'sequelize';
import { sequelize } from '#db/client.ts';

/** An e-mail, written in the transaction that causes it. */
export class OutboxEmail extends Model<InferAttributes<OutboxEmail>, InferCreationAttributes<OutboxEmail>> {
  declare id: CreationOptional<string>;
  declare kind: string;
  declare reference: string;
  declare toName: CreationOptional<string>;
  declare toAddress: string;
  declare subject: string;
  declare textBody: string;
  declare htmlBody: string;
  declare state: CreationOptional<'waiting' | 'sent' | 'failed'>;
  declare attempts: CreationOptional<number>;
  declare error: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare sentAt: CreationOptional<Date | null>;
}

OutboxEmail.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    kind: { type: DataTypes.TEXT, allowNull: false },
    reference: { type: DataTypes.TEXT, allowNull: false },
    toName: { type: DataTypes.TEXT },
    toAddress: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    textBody: { type: DataTypes.TEXT, allowNull: false },
    htmlBody: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    attempts: { type: DataTypes.INTEGER },
    error: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
    sentAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'outbox_emails' },
);
