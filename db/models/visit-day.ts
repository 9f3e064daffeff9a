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
import type { Source } from './source.ts';

/** Visits of a plan’s page by day and source. */
export class VisitDay extends Model<InferAttributes<VisitDay>, InferCreationAttributes<VisitDay>> {
  declare planId: string;
  declare sourceId: CreationOptional<string | null>;
  declare day: string;
  declare visits: CreationOptional<number>;

  declare plan?: NonAttribute<Plan | null>;
  declare source?: NonAttribute<Source | null>;
}

VisitDay.init(
  {
    planId: { type: DataTypes.UUID, allowNull: false },
    sourceId: { type: DataTypes.UUID },
    day: { type: DataTypes.DATEONLY, allowNull: false },
    visits: { type: DataTypes.INTEGER },
  },
  { sequelize, tableName: 'visit_days' },
);
// The table has no key of one row: its unique key allows a source that is not known.
VisitDay.removeAttribute('id');
