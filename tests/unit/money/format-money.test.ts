import { describe, expect, it } from 'vitest';
import { formatMoney, parseAmount, writeAmount } from '#lib/money/format-money.ts';

describe('amounts', () => {
  it('print with the digits of their currency', () => {
    expect(formatMoney(1250, 'EUR')).toBe('€12.50');
    expect(formatMoney(1250, 'JPY')).toMatch(/^(JP)?¥1,250$/);
  });

  it('are written for spreadsheets without rounding', () => {
    expect(writeAmount(-5, 'EUR')).toBe('-0.05');
    expect(writeAmount(123456, 'USD')).toBe('1234.56');
    expect(writeAmount(7, 'JPY')).toBe('7');
  });

  it.each([
    ['24', 'EUR', 2400],
    ['24.5', 'EUR', 2450],
    [' 0.09 ', 'USD', 9],
    ['1200', 'JPY', 1200],
    ['12.5', 'JPY', null],
    ['12,50', 'EUR', null],
    ['-3', 'EUR', null],
    ['12.345', 'EUR', null],
    ['', 'EUR', null],
  ])('%j in %s reads as %j minor units', (text, currency, minor) => {
    expect(parseAmount(text, currency)).toBe(minor);
  });
});
