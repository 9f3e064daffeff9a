import { QueryTypes, type Model, type ModelStatic } from 'sequelize';
import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import * as models from '#db/models/index.ts';

afterAll(() => sequelize.close());

interface Column {
  column_name: string;
  udt_name: string;
  is_generated: string;
}
const all = Object.values(models) as ModelStatic<Model>[];

/** Types of the database under the names that a model gives them. */
const databaseTypes: Record<string, string> = {
  UUID: 'uuid',
  TEXT: 'text',
  BOOLEAN: 'bool',
  'TIMESTAMP WITH TIME ZONE': 'timestamptz',
  INTEGER: 'int4',
  SMALLINT: 'int2',
  BIGINT: 'int8',
  'DECIMAL(6,1)': 'numeric',
  DATE: 'date',
  'TEXT[]': '_text',
  JSONB: 'jsonb',
};

describe('the models', () => {
  it.each(all.map((model) => [model.name, model] as const))(
    '%s has an attribute for every column, of the column’s type',
    async (_name, model) => {
      const columns = await sequelize.query<Column>(
        `select column_name, udt_name, is_generated from information_schema.columns
         where table_schema = current_schema() and table_name = :table`,
        { replacements: { table: model.getTableName() }, type: QueryTypes.SELECT },
      );
      const kept = columns.filter((column) => column.is_generated !== 'ALWAYS');
      const expected = Object.fromEntries(kept.map((column) => [column.column_name, column.udt_name]));
      const found = Object.fromEntries(
        Object.values(model.getAttributes()).map(({ field, type }) => {
          const name = (type as unknown as { toSql: () => string }).toSql();
          return [field, databaseTypes[name] ?? name];
        }),
      );
      expect(found).toEqual(expected);
    },
  );

  it('stand for every table of ours', async () => {
    const rows = await sequelize.query<{ table_name: string }>(
      `select table_name from information_schema.tables
       where table_schema = current_schema() and table_type = 'BASE TABLE' and table_name <> 'migrations'`,
      { type: QueryTypes.SELECT },
    );
    // Read and written by one small module in plain SQL.
    const plain = ['form_memories'];
    const tables = rows.map((row) => row.table_name).filter((table) => !plain.includes(table));
    expect(all.map((model) => model.getTableName()).sort()).toEqual(tables.sort());
  });

  it('read a bigint as a number and refuse one that a number cannot hold', () => {
    const entry = models.LedgerEntry.build({
      transactionId: 'x',
      accountId: 'x',
      currency: 'EUR',
      amountMinor: 1,
    });
    entry.setDataValue('amountMinor', '2500' as unknown as number);
    expect(entry.amountMinor).toBe(2_500);
    entry.setDataValue('amountMinor', '9007199254740993' as unknown as number);
    expect(() => entry.amountMinor).toThrow(RangeError);
  });
});
