import { describe, expect, it } from 'vitest';
import { safeNext } from '#server/accounts/safe-next.ts';

describe('where signing in leads', () => {
  it.each([
    '/',
    '/drawer',
    '/plans/bench?units=in#sizes',
    '/orders/7f1b',
    '/plans?q=a%20b',
    '/plans?q=50%25',
  ])('goes to %s on this site', (path) => {
    expect(safeNext(path)).toBe(path);
  });

  it.each([
    '//evil.test',
    '///evil.test',
    '/\\evil.test',
    '\\\\evil.test',
    '/\t/evil.test',
    '/\n/evil.test',
    '\t//evil.test',
    ' //evil.test',
    'https:evil.test',
    'https://evil.test',
    'javascript:alert(1)',
    'data:text/html,x',
    'evil.test',
    'http://127.0.0.1:4400.evil.test/',
    '/a%0d%0aSet-Cookie:x=1',
    '/a%0D%0Ab',
    '/a\r\nb',
    '/%5cevil.test',
    '/.//evil.test',
    '/..//evil.test',
    '/a/..//evil.test',
    `/${'a'.repeat(2_000)}`,
    '',
    null,
    undefined,
  ])('falls back to the front page for %j', (path) => {
    expect(safeNext(path)).toBe('/');
  });
});
