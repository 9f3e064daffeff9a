import { randomBytes } from 'node:crypto';
import {
  authFlowTestSuite,
  caseInsensitiveTestSuite,
  joinsTestSuite,
  normalTestSuite,
  numberIdTestSuite,
  testAdapter,
  transactionsTestSuite,
  uuidTestSuite,
} from '@better-auth/test-utils/adapter';
import type { BetterAuthOptions } from 'better-auth';
import { initGetFieldName, initGetModelName } from 'better-auth/adapters';
import { getAuthTables, type DBFieldAttribute } from 'better-auth/db';
import { DataTypes, Sequelize, type Model, type ModelAttributes, type ModelStatic } from 'sequelize';
import { vi } from 'vitest';
import { sequelizeAdapter } from '#server/accounts/sequelize-adapter.ts';
import { env } from '#server/env.ts';

/*
 * Source outside the project: the test suite that the sign-in library publishes for adapters (@better-auth/test-utils).
 * It brings its own tables, so it runs in a schema of its own, on models built from the library's description of them.
 */
// The suite prints how long its own migrations took.
vi.spyOn(console, 'log').mockImplementation(() => undefined);

type AnyModel = ModelStatic<Model<Record<string, unknown>, Record<string, unknown>>>;

const schema = `adapter_${randomBytes(6).toString('hex')}`;
const sequelize = new Sequelize(env.DATABASE_URL, {
  dialect: 'postgres',
  logging: false,
  pool: { max: 8 },
  define: { timestamps: false, freezeTableName: true, schema },
});

let models = new Map<string, AnyModel>();

function readType(field: DBFieldAttribute, isSerial: boolean) {
  if (field.references?.field === 'id') return isSerial ? DataTypes.INTEGER : DataTypes.TEXT;
  switch (field.type) {
    case 'boolean':
      return DataTypes.BOOLEAN;
    case 'number':
      return field.bigint ? DataTypes.BIGINT : DataTypes.INTEGER;
    case 'date':
      return DataTypes.DATE;
    case 'json':
      return DataTypes.JSONB;
    case 'string[]':
      return DataTypes.ARRAY(DataTypes.TEXT);
    case 'number[]':
      return DataTypes.ARRAY(DataTypes.INTEGER);
    default:
      return DataTypes.TEXT;
  }
}

function defineModels(options: BetterAuthOptions): Map<string, AnyModel> {
  const tables = getAuthTables(options);
  const nameModel = initGetModelName({ schema: tables, usePlural: false });
  const nameField = initGetFieldName({ schema: tables, usePlural: false });
  const isSerial = options.advanced?.database?.generateId === 'serial';
  const defined = new Map<string, AnyModel>();
  for (const name of Object.keys(sequelize.models)) sequelize.modelManager.removeModel(sequelize.model(name));
  for (const [key, table] of Object.entries(tables)) {
    const attributes: ModelAttributes = {
      id: isSerial
        ? { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true }
        : { type: DataTypes.TEXT, primaryKey: true, defaultValue: DataTypes.UUIDV4 },
    };
    for (const [field, attribute] of Object.entries(table.fields)) {
      if (field === 'id') continue;
      attributes[nameField({ model: key, field })] = {
        type: readType(attribute, isSerial),
        unique: attribute.unique ?? false,
      };
    }
    defined.set(nameModel(key), sequelize.define(nameModel(key), attributes) as AnyModel);
  }
  for (const [key, table] of Object.entries(tables)) {
    for (const [field, { references, unique }] of Object.entries(table.fields)) {
      const source = defined.get(nameModel(key));
      const target = references && defined.get(nameModel(references.model));
      if (!source || !references || !target) continue;
      const foreignKey = nameField({ model: key, field });
      const targetKey = nameField({ model: references.model, field: references.field });
      source.belongsTo(target, { as: `to_${foreignKey}`, foreignKey, targetKey, constraints: false });
      const back = { as: `from_${key}_${foreignKey}`, foreignKey, sourceKey: targetKey, constraints: false };
      if (unique) target.hasOne(source, back);
      else target.hasMany(source, back);
    }
  }
  return defined;
}

const { execute } = await testAdapter({
  adapter: (options) => {
    models = defineModels(options);
    return sequelizeAdapter({
      sequelize,
      findModel: (name) => {
        const model = models.get(name);
        if (!model) throw new Error(`unknown model ${name}`);
        return model;
      },
    });
  },
  runMigrations: async (options) => {
    models = defineModels(options);
    await sequelize.query(`drop schema if exists ${schema} cascade`);
    await sequelize.query(`create schema ${schema}`);
    await sequelize.sync();
  },
  tests: [
    normalTestSuite(),
    authFlowTestSuite(),
    transactionsTestSuite(),
    caseInsensitiveTestSuite(),
    numberIdTestSuite(),
    uuidTestSuite(),
    joinsTestSuite(),
  ],
  onFinish: async () => {
    await sequelize.query(`drop schema if exists ${schema} cascade`);
    await sequelize.close();
  },
});

execute();
