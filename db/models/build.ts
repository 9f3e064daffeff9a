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
import type { Plan } from './plan.ts';
import type { User } from './user.ts';

/** A finished piece shown by a licence holder. */
export class Build extends Model<InferAttributes<Build>, InferCreationAttributes<Build>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare licenceId: CreationOptional<string | null>;
  declare userId: CreationOptional<string | null>;
  declare authorName: string;
  declare body: string;
  declare verdict: number;
  declare state: CreationOptional<'shown' | 'hidden'>;
  declare createdAt: CreationOptional<Date>;

  declare licence?: NonAttribute<Licence | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare user?: NonAttribute<User | null>;
}

Build.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    licenceId: { type: DataTypes.UUID },
    userId: { type: DataTypes.UUID },
    authorName: { type: DataTypes.TEXT, allowNull: false },
    body: { type: DataTypes.TEXT, allowNull: false },
    verdict: { type: DataTypes.SMALLINT, allowNull: false },
    state: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'builds' },
);
