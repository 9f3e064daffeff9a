import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import { readNumber } from './read-number.ts';

/** How often something was tried, by key; shared by all processes. */
export class RateLimit extends Model<InferAttributes<RateLimit>, InferCreationAttributes<RateLimit>> {
  declare id: CreationOptional<string>;
  declare key: string;
  declare count: number;
  declare lastRequest: number;
}

RateLimit.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    key: { type: DataTypes.TEXT, allowNull: false },
    count: { type: DataTypes.INTEGER, allowNull: false },
    lastRequest: { type: DataTypes.BIGINT, allowNull: false, get: readNumber('lastRequest') },
  },
  { sequelize, tableName: 'rate_limits' },
);
