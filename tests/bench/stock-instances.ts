import { readFileSync } from 'node:fs';
import * as z from 'zod';
import { type Instance, instanceFileSchema, readInstances } from '#lib/stock/instance.ts';
import type { StockProblem } from '#lib/stock/types.ts';

/** Reads the bench's instances, which are kept in columns to be small. Each file names its source. */

const known = z.tuple([z.number(), z.number()]);
const classesSchema = z.object({
  source: z.string(),
  instances: z.array(
    z.object({
      name: z.string(),
      set: z.string(),
      stock: z.array(z.tuple([z.number(), z.number()])),
      items: z.array(z.tuple([z.number(), z.number()])),
      turned: known,
      fixed: known,
    }),
  ),
});
const sheetsSchema = z.object({
  source: z.string(),
  instances: z.array(
    z.object({
      name: z.string(),
      set: z.string(),
      kerf: z.number(),
      trim: z.number(),
      stock: z.array(z.tuple([z.number(), z.number(), z.number().nullable(), z.number()])),
      items: z.array(z.tuple([z.number(), z.number(), z.number(), z.union([z.literal(0), z.literal(1)])])),
      known,
    }),
  ),
});
const barsSchema = z.object({
  source: z.string(),
  instances: z.array(
    z.object({
      name: z.string(),
      set: z.string(),
      kerf: z.number(),
      trim: z.number(),
      bars: z.array(z.tuple([z.number(), z.number().nullable(), z.number()])),
      pieces: z.array(z.tuple([z.number(), z.number()])),
      known,
    }),
  ),
});

/** One problem of the bench, the group that it is counted in, and what is known of it. */
export interface BenchInstance {
  name: string;
  group: string;
  problem: StockProblem;
  best: number;
  bound: number;
}

export type BenchSet = 'classes' | 'constructed' | 'offcuts' | 'bars';

function readColumns(
  set: BenchSet,
): { name: string; group: string; known: [number, number]; instance: unknown }[] {
  const data: unknown = JSON.parse(readFileSync(new URL(`./instances/${set}.json`, import.meta.url), 'utf8'));
  if (set === 'classes') {
    return classesSchema.parse(data).instances.flatMap((i) =>
      (['turned', 'fixed'] as const).map((way) => ({
        name: `${i.name} ${way}`,
        group: way,
        known: i[way],
        instance: {
          name: i.name,
          stock: i.stock.map(([length, width]) => ({ length, width })),
          items: i.items.map(([length, width], q) => ({
            id: `p${q + 1}`,
            length,
            width,
            turn: way === 'turned',
          })),
        },
      })),
    );
  }
  if (set === 'bars') {
    return barsSchema.parse(data).instances.map((i) => ({
      name: i.name,
      group: 'bars',
      known: i.known,
      instance: {
        ...i,
        bars: i.bars.map(([length, count, cost]) => ({ length, count, cost })),
        pieces: i.pieces.map(([length, qty], q) => ({ id: `b${q + 1}`, length, qty })),
      },
    }));
  }
  return sheetsSchema.parse(data).instances.map((i) => ({
    name: i.name,
    group: i.set,
    known: i.known,
    instance: {
      ...i,
      stock: i.stock.map(([length, width, count, cost]) => ({ length, width, count, cost })),
      items: i.items.map(([length, width, qty, turn], q) => ({
        id: `p${q + 1}`,
        length,
        width,
        qty,
        turn: turn === 1,
      })),
    },
  }));
}

/** Reads one set as problems, rip-first where asked. */
export function readBenchSet(set: BenchSet, isRipFirst = false): BenchInstance[] {
  const columns = readColumns(set);
  const instances: Instance[] = z
    .array(z.unknown())
    .parse(columns.map((c) => c.instance))
    .map((i) => {
      const instance = instanceFileSchema.parse(i);
      if (Array.isArray(instance)) throw new Error('A list stands where one instance is due.');
      return instance;
    });
  return readInstances(instances, isRipFirst).map((problem, index) => {
    const { name, group, known: values } = columns[index] as (typeof columns)[number];
    return { name, group, problem, best: values[0], bound: values[1] };
  });
}
