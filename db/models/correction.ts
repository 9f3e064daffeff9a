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

/** An error in a published revision. */
export class Correction extends Model<InferAttributes<Correction>, InferCreationAttributes<Correction>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare revisionId: string;
  declare fixedRevisionId: CreationOptional<string | null>;
  declare summary: string;
  declare reportedBy: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;

  declare fixedRevision?: NonAttribute<Revision | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare reporter?: NonAttribute<User | null>;
  declare revision?: NonAttribute<Revision | null>;
}

Correction.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    revisionId: { type: DataTypes.UUID, allowNull: false },
    fixedRevisionId: { type: DataTypes.UUID },
    summary: { type: DataTypes.TEXT, allowNull: false },
    reportedBy: { type: DataTypes.UUID },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'corrections' },
);
