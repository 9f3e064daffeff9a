import {
  createAdapterFactory,
  type CleanedWhere,
  type DBAdapter,
  type JoinConfig,
} from 'better-auth/adapters';
import type { BetterAuthOptions } from 'better-auth';
import {
  Op,
  type Association,
  type FindOptions,
  type IncludeOptions,
  type Model,
  type ModelStatic,
  type Sequelize,
  type Transaction,
  type WhereOptions,
} from 'sequelize';

type Row = Record<string, unknown>;
type AnyModel = ModelStatic<Model<Row, Row>>;

/** What the adapter works on: a model by the name that the sign-in library calls it. */
export interface SequelizeAdapterConfig {
  sequelize: Sequelize;
  /** @throws when there is no such model */
  findModel: (name: string) => AnyModel;
}

/** A pattern that matches the text itself: `%` and `_` that a person typed are no wildcards. */
const escapeLike = (value: unknown) => String(value).replaceAll(/[\\%_]/g, '\\$&');

function readCondition(model: AnyModel, clause: CleanedWhere): WhereOptions {
  const { field, operator, value, mode } = clause;
  const isTextual = typeof value === 'string' || (Array.isArray(value) && typeof value[0] === 'string');
  const { sequelize } = model;
  const on = (condition: unknown): WhereOptions => {
    if (mode !== 'insensitive' || !isTextual || !sequelize) return { [field]: condition } as WhereOptions;
    return sequelize.where(
      sequelize.fn('lower', sequelize.col(`${model.name}.${String(model.getAttributes()[field]?.field)}`)),
      condition as WhereOptions,
    );
  };
  const fold = (text: unknown) =>
    mode === 'insensitive' && typeof text === 'string' ? text.toLowerCase() : text;
  // A comparison with nothing is neither true nor false in SQL: no row matches.
  const never: WhereOptions = { [Op.and]: [model.sequelize?.literal('false') ?? {}] };
  const list = Array.isArray(value) ? [...value].map(fold) : [fold(value)];
  const isNothing = value === null || value === undefined;
  switch (operator) {
    case 'eq':
      return isNothing ? on({ [Op.is]: null }) : on({ [Op.eq]: fold(value) });
    case 'ne':
      return isNothing ? on({ [Op.not]: null }) : on({ [Op.ne]: fold(value) });
    case 'in':
      return on({ [Op.in]: list });
    case 'not_in':
      return on({ [Op.notIn]: list });
    case 'contains':
      return on({ [Op.like]: `%${escapeLike(fold(value))}%` });
    case 'starts_with':
      return on({ [Op.like]: `${escapeLike(fold(value))}%` });
    case 'ends_with':
      return on({ [Op.like]: `%${escapeLike(fold(value))}` });
    case 'lt':
    case 'lte':
    case 'gt':
    case 'gte':
      return isNothing ? never : on({ [Op[operator]]: value });
  }
}

/** Clauses marked AND must all hold, and of those marked OR at least one. */
function readWhere(model: AnyModel, where: readonly CleanedWhere[] = []): WhereOptions {
  const all = where.filter((clause) => clause.connector !== 'OR');
  const some = where.filter((clause) => clause.connector === 'OR');
  const conditions = all.map((clause) => readCondition(model, clause));
  if (some.length) conditions.push({ [Op.or]: some.map((clause) => readCondition(model, clause)) });
  return { [Op.and]: conditions };
}

type JoinOf = JoinConfig[string];

/** The columns that tie two models, whichever side holds the key. */
function isTiedBy(association: Association, on: JoinOf['on']): boolean {
  const { foreignKey } = association;
  const own = association as Association & { sourceKey?: string; targetKey?: string };
  return association.associationType === 'BelongsTo'
    ? foreignKey === on.from && (own.targetKey ?? 'id') === on.to
    : foreignKey === on.to && (own.sourceKey ?? 'id') === on.from;
}

interface ReadJoin {
  name: string;
  alias: string;
  isOne: boolean;
  include: IncludeOptions;
}

function readJoins(
  base: AnyModel,
  join: JoinConfig | undefined,
  findModel: SequelizeAdapterConfig['findModel'],
): ReadJoin[] {
  return Object.entries(join ?? {}).map(([name, { on, limit, relation }]) => {
    const target = findModel(name);
    const association = Object.values(base.associations).find(
      (candidate) => candidate.target === target && isTiedBy(candidate, on),
    );
    if (!association) throw new Error(`no association from ${base.name} to ${name} by ${on.from} = ${on.to}`);
    const isMany = association.associationType === 'HasMany';
    const isOne = relation === 'one-to-one';
    const include: IncludeOptions = { association, required: false };
    // A query of its own, so that the limit counts joined rows and not products of rows.
    if (isMany) Object.assign(include, { separate: true, limit: isOne ? 1 : (limit ?? 100) });
    return { name, alias: association.as, isOne, include };
  });
}

function toPlain(row: Model, joins: readonly ReadJoin[] = []): Row {
  const plain = row.get({ plain: true }) as Row;
  for (const { name, alias, isOne } of joins) {
    const joined = plain[alias];
    if (alias !== name) Reflect.deleteProperty(plain, alias);
    plain[name] = isOne && Array.isArray(joined) ? (joined[0] ?? null) : joined;
  }
  return plain;
}

