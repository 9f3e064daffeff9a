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
import type { Revision } from './revision.ts';
import type { User } from './user.ts';

/** What a proof builder found. */
export class ProofReport extends Model<InferAttributes<ProofReport>, InferCreationAttributes<ProofReport>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare revisionId: string;
  declare userId: CreationOptional<string | null>;
  declare verdict: 'holds' | 'mend';
  declare body: string;
  declare createdAt: CreationOptional<Date>;

  declare plan?: NonAttribute<Plan | null>;
  declare revision?: NonAttribute<Revision | null>;
  declare user?: NonAttribute<User | null>;
}

ProofReport.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    revisionId: { type: DataTypes.UUID, allowNull: false },
    userId: { type: DataTypes.UUID },
    verdict: { type: DataTypes.TEXT, allowNull: false },
    body: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'proof_reports' },
);
