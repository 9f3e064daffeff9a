import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { User } from './user.ts';

/** A way to sign in; `password` is a hash and never leaves the sign-in code. */
export class Account extends Model<InferAttributes<Account>, InferCreationAttributes<Account>> {
  declare id: CreationOptional<string>;
  declare userId: string;
  declare accountId: string;
  declare providerId: string;
  declare accessToken: CreationOptional<string | null>;
  declare refreshToken: CreationOptional<string | null>;
  declare idToken: CreationOptional<string | null>;
  declare accessTokenExpiresAt: CreationOptional<Date | null>;
  declare refreshTokenExpiresAt: CreationOptional<Date | null>;
  declare scope: CreationOptional<string | null>;
  declare password: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  declare user?: NonAttribute<User | null>;
}

Account.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    userId: { type: DataTypes.UUID, allowNull: false },
    accountId: { type: DataTypes.TEXT, allowNull: false },
    providerId: { type: DataTypes.TEXT, allowNull: false },
    accessToken: { type: DataTypes.TEXT },
    refreshToken: { type: DataTypes.TEXT },
    idToken: { type: DataTypes.TEXT },
    accessTokenExpiresAt: { type: DataTypes.DATE },
    refreshTokenExpiresAt: { type: DataTypes.DATE },
    scope: { type: DataTypes.TEXT },
    password: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'accounts' },
);
