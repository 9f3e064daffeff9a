import { appendFileSync, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import type { Tables } from './tables.ts';

type Change = [table: keyof Tables, id: string, value: unknown];

/** The stand-in's memory; with a file, everything committed outlives the process. */
export interface Store {
  get<K extends keyof Tables>(table: K, id: string): Tables[K] | undefined;
  put<K extends keyof Tables>(table: K, id: string, value: Tables[K]): Tables[K];
  remove(table: keyof Tables, id: string): void;
  /** Rows in the order in which they were made. */
  all<K extends keyof Tables>(table: K): Tables[K][];
  /** Any object that is published under this id. */
  findPublished(id: string): object | undefined;
  commit(): void;
  /** Takes back everything since the last commit. */
  rollback(): void;
  clear(): void;
}

const PUBLISHED = [
  'customer',
  'product',
  'price',
  'coupon',
  'promotion_code',
  'checkout.session',
  'payment_intent',
  'charge',
  'balance_transaction',
  'refund',
  'dispute',
  'account',
  'transfer',
  'transfer_reversal',
  'payout',
  'event',
] as const satisfies (keyof Tables)[];

/**
 * Keeps tables in memory and, with a file, every commit as one line of a journal: a line that a crash left half written
 * is the only thing lost, and nobody was told of it yet. The journal is shortened whenever it is opened.
 */
export function openStore(file?: string): Store {
  const tables = new Map<string, Map<string, unknown>>();
  let changes: Change[] = [];
  let undo: Change[] = [];

  const tableOf = (name: string): Map<string, unknown> => {
    const table = tables.get(name) ?? new Map<string, unknown>();
    tables.set(name, table);
    return table;
  };
  const apply = ([name, id, value]: Change): void => {
    undo.push([name, id, tableOf(name).get(id) ?? null]);
    if (value === null) tableOf(name).delete(id);
    else tableOf(name).set(id, value);
  };

  function rewrite(path: string): void {
    const lines = [...tables].flatMap(([name, table]) =>
      [...table].map(([id, value]) => `${JSON.stringify([[name, id, value]])}\n`),
    );
    writeFileSync(`${path}.new`, lines.join(''));
    renameSync(`${path}.new`, path);
  }

  if (file) {
    mkdirSync(dirname(file), { recursive: true });
    if (existsSync(file)) {
      const lines = readFileSync(file, 'utf8').split('\n');
      // Whatever follows the last line end was being written when the process died.
      for (const line of lines.slice(0, -1)) for (const change of JSON.parse(line)) apply(change);
    }
    rewrite(file);
    undo = [];
  }

  // The rows were put in through `put`, whose types are those that come out again.
  const read = <K extends keyof Tables>(value: unknown): Tables[K] => value as Tables[K];

  return {
    get: (table, id) => {
      const value = tableOf(table).get(id);
      return value === undefined ? undefined : read(value);
    },
    put: (table, id, value) => {
      const change: Change = [table, id, value];
      apply(change);
      changes.push(change);
      return value;
    },
    remove: (table, id) => {
      const change: Change = [table, id, null];
      apply(change);
      changes.push(change);
    },
    all: (table) => [...tableOf(table).values()].map((value) => read(value)),
    findPublished: (id) => {
      for (const name of PUBLISHED) {
        const value = tableOf(name).get(id);
        if (typeof value === 'object' && value !== null) return value;
      }
      return undefined;
    },
    commit: () => {
      if (file && changes.length > 0) appendFileSync(file, `${JSON.stringify(changes)}\n`);
      changes = [];
      undo = [];
    },
    rollback: () => {
      for (const [name, id, value] of undo.reverse()) {
        if (value === null) tableOf(name).delete(id);
        else tableOf(name).set(id, value);
      }
      changes = [];
      undo = [];
    },
    clear: () => {
      tables.clear();
      changes = [];
      undo = [];
      if (file) rewrite(file);
    },
  };
}
