import { describe, expect, it } from 'vitest';
import { instanceFileSchema, readInstances, writeLayout } from '#lib/stock/instance.ts';
import { layOut } from '#lib/stock/lay-out.ts';

const sheetInstance = {
  name: 'one',
  kerf: 3.2,
  trim: 10,
  stock: [{ length: 2440, width: 1220, count: null, cost: 1 }],
  items: [{ id: 'p1', length: 800.1234, width: 400, qty: 2, turn: false }],
};

function read(file: unknown) {
  const checked = instanceFileSchema.parse(file);
  return readInstances(Array.isArray(checked) ? checked : [checked]);
}

describe('reading an instance file', () => {
  it('keeps four decimals of a millimetre exact', () => {
    expect(read(sheetInstance)).toMatchObject([
      {
        kind: 'sheet',
        kerf: 32_000,
        trim: { left: 100_000, right: 100_000, bottom: 100_000, top: 100_000 },
        stock: [{ id: 'S1', length: 24_400_000, width: 12_200_000, count: null }],
        parts: [{ id: 'p1', length: 8_001_234, qty: 2, turn: false }],
      },
    ]);
  });

  it('reads one-dimensional instances and lists of both', () => {
    const bars = {
      name: 'b',
      kerf: 3,
      trim: 0,
      bars: [{ length: 2440, count: 2, cost: 1 }],
      pieces: [{ id: 'b1', length: 997, qty: 2 }],
    };
    expect(read([sheetInstance, bars]).map((problem) => problem.kind)).toEqual(['sheet', 'bar']);
  });

  it.each([
    ['a fifth decimal', { ...sheetInstance, kerf: 0.00001 }],
    [
      'a negative size',
      { ...sheetInstance, items: [{ id: 'p1', length: -1, width: 1, qty: 1, turn: true }] },
    ],
    ['two parts of one name', { ...sheetInstance, items: [...sheetInstance.items, ...sheetInstance.items] }],
    ['no stock', { ...sheetInstance, stock: [] }],
    ['half a part', { ...sheetInstance, items: [{ id: 'p1', length: 1, width: 1, qty: 0.5, turn: true }] }],
    ['something else', { title: 'a plan' }],
  ])('refuses %s', (_, file) => {
    expect(instanceFileSchema.safeParse(file).success).toBe(false);
  });

  it('takes stock sizes as trimmed already where a part fills them from edge to edge', () => {
    const full = { ...sheetInstance, items: [{ id: 'p1', length: 2440, width: 600, qty: 1, turn: false }] };
    expect(read(full)).toMatchObject([{ trim: { left: 0, top: 0 } }]);
    // One such part settles it for the whole file.
    expect(read([sheetInstance, full])).toMatchObject([{ trim: { left: 0 } }, { trim: { left: 0 } }]);
    // A part larger than even that settles nothing.
    const never = { ...sheetInstance, items: [{ id: 'p1', length: 2441, width: 600, qty: 1, turn: false }] };
    expect(read(never)).toMatchObject([{ trim: { left: 100_000 } }]);
  });
});

describe('writing a layout', () => {
  it('gives millimetres from the untrimmed corner', () => {
    const [problem] = read(sheetInstance);
    if (!problem) throw new Error('no problem read');
    const written = writeLayout('one', layOut(problem, { steps: 0 }));
    expect(written).toMatchObject({ name: 'one', used: 1, newCost: 1, lowerBound: 1, unplaced: [] });
    expect(written.stock[0]).toMatchObject({ material: 'S1', length: 2440, width: 1220 });
    const first = written.stock[0]?.placements[0];
    expect(first).toMatchObject({ id: 'p1', length: 800.1234, width: 400, turned: false });
    expect(Math.min(...(written.stock[0]?.placements ?? []).map((p) => p.x))).toBe(10);
  });
});
