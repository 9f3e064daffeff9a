import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { ProofRecord } from '#lib/plan/proof-record.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import type { Asset } from './asset.ts';
import type { Copy } from './copy.ts';
import type { Plan } from './plan.ts';
import type { ProofReport } from './proof-report.ts';
import type { User } from './user.ts';

/** One state of a plan: the draft, or a frozen lettered one. */
export class Revision extends Model<InferAttributes<Revision>, InferCreationAttributes<Revision>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare letter: CreationOptional<string | null>;
  declare state: CreationOptional<'draft' | 'published' | 'superseded'>;
  declare source: CreationOptional<string>;
  declare compiled: CreationOptional<CompiledPlan | null>;
  declare proof: CreationOptional<ProofRecord | null>;
  declare notes: CreationOptional<string>;
  declare version: CreationOptional<number>;
  declare createdBy: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;
  declare publishedAt: CreationOptional<Date | null>;

  declare creator?: NonAttribute<User | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare assets?: NonAttribute<Asset[]>;
  declare proofReports?: NonAttribute<ProofReport[]>;
  declare copies?: NonAttribute<Copy[]>;
}

Revision.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    letter: { type: DataTypes.TEXT },
    state: { type: DataTypes.TEXT },
    source: { type: DataTypes.TEXT },
    compiled: { type: DataTypes.JSONB },
    proof: { type: DataTypes.JSONB },
    notes: { type: DataTypes.TEXT },
    version: { type: DataTypes.INTEGER },
    createdBy: { type: DataTypes.UUID },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
    publishedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'revisions', timestamps: true, createdAt: false },
);
