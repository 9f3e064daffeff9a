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

/** A mistake reported in a plan. */
export class Report extends Model<InferAttributes<Report>, InferCreationAttributes<Report>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare revisionId: CreationOptional<string | null>;
  declare userId: CreationOptional<string | null>;
  declare body: string;
  declare state: CreationOptional<'open' | 'accepted' | 'declined'>;
  declare createdAt: CreationOptional<Date>;

  declare plan?: NonAttribute<Plan | null>;
  declare revision?: NonAttribute<Revision | null>;
  declare user?: NonAttribute<User | null>;
}

Report.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    revisionId: { type: DataTypes.UUID },
    userId: { type: DataTypes.UUID },
    body: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'reports' },
);
