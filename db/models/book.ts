import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
} from 'sequelize';
import { sequelize } from '#db/client.ts';

/** An unstamped book, by its content key. */
export class Book extends Model<InferAttributes<Book>, InferCreationAttributes<Book>> {
  declare contentKey: string;
  declare objectKey: string;
  declare sha256: string;
  declare bytes: number;
  declare pages: number;
  declare createdAt: CreationOptional<Date>;
}

Book.init(
  {
    contentKey: { type: DataTypes.TEXT, allowNull: false, primaryKey: true },
    objectKey: { type: DataTypes.TEXT, allowNull: false },
    sha256: { type: DataTypes.TEXT, allowNull: false },
    bytes: { type: DataTypes.INTEGER, allowNull: false },
    pages: { type: DataTypes.INTEGER, allowNull: false },
    createdAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'books' },
);
