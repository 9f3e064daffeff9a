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

/** An open invitation to join an imprint; only the hash of its token is kept. */
export class ImprintInvite extends Model<
  InferAttributes<ImprintInvite>,
  InferCreationAttributes<ImprintInvite>
> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare email: string;
  declare role: 'owner' | 'editor' | 'bookkeeper';
  declare tokenHash: string;
  declare invitedBy: CreationOptional<string | null>;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;

  declare imprint?: NonAttribute<Imprint | null>;
  declare inviter?: NonAttribute<User | null>;
}

ImprintInvite.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    email: { type: DataTypes.TEXT, allowNull: false },
    role: { type: DataTypes.TEXT, allowNull: false },
    tokenHash: { type: DataTypes.TEXT, allowNull: false },
    invitedBy: { type: DataTypes.UUID },
    expiresAt: { type: DataTypes.DATE, allowNull: false },
    acceptedAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'imprint_invites' },
);
