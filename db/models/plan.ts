import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import { readNumber } from './read-number.ts';
import type { Build } from './build.ts';
import type { Correction } from './correction.ts';
import type { Imprint } from './imprint.ts';
import type { Licence } from './licence.ts';
import type { LicenceOffer } from './licence-offer.ts';
import type { OrderLine } from './order-line.ts';
import type { ProofInvite } from './proof-invite.ts';
import type { ProofReport } from './proof-report.ts';
import type { Question } from './question.ts';
import type { Report } from './report.ts';
import type { Revision } from './revision.ts';
import type { SavedFit } from './saved-fit.ts';

/** A publication. The generated `search` column is only used in SQL and has no attribute. */
export class Plan extends Model<InferAttributes<Plan>, InferCreationAttributes<Plan>> {
  declare id: CreationOptional<string>;
  declare imprintId: string;
  declare slug: string;
  declare title: string;
  declare state: CreationOptional<'draft' | 'published' | 'unpublished'>;
  declare summary: CreationOptional<string>;
  declare skill: CreationOptional<number | null>;
  declare hoursLow: CreationOptional<number | null>;
  declare hoursHigh: CreationOptional<number | null>;
  declare spaces: CreationOptional<string[]>;
  declare tags: CreationOptional<string[]>;
  declare story: CreationOptional<string>;
  declare currentRevisionId: CreationOptional<string | null>;
  declare publishedAt: CreationOptional<Date | null>;
  declare createdAt: CreationOptional<Date>;
  declare updatedAt: CreationOptional<Date>;

  declare currentRevision?: NonAttribute<Revision | null>;
  declare imprint?: NonAttribute<Imprint | null>;
  declare revisions?: NonAttribute<Revision[]>;
  declare offers?: NonAttribute<LicenceOffer[]>;
  declare proofInvites?: NonAttribute<ProofInvite[]>;
  declare proofReports?: NonAttribute<ProofReport[]>;
  declare corrections?: NonAttribute<Correction[]>;
  declare fits?: NonAttribute<SavedFit[]>;
  declare licences?: NonAttribute<Licence[]>;
  declare questions?: NonAttribute<Question[]>;
  declare builds?: NonAttribute<Build[]>;
  declare reports?: NonAttribute<Report[]>;
  declare orderLines?: NonAttribute<OrderLine[]>;
}

Plan.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    imprintId: { type: DataTypes.UUID, allowNull: false },
    slug: { type: DataTypes.TEXT, allowNull: false },
    title: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    summary: { type: DataTypes.TEXT },
    skill: { type: DataTypes.SMALLINT },
    hoursLow: { type: DataTypes.DECIMAL(6, 1), get: readNumber('hoursLow') },
    hoursHigh: { type: DataTypes.DECIMAL(6, 1), get: readNumber('hoursHigh') },
    spaces: { type: DataTypes.ARRAY(DataTypes.TEXT) },
    tags: { type: DataTypes.ARRAY(DataTypes.TEXT) },
    story: { type: DataTypes.TEXT },
    currentRevisionId: { type: DataTypes.UUID },
    publishedAt: { type: DataTypes.DATE },
    createdAt: { type: DataTypes.DATE },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'plans', timestamps: true, createdAt: false },
);
