import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import { readNumber } from './read-number.ts';

/** Who did what to which thing. */
export class Audit extends Model<InferAttributes<Audit>, InferCreationAttributes<Audit>> {
  declare id: CreationOptional<number>;
  declare actorId: CreationOptional<string | null>;
  declare action: string;
  declare thingKind: string;
  declare thingId: string;
  declare details: CreationOptional<Record<string, unknown>>;
  declare createdAt: CreationOptional<Date>;
}

Audit.init(
  {
    id: { type: DataTypes.BIGINT, primaryKey: true, autoIncrement: true, get: readNumber('id') },
    actorId: { type: DataTypes.UUID },
    action: { type: DataTypes.TEXT, allowNull: false },
    thingKind: { type: DataTypes.TEXT, allowNull: false },
    thingId: { type: DataTypes.TEXT, allowNull: false },
    details: { type: DataTypes.JSONB },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'audits' },
);
