import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Licence } from './licence.ts';
import type { SavedFit } from './saved-fit.ts';

/** What is ticked off at the bench. */
export class BenchState extends Model<InferAttributes<BenchState>, InferCreationAttributes<BenchState>> {
  declare licenceId: string;
  declare fitId: string;
  declare ticked: CreationOptional<Record<string, unknown>>;
  declare updatedAt: CreationOptional<Date>;

  declare savedFit?: NonAttribute<SavedFit | null>;
  declare licence?: NonAttribute<Licence | null>;
}

BenchState.init(
  {
    licenceId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    fitId: { type: DataTypes.UUID, allowNull: false, primaryKey: true },
    ticked: { type: DataTypes.JSONB },
    updatedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'bench_states', timestamps: true, createdAt: false },
);
