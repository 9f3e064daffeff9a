import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Account } from './account.ts';
import type { ImprintMember } from './imprint-member.ts';
import type { Licence } from './licence.ts';
import type { Order } from './order.ts';
import type { SavedFit } from './saved-fit.ts';
import type { Session } from './session.ts';

/** A person with an account. Erasing an account keeps the row, empty of personal data, so that the ledger stands. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<string>;
  declare name: string;
  declare email: string;
  declare emailVerified: CreationOptional<boolean>;
  declare image: CreationOptional<string | null>;
  declare role: CreationOptional<'member' | 'staff'>;
  declare units: CreationOptional<'mm' | 'in'>;
  declare erasedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  declare sessions?: NonAttribute<Session[]>;
  declare accounts?: NonAttribute<Account[]>;
  declare memberships?: NonAttribute<ImprintMember[]>;
  declare licences?: NonAttribute<Licence[]>;
  declare fits?: NonAttribute<SavedFit[]>;
  declare orders?: NonAttribute<Order[]>;
}

User.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    name: { type: DataTypes.TEXT, allowNull: false },
    email: { type: DataTypes.TEXT, allowNull: false },
    emailVerified: { type: DataTypes.BOOLEAN },
    image: { type: DataTypes.TEXT },
    role: { type: DataTypes.TEXT },
    units: { type: DataTypes.TEXT },
    erasedAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'users' },
);
