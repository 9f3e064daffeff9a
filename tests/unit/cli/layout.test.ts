import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { runLayoutInstances } from '#src/cli/layout.ts';

const one = {
  name: 'one',
  kerf: 3,
  trim: 0,
  stock: [{ length: 1000, width: 500, count: null, cost: 1 }],
  items: [{ id: 'p1', length: 400.5, width: 200, qty: 2, turn: true }],
};
const bars = {
  name: 'two',
  kerf: 3,
  trim: 0,
  bars: [{ length: 2440, count: null, cost: 1 }],
  pieces: [{ id: 'b1', length: 997, qty: 3 }],
};

let folder = '';
let out = '';
let err = '';

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'layout-'));
  out = '';
  err = '';
  vi.spyOn(process.stdout, 'write').mockImplementation((text) => {
    out += String(text);
    return true;
  });
  vi.spyOn(process.stderr, 'write').mockImplementation((text) => {
    err += String(text);
    return true;
  });
});
afterEach(async () => {
  vi.restoreAllMocks();
  await rm(folder, { recursive: true });
});

async function run(file: unknown, ...flags: string[]): Promise<number> {
  const path = join(folder, 'file.json');
  await writeFile(path, typeof file === 'string' ? file : JSON.stringify(file));
  return runLayoutInstances(['--instance', path, '--json', '--steps', '100', ...flags]);
}

describe('plan layout', () => {
  it('prints one object for one instance, and nothing else', async () => {
    expect(await run(one)).toBe(0);
    const answer: unknown = JSON.parse(out);
    expect(answer).toMatchObject({
      name: 'one',
      used: 1,
      newCost: 1,
      lowerBound: 1,
      stock: [{ material: 'S1', length: 1000, width: 500 }],
    });
    expect(answer).toHaveProperty('elapsedMs');
    expect(err).toBe('');
  });

  it('prints a list in its order for a list, of both kinds', async () => {
    expect(await run([bars, one])).toBe(0);
    const answers: unknown = JSON.parse(out);
    expect(answers).toMatchObject([
      { name: 'two', used: 2, stock: [{ width: 0, placements: [{ id: 'b1', y: 0, width: 0 }, {}] }, {}] },
      { name: 'one', used: 1 },
    ]);
  });

  it('ends with 1 and names the part on stderr when one does not fit', async () => {
    expect(await run({ ...one, items: [{ id: 'giant', length: 1001, width: 1, qty: 1, turn: false }] })).toBe(
      1,
    );
    expect(JSON.parse(out)).toMatchObject({
      unplaced: [{ part: 'giant', qty: 1, reason: 'PART_EXCEEDS_STOCK' }],
    });
    expect(err).toContain('giant');
  });

  it.each([
    ['what is no JSON', '{'],
    ['what is no instance', { title: 'a plan' }],
  ])('ends with 2 and keeps stdout clean on %s', async (_, file) => {
    expect(await run(file)).toBe(2);
    expect(out).toBe('');
    expect(err).not.toBe('');
  });

  it('ends with 2 without a file, with an unknown flag and with a number that is none', async () => {
    expect(await runLayoutInstances(['--json'])).toBe(2);
    expect(await run(one, '--fast')).toBe(2);
    expect(await run(one, '--ms', 'soon')).toBe(2);
    expect(await runLayoutInstances(['--instance', join(folder, 'none.json')])).toBe(2);
    expect(out).toBe('');
  });
});
