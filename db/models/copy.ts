import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type NonAttribute,
} from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { Fit } from '#lib/plan/types.ts';
import { readNumber } from './read-number.ts';
import type { Licence } from './licence.ts';
import type { Revision } from './revision.ts';
import type { SavedFit } from './saved-fit.ts';

/** A numbered, stamped PDF. */
export class Copy extends Model<InferAttributes<Copy>, InferCreationAttributes<Copy>> {
  declare id: CreationOptional<string>;
  declare number: CreationOptional<number>;
  declare licenceId: string;
  declare revisionId: string;
  declare fitId: CreationOptional<string | null>;
  declare fit: Fit;
  declare units: 'mm' | 'in';
  declare paper: 'a4' | 'letter';
  declare contentKey: string;
  declare state: CreationOptional<'queued' | 'making' | 'ready' | 'failed'>;
  declare progress: CreationOptional<number>;
  declare stage: CreationOptional<string>;
  declare failure: CreationOptional<string | null>;
  declare objectKey: CreationOptional<string | null>;
  declare sha256: CreationOptional<string | null>;
  declare bytes: CreationOptional<number | null>;
  declare pages: CreationOptional<number | null>;
  declare createdAt: CreationOptional<Date>;
  declare readyAt: CreationOptional<Date | null>;

  declare savedFit?: NonAttribute<SavedFit | null>;
  declare licence?: NonAttribute<Licence | null>;
  declare revision?: NonAttribute<Revision | null>;
}

Copy.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    number: { type: DataTypes.BIGINT, get: readNumber('number') },
    licenceId: { type: DataTypes.UUID, allowNull: false },
    revisionId: { type: DataTypes.UUID, allowNull: false },
    fitId: { type: DataTypes.UUID },
    fit: { type: DataTypes.JSONB, allowNull: false },
    units: { type: DataTypes.TEXT, allowNull: false },
    paper: { type: DataTypes.TEXT, allowNull: false },
    contentKey: { type: DataTypes.TEXT, allowNull: false },
    state: { type: DataTypes.TEXT },
    progress: { type: DataTypes.SMALLINT },
    stage: { type: DataTypes.TEXT },
    failure: { type: DataTypes.TEXT },
    objectKey: { type: DataTypes.TEXT },
    sha256: { type: DataTypes.TEXT },
    bytes: { type: DataTypes.INTEGER },
    pages: { type: DataTypes.INTEGER },
    createdAt: { type: DataTypes.DATE },
    readyAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'copies' },
);
