import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Answer } from './answer.ts';
import type { Plan } from './plan.ts';
import type { User } from './user.ts';

/** A question on a plan’s page. */
export class Question extends Model<InferAttributes<Question>, InferCreationAttributes<Question>> {
  declare id: CreationOptional<string>;
  declare planId: string;
  declare userId: CreationOptional<string | null>;
  declare authorName: string;
  declare body: string;
  declare state: CreationOptional<'shown' | 'hidden'>;
  declare createdAt: CreationOptional<Date>;

  declare plan?: NonAttribute<Plan | null>;
  declare user?: NonAttribute<User | null>;
  declare answers?: NonAttribute<Answer[]>;
}

Question.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    planId: { type: DataTypes.UUID, allowNull: false },
    userId: { type: DataTypes.UUID },
    authorName: { type: DataTypes.TEXT, allowNull: false },
    body: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'questions' },
);
