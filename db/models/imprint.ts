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
import type { ImprintInvite } from './imprint-invite.ts';
import type { ImprintMember } from './imprint-member.ts';
import type { LedgerAccount } from './ledger-account.ts';
import type { Payout } from './payout.ts';
import type { Plan } from './plan.ts';
import type { Source } from './source.ts';
import type { Statement } from './statement.ts';

/** An author’s publishing name. */
export class Imprint extends Model<InferAttributes<Imprint>, InferCreationAttributes<Imprint>> {
  declare id: CreationOptional<string>;
  declare slug: string;
  declare name: string;
  declare about: CreationOptional<string>;
  declare state: CreationOptional<'applied' | 'active' | 'suspended'>;
  declare sharePermille: CreationOptional<number>;
  declare paymentAccountId: CreationOptional<string | null>;
  declare payoutsEnabled: CreationOptional<boolean>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  declare members?: NonAttribute<ImprintMember[]>;
  declare invites?: NonAttribute<ImprintInvite[]>;
  declare plans?: NonAttribute<Plan[]>;
  declare sources?: NonAttribute<Source[]>;
  declare codes?: NonAttribute<Code[]>;
  declare payouts?: NonAttribute<Payout[]>;
  declare statements?: NonAttribute<Statement[]>;
  declare ledgerAccounts?: NonAttribute<LedgerAccount[]>;
}

Imprint.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    slug: { type: DataTypes.TEXT, allowNull: false },
    name: { type: DataTypes.TEXT, allowNull: false },
    about: { type: DataTypes.TEXT },
    state: { type: DataTypes.TEXT },
    sharePermille: { type: DataTypes.INTEGER },
    paymentAccountId: { type: DataTypes.TEXT },
    payoutsEnabled: { type: DataTypes.BOOLEAN },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'imprints', timestamps: true, createdAt: false },
);