/**
 * The sign-in library on our Sequelize models. Names of fields are names of attributes.
 * Its own published test suite runs over it in tests/service/auth-adapter.test.ts.
 */
export function sequelizeAdapter({ sequelize, findModel }: SequelizeAdapterConfig) {
  const build = (options: BetterAuthOptions, outer: Transaction | null): DBAdapter =>
    createAdapterFactory({
      config: {
        adapterId: 'sequelize',
        adapterName: 'Sequelize',
        supportsUUIDs: true,
        supportsJSON: true,
        supportsArrays: true,
        // The inner adapter has no transaction of its own: everything it does belongs to this one.
        transaction: outer
          ? false
          : (run) => sequelize.transaction((transaction) => run(build(options, transaction))),
      },
      adapter: ({ getFieldName }) => {
        const attributesOf = (model: string, select: readonly string[] | undefined) =>
          // `select` comes in the library's names, unlike `where` and `data`.
          select?.length ? { attributes: select.map((field) => getFieldName({ model, field })) } : {};
        const within = <Result>(run: (transaction: Transaction) => Promise<Result>) =>
          outer ? run(outer) : sequelize.transaction(run);
        /** The one row that matches, held so that nobody else takes or changes it meanwhile. */
        const lockOne = (model: AnyModel, where: readonly CleanedWhere[], transaction: Transaction) =>
          model.findOne({ where: readWhere(model, where), transaction, lock: transaction.LOCK.UPDATE });
        const updateAll = (model: AnyModel, where: readonly CleanedWhere[], update: Row) =>
          model.update(update, { where: readWhere(model, where), returning: true, transaction: outer });

        return {
          create: async <T extends Row>({ model, data }: { model: string; data: T }) => {
            const row = await findModel(model).create(data, { transaction: outer });
            return toPlain(row) as T;
          },
          findOne: async <T>({
            model,
            where,
            select,
            join,
          }: {
            model: string;
            where: CleanedWhere[];
            select?: string[] | undefined;
            join?: JoinConfig | undefined;
          }) => {
            const target = findModel(model);
            const joins = readJoins(target, join, findModel);
            const row = await target.findOne({
              where: readWhere(target, where),
              ...attributesOf(model, select),
              include: joins.map(({ include }) => include),
              transaction: outer,
            });
            return row ? (toPlain(row, joins) as T) : null;
          },
          findMany: async <T>({
            model,
            where,
            limit,
            select,
            sortBy,
            offset,
            join,
          }: {
            model: string;
            where?: CleanedWhere[] | undefined;
            limit: number;
            select?: string[] | undefined;
            sortBy?: { field: string; direction: 'asc' | 'desc' } | undefined;
            offset?: number | undefined;
            join?: JoinConfig | undefined;
          }) => {
            const target = findModel(model);
            const joins = readJoins(target, join, findModel);
            const options: FindOptions = {
              where: readWhere(target, where),
              ...attributesOf(model, select),
              include: joins.map(({ include }) => include),
              limit,
              transaction: outer,
            };
            if (offset !== undefined) options.offset = offset;
            if (sortBy) options.order = [[getFieldName({ model, field: sortBy.field }), sortBy.direction]];
            return (await target.findAll(options)).map((row) => toPlain(row, joins) as T);
          },
          count: ({ model, where }) => {
            const target = findModel(model);
            return target.count({ where: readWhere(target, where), transaction: outer });
          },
          update: async <T>({
            model,
            where,
            update,
          }: {
            model: string;
            where: CleanedWhere[];
            update: T;
          }) => {
            const [, rows] = await updateAll(findModel(model), where, update as Row);
            return rows[0] ? (toPlain(rows[0]) as T) : null;
          },
          updateMany: async ({ model, where, update }) =>
            (await updateAll(findModel(model), where, update as Row))[1].length,
          delete: async ({ model, where }) => {
            const target = findModel(model);
            await target.destroy({ where: readWhere(target, where), transaction: outer });
          },
          deleteMany: ({ model, where }) => {
            const target = findModel(model);
            return target.destroy({ where: readWhere(target, where), transaction: outer });
          },
          consumeOne: <T>({ model, where }: { model: string; where: CleanedWhere[] }) =>
            within(async (transaction) => {
              const row = await lockOne(findModel(model), where, transaction);
              if (!row) return null;
              const taken = toPlain(row) as T;
              await row.destroy({ transaction });
              return taken;
            }),
          incrementOne: <T>({
            model,
            where,
            increment,
            set,
          }: {
            model: string;
            where: CleanedWhere[];
            increment: Record<string, number>;
            set?: Row | undefined;
          }) =>
            within(async (transaction) => {
              const row = await lockOne(findModel(model), where, transaction);
              if (!row) return null;
              const sums = Object.entries(increment).map(
                ([field, by]) => [field, Number(row.get(field) ?? 0) + by] as const,
              );
              await row.update({ ...Object.fromEntries(sums), ...set }, { transaction });
              return toPlain(row) as T;
            }),
        };
      },
    })(options);
  return (options: BetterAuthOptions) => build(options, null);
}
