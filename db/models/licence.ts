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
import type { BenchState } from './bench-state.ts';
import type { Build } from './build.ts';
import type { Copy } from './copy.ts';
import type { OrderLine } from './order-line.ts';
import type { Plan } from './plan.ts';
import type { User } from './user.ts';

/** What a buyer owns. */
export class Licence extends Model<InferAttributes<Licence>, InferCreationAttributes<Licence>> {
  declare id: CreationOptional<string>;
  declare number: CreationOptional<number>;
  declare orderLineId: CreationOptional<string | null>;
  declare userId: CreationOptional<string | null>;
  declare planId: string;
  declare kind: 'personal' | 'workshop';
  declare pieces: CreationOptional<number | null>;
  declare state: CreationOptional<'active' | 'refunded' | 'revoked'>;
  declare holderName: string;
  declare grantedAt: CreationOptional<Date>;
  declare endedAt: CreationOptional<Date | null>;

  declare orderLine?: NonAttribute<OrderLine | null>;
  declare plan?: NonAttribute<Plan | null>;
  declare user?: NonAttribute<User | null>;
  declare copies?: NonAttribute<Copy[]>;
  declare benchStates?: NonAttribute<BenchState[]>;
  declare build?: NonAttribute<Build | null>;
}

Licence.init(
  {
    id: { type: DataTypes.UUID, defaultValue: DataTypes.UUIDV4, primaryKey: true },
    number: { type: DataTypes.BIGINT, get: readNumber('number') },
    orderLineId: { type: DataTypes.UUID },
    userId: { type: DataTypes.UUID },
    planId: { type: DataTypes.UUID, allowNull: false },
    kind: { type: DataTypes.TEXT, allowNull: false },
    pieces: { type: DataTypes.INTEGER },
    state: { type: DataTypes.TEXT },
    holderName: { type: DataTypes.TEXT, allowNull: false },
    grantedAt: { type: DataTypes.DATE },
    endedAt: { type: DataTypes.DATE },
  },
  { sequelize, tableName: 'licences' },
);
