import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Question } from './question.ts';
import type { User } from './user.ts';

/** An answer to a question. */
export class Answer extends Model<InferAttributes<Answer>, InferCreationAttributes<Answer>> {
  declare id: CreationOptional<string>;
  declare questionId: string;
  declare userId: CreationOptional<string | null>;
  declare authorName: string;
  declare isImprint: CreationOptional<boolean>;
  declare body: string;
  declare createdAt: CreationOptional<Date>;

  declare question?: NonAttribute<Question | null>;
  declare user?: NonAttribute<User | null>;
}

Answer.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    questionId: { type: DataTypes.UUID, allowNull: false },
    userId: { type: DataTypes.UUID },
    authorName: { type: DataTypes.TEXT, allowNull: false },
    isImprint: { type: DataTypes.BOOLEAN },
    body: { type: DataTypes.TEXT, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'answers' },
);
