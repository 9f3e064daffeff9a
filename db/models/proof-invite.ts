import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Plan } from './plan.ts';
import type { User } from './user.ts';

/** An invitation to build from a draft; only the hash of its token is kept. */
export class ProofInvite extends Model<InferAttributes<ProofInvite>, InferCreationAttributes<ProofInvite>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare email: string;
  declare userId: CreationOptional<string | null>;
  declare tokenHash: string;
  declare invitedBy: CreationOptional<string | null>;
  declare expiresAt: Date;
  declare acceptedAt: CreationOptional<Date | null>;
  declare revokedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;

  declare inviter?: NonAttribute<User | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare user?: NonAttribute<User | null>;
}

ProofInvite.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    email: { type: DataTypes.TEXT, allowNull: false },
    userId: { type: DataTypes.UUID },
    tokenHash: { type: DataTypes.TEXT, allowNull: false },
    invitedBy: { type: DataTypes.UUID },
    expiresAt: { type: DataTypes.DATE, allowNull: false },
    acceptedAt: { type: DataTypes.DATE },
    revokedAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'proof_invites' },
);
