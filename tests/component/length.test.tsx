import { cleanup, render } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { Length } from '#components/ui/Length.tsx';
import { formatLength, type LengthFormat } from '#lib/units/format-length.ts';

const INCH = 25_400_000;

function renderLength(nm: number, format: LengthFormat, isBare = false) {
  const { container } = render(<Length length={formatLength(nm, format)} isBare={isBare} />);
  const read = container.querySelector('.unseen')?.textContent;
  const drawn = container.querySelector('[aria-hidden="true"]');
  const stack = drawn?.querySelector('.length__stack');
  const fraction = stack ? [stack.getAttribute('data-over'), stack.getAttribute('data-under')] : [];
  return { read, drawn: drawn?.textContent, fraction };
}

afterEach(cleanup);

describe('a length on the page', () => {
  it('is read out and copied as plain text, and drawn with a real fraction', () => {
    expect(renderLength(17 * INCH + (3 * INCH) / 4, { units: 'in' })).toEqual({
      read: '17 3/4"',
      drawn: '17″',
      fraction: ['3', '4'],
    });
  });

  it('draws no nought before a bare fraction', () => {
    expect(renderLength((3 * INCH) / 4, { units: 'in' })).toEqual({
      read: '3/4"',
      drawn: '″',
      fraction: ['3', '4'],
    });
  });

  it('draws a whole inch without a fraction, and nothing at all as 0', () => {
    expect(renderLength(36 * INCH, { units: 'in' })).toEqual({ read: '36"', drawn: '36″', fraction: [] });
    expect(renderLength(0, { units: 'in' })).toEqual({ read: '0"', drawn: '0″', fraction: [] });
  });

  it('draws feet before the inches, and even feet without inches', () => {
    expect(renderLength(17.75 * INCH, { units: 'in', feet: true })).toMatchObject({
      drawn: '1′ 5″',
      fraction: ['3', '4'],
    });
    expect(renderLength(24 * INCH, { units: 'in', feet: true })).toMatchObject({ read: "2'", drawn: '2′' });
  });

  it('draws tenths of a millimetre behind a point', () => {
    expect(renderLength(342_700_000, { units: 'mm' })).toEqual({
      read: '342.7 mm',
      drawn: '342.7mm',
      fraction: [],
    });
    expect(renderLength(342_500_000, { units: 'mm', decimals: 0.5 }).drawn).toBe('342.5mm');
  });

  it('keeps the mark of a length that is a little less than it reads', () => {
    expect(renderLength(342_700_000, { units: 'mm', decimals: 1 })).toMatchObject({
      read: '343− mm',
      drawn: '343−mm',
    });
  });

  it('keeps the sign', () => {
    expect(renderLength(-INCH / 2, { units: 'in' })).toMatchObject({
      read: '−1/2"',
      drawn: '−″',
      fraction: ['1', '2'],
    });
  });

  it('leaves the unit to the head of the column when it is bare, but never to the ear', () => {
    expect(renderLength(450_000_000, { units: 'mm' }, true)).toMatchObject({ read: '450 mm', drawn: '450' });
  });
});
