import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Imprint } from './imprint.ts';
import type { User } from './user.ts';

/** What a person is in an imprint. */
export class ImprintMember extends Model<
  InferAttributes<ImprintMember>,
  InferCreationAttributes<ImprintMember>
> {
  declare imprintId: string;
  declare userId: string;
  declare role: 'owner' | 'editor' | 'bookkeeper';
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
  declare user?: NonAttribute<User | null>;
}

ImprintMember.init(
  {
    imprintId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    userId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    role: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'imprint_members' },
);
