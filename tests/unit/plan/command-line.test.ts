import { execFile } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

import { afterAll, describe, expect, it } from 'vitest';
import * as z from 'zod';

const root = fileURLToPath(new URL('../../../', import.meta.url));
const example = fileURLToPath(new URL('./fixtures/example-plan.mdx', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'benchleaf-plan-'));
afterAll(() => {
  rmSync(folder, { recursive: true });
});

interface Answer {
  code: number;
  out: string;
  err: string;
}

function plan(...args: string[]): Promise<Answer> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', 'src/cli/plan.ts', ...args],
      { cwd: root },
      (error, out, err) => {
        resolve({ code: error ? Number(error.code) : 0, out, err });
      },
    );
  });
}

const reportSchema = z.object({
  title: z.string(),
  problems: z.array(
    z.object({
      line: z.number(),
      column: z.number(),
      rule: z.string(),
      message: z.string(),
      severity: z.string(),
    }),
  ),
  values: z.record(z.string(), z.unknown()),
  parts: z.array(
    z.object({
      mark: z.string(),
      qty: z.number(),
      length: z.number(),
      width: z.number(),
      thickness: z.number(),
    }),
  ),
  requirements: z.array(z.object({ message: z.string(), holds: z.boolean() })),
  hardware: z.array(z.object({ name: z.string(), qty: z.number(), packs: z.number() })),
});

const expected = z
  .record(z.string(), z.object({ values: z.record(z.string(), z.number()), parts: z.array(z.unknown()) }))
  .parse(JSON.parse(readFileSync(new URL('./fixtures/example-plan.expected.json', import.meta.url), 'utf8')));

function write(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

describe('the command line', { timeout: 60_000 }, () => {
  it('resolves the example at a fit to nothing but JSON on stdout', async () => {
    const flags = ['--set', 'width=900mm', '--set', 'bays=2', '--set', 'foot=pads', '--set', 'slide=250mm'];
    const { code, out } = await plan(
      'resolve',
      example,
      ...flags,
      '--measured',
      'ply=17.6mm',
      '--measured',
      'thin=5.8 mm',
      '--json',
    );
    const report = reportSchema.parse(JSON.parse(out));
    expect(report.values).toEqual(expected['narrow']?.values);
    expect(report.parts).toEqual(expected['narrow']?.parts);
    expect(report.problems.map(({ rule, severity }) => [rule, severity])).toEqual([
      ['picture-missing', 'advice'],
    ]);
    expect(code).toBe(0);
  });

  it('tells a broken requirement as a problem and goes out with 1', async () => {
    const { code, out } = await plan('resolve', example, '--set', 'width=600mm', '--set', 'bays=5', '--json');
    const report = reportSchema.parse(JSON.parse(out));
    expect(report.parts).toEqual(expected['refused']?.parts);
    expect(report.problems.filter((problem) => problem.severity === 'error')).toEqual([
      {
        line: 39,
        column: 1,
        rule: 'requirement-broken',
        severity: 'error',
        message:
          'A bay must be at least 180 mm wide to take a pair of boots: use fewer bays or a wider bench.',
      },
    ]);
    expect(code).toBe(1);
  });

  it('checks a plan, and tells each fault with its place on stderr', async () => {
    const clean = await plan('check', example);
    expect([clean.code, clean.out]).toEqual([0, `${example} is clean: 7 parts.\n`]);
    const bad = write(
      'bad.mdx',
      readFileSync(example, 'utf8').replace('{depth + 600*mm}', '{dept + 600*mm}'),
    );
    const { code, out, err } = await plan('check', bad);
    expect([code, out]).toEqual([1, '']);
    expect(err).toBe(
      `${bad}:12:86: error unknown-name: Nothing in this plan is called “dept”. Did you mean depth?\n`,
    );
  });

  it('refuses values that the plan does not allow', async () => {
    const { code, out } = await plan('resolve', example, '--set', 'width=5m', '--set', 'bayz=2', '--json');
    const report = reportSchema.parse(JSON.parse(out));
    expect(report.parts).toEqual([]);
    expect(report.problems.map((problem) => problem.rule)).toEqual([
      'picture-missing',
      'out-of-limits',
      'unknown-name',
    ]);
    expect(code).toBe(1);
  });

  it('writes the parts as CSV and as a table', async () => {
    const csv = await plan('resolve', example, '--csv', '--units', 'in');
    expect(csv.out.split('\r\n').slice(0, 2)).toEqual([
      'mark,name,material,qty,length (in),width (in),thickness (in)',
      'A,Side,ply,2,17.007874016,13.25,0.708661417',
    ]);
    const table = await plan('resolve', example, '--table');
    expect(table.out.split('\n').slice(0, 2)).toEqual([
      'mark  name         material  qty    length     width  thickness',
      'A     Side         ply         2    432 mm  336.6 mm      18 mm',
    ]);
  });

  it('tells what changes between two files', async () => {
    const newer = write('newer.mdx', readFileSync(example, 'utf8').replace('bay - 42*mm', 'bay - 44*mm'));
    const { code, out } = await plan('diff', example, newer);
    expect([code, out]).toEqual([0, 'Part F “Tray bottom”: length 300.7 mm → 298.7 mm (−2 mm).\n']);
  });

  it('proves a plan, and goes out with 1 when it fails', async () => {
    const good = await plan('prove', example, '--tries', '200');
    expect(good.code).toBe(0);
    expect(good.out).toContain('proved: Every part has a length, a width and a thickness above zero.');
    const failing = write(
      'failing.mdx',
      readFileSync(example, 'utf8').replace('bay - 42*mm', 'bay - 300*mm'),
    );
    const bad = await plan('prove', failing, '--tries', '200', '--json');
    expect(bad.code).toBe(1);
    expect(z.object({ holds: z.boolean() }).parse(JSON.parse(bad.out))).toEqual({ holds: false });
  });

  it('lays a plan out on its stock', async () => {
    const { code, out } = await plan('layout', example, '--kerf', '3.2 mm', '--steps', '500', '--json');
    const { layouts } = z
      .object({
        layouts: z.array(
          z.object({
            material: z.string(),
            pieces: z.array(z.object({ placements: z.array(z.unknown()) })),
            unplaced: z.array(z.unknown()),
          }),
        ),
      })
      .parse(JSON.parse(out));
    const laid = layouts.map(({ material, pieces, unplaced }) => [
      material,
      pieces.reduce((sum, piece) => sum + piece.placements.length, 0),
      unplaced.length,
    ]);
    expect(laid).toEqual([
      ['ply', 9, 0],
      ['thin', 1, 0],
      ['oak', 1, 0],
    ]);
    expect(code).toBe(0);
  });

  it.each([
    [[], 'usage: plan check FILE [--json]'],
    [['frobnicate'], 'usage: plan check FILE [--json]'],
    [['check'], 'One file is wanted.'],
    [['check', 'nowhere.mdx'], 'nowhere.mdx cannot be read.'],
    [['resolve', example, '--set', 'width'], '--set is written name=value, not width.'],
    [['resolve', example, '--units', 'ells'], '--units is mm or in, not ells.'],
    [['resolve', example, '--json', '--csv'], 'Only one of --json, --csv and --table.'],
    [['resolve', example, '--nothing'], "Unknown option '--nothing'"],
  ])('goes out with 2 when it is used wrongly: %j', async (args, said) => {
    const { code, out, err } = await plan(...args);
    expect([code, out]).toEqual([2, '']);
    expect(err).toContain(said);
  });
});
