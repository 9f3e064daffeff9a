import { readdirSync, readFileSync } from 'node:fs';

import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { safeHref } from '#lib/plan/safe-href.ts';
import { parseCoverage, parseMass, parsePrice } from '#lib/plan/written.ts';
import { fitOf, FRONT } from './plan-text.ts';

const rulesOf = (text: string): string[] =>
  compilePlan(`${FRONT}\n${text}\n`).problems.map((problem) => problem.rule);

describe('a plan is read and never run', () => {
  it.each([
    '{process.env.X}',
    '{import("fs")}',
    'import fs from "fs"',
    'export const a = 1',
    '{(() => 1)()}',
    '{function () { return 1 }}',
    '{globalThis.constructor.constructor("x")()}',
    '{constructor}',
    '{__proto__}',
    '{toString}',
    '{hasOwnProperty}',
    '{constructor.constructor}',
    '{min.constructor}',
    '{min.call(1, 2)}',
    '{min["call"]}',
    '{[].constructor}',
    '{"a".constructor}',
    '{9**9**9}',
    '{1/0}',
    '{0/0}',
    '{1e308*10}',
    '{9n**(9n**6n)}',
    '{`a`}',
    '{/(a+)+$/}',
    '{1+1; process.exit()}',
    '{a = 1}',
    '{a++}',
    '{new Date()}',
    '{this}',
    '{void 0}',
    '{typeof 1}',
    '{delete 1}',
    '{async () => 1}',
    '{min(...[1, 2])}',
    '{a?.b}',
    '{import.meta}',
    '{<Tool name="x" />}',
    '<Tool {...a} />',
    '<Tool name={globalThis.constructor.constructor("x")()} />',
    '<script>alert(1)</script>',
    '<img onerror="x" src="y" />',
    '<svg onload="x" />',
    '<constructor />',
    '<__proto__ />',
    '<Tool constructor="x" name="t" />',
    '<Tool __proto__="x" name="t" />',
    '<!-- x -->',
    '[a](javascript:alert(1))',
    '[a](JaVaScRiPt:alert(1))',
    '[a](data:text/html,x)',
    '[a](//evil.example)',
    '![a](https://evil.example/x.png)',
    '<Tool name="t" link="vbscript:x" />',
    '<Size name="constructor" label="a" default={1} min={1} max={2} step={1} />',
    '<Size name="__proto__" label="a" default={1} min={1} max={2} step={1} />',
    '<Let name="toString" value={1} />',
  ])('refuses %s with a place and a sentence', (text) => {
    const { plan, problems } = compilePlan(`${FRONT}\n${text}\n`);
    expect(plan).toBeNull();
    expect(problems.length).toBeGreaterThan(0);
    for (const problem of problems) {
      expect(problem.line).toBeGreaterThanOrEqual(8);
      expect(problem.column).toBeGreaterThanOrEqual(1);
      expect(problem.message).toMatch(/^.+[.]$/);
    }
  });

  it('has no way to run text anywhere in the engine', () => {
    const folder = new URL('../../../src/lib/plan/', import.meta.url);
    for (const file of readdirSync(folder)) {
      const source = readFileSync(new URL(file, folder), 'utf8');
      expect(source, file).not.toMatch(/\beval\s*\(|new Function|Function\(|node:vm|@mdx-js\/mdx|import\(/);
    }
  });

  it('answers a name that objects inherit as it answers any unknown name', () => {
    expect(compilePlan(`${FRONT}\n{constructor}\n`).problems).toMatchObject([
      { rule: 'unknown-name', message: 'Nothing in this plan is called “constructor”.' },
    ]);
  });

  it('takes nothing inherited out of a fit', () => {
    const { plan } = compilePlan(
      `${FRONT}\n<Size name="w" label="W" default="9 mm" min="1 mm" max="20 mm" step="1 mm" />\n<Let name="x" value={w * 2} />\n`,
    );
    if (!plan) throw new Error('The plan must compile.');
    const values = Object.create({ w: 15_000_000 }) as Record<string, number>;
    expect(resolvePlan(plan, { values, measured: {}, units: 'mm' }).values).toMatchObject([
      { value: 18_000_000 },
    ]);
  });
});

describe('hostile texts are refused or read, never hung or crashed on', () => {
  const deep = (depth: number): string => `{${'('.repeat(depth)}1${')'.repeat(depth)}}`;
  it.each<[string, string, string | null]>([
    ['1 000 brackets', deep(1000), 'expression-too-large'],
    ['100 000 brackets', deep(100_000), 'expression-too-large'],
    ['200 000 brackets', deep(200_000), 'plan-too-long'],
    ['100 000 terms', `{1${'+1'.repeat(100_000)}}`, 'expression-too-large'],
    ['7 000 exclamation marks', `{${'!'.repeat(7000)}true}`, 'expression-syntax'],
    ['900 conditions', `{${'true?1:'.repeat(900)}1}`, 'expression-too-large'],
    ['3 000 quotes in quotes', `${'>'.repeat(3000)} a`, 'nested-too-deep'],
    ['2 000 open components', '<Step title="a">'.repeat(2000), 'nested-too-deep'],
    ['2 000 open empty tags', '<>'.repeat(2000), 'nested-too-deep'],
    ['20 000 asterisks', '*'.repeat(20_000), 'nested-too-deep'],
    ['20 000 words that open emphasis', '*a '.repeat(20_000), 'nested-too-deep'],
    ['10 000 brackets in text', '['.repeat(10_000), 'nested-too-deep'],
    ['5 000 broken links', '[a](b'.repeat(5000), 'nested-too-deep'],
    ['5 000 lists in lists', `${'- '.repeat(5000)}a`, 'nested-too-deep'],
    [
      '300 indented lists',
      Array.from({ length: 300 }, (_, i) => `${' '.repeat(i * 2)}- a`).join('\n'),
      'nested-too-deep',
    ],
    [
      'backquotes of all lengths',
      Array.from({ length: 800 }, (_, i) => `${'`'.repeat(i + 1)} `).join(''),
      'nested-too-deep',
    ],
    ['300 000 closing braces', `{(${'}'.repeat(300_000)}`, 'expression-syntax'],
    ['10 000 opening braces', '{'.repeat(10_000), 'not-in-the-language'],
    ['one bad expression before 9 000 good ones', `{1 2} ${'{1} '.repeat(9000)}`, 'expression-syntax'],
    ['60 000 expressions', '{1} '.repeat(60_000), 'plan-too-long'],
    ['an expression hidden in code', `\`{"\` {1 2 "} ${'{1} '.repeat(9000)}`, 'not-in-the-language'],
    ['190 000 lines without a blank one', 'a\n'.repeat(190_000), 'nested-too-deep'],
    ['60 000 underlined headings', 'a\n=\n'.repeat(60_000), 'nested-too-deep'],
    ['a table of 20 000 columns', `${'|a'.repeat(20_000)}\n${'|-'.repeat(20_000)}`, 'nested-too-deep'],
    ['300 000 backslashes', '\\'.repeat(300_000), 'nested-too-deep'],
    ['two megabytes', 'a'.repeat(2_000_000), 'plan-too-long'],
    ['2 500 components', '<Tool name="a" />\n'.repeat(2500), 'plan-too-long'],
    [
      'a cycle of 1 999 values',
      Array.from({ length: 1999 }, (_, i) => `<Let name="a${i}" value={a${(i + 1) % 1999} + 1} />`).join(
        '\n',
      ),
      'cycle',
    ],
    [
      'a chain of 1 999 values',
      Array.from(
        { length: 1999 },
        (_, i) => `<Let name="a${i}" value={${i === 0 ? '1' : `a${i - 1}`} + 1} />`,
      ).join('\n'),
      null,
    ],
  ])('%s', (_, text, rule) => {
    const rules = rulesOf(text);
    if (rule === null) expect(rules).toEqual([]);
    else expect(rules).toContain(rule);
  });

  it('works a chain of 1 999 values and a row of 1 900 terms out', () => {
    const chain = Array.from(
      { length: 1998 },
      (_, i) => `<Let name="a${i}" value={${i === 0 ? '1' : `a${i - 1}`} + 1} />`,
    );
    const { plan } = compilePlan(
      `${FRONT}\n${chain.join('\n')}\n\n<Let name="sum" value={a0${'+a1'.repeat(1900)}} />\n`,
    );
    if (!plan) throw new Error('The plan must compile.');
    const values = new Map(resolvePlan(plan, fitOf()).values.map(({ name, value }) => [name, value]));
    expect(values.get('a1997')).toBe(1999);
    expect(values.get('sum')).toBe(2 + 3 * 1900);
  });

  it('never throws for a plan with random cuts, repeats and swaps in it', () => {
    const original = readFileSync(new URL('./fixtures/example-plan.mdx', import.meta.url), 'utf8');
    const spans = fc.array(
      fc.record({
        at: fc.integer({ min: 0, max: original.length }),
        remove: fc.integer({ min: 0, max: 12 }),
        insert: fc.oneof(
          fc.string({ maxLength: 6 }),
          fc.constantFrom('{', '}', '<', '/>', '"', '*', '[', '(', '\n\n', '>', '---'),
        ),
      }),
      { minLength: 1, maxLength: 6 },
    );
    fc.assert(
      fc.property(spans, (edits) => {
        let text = original;
        for (const { at, remove, insert } of edits)
          text = text.slice(0, at) + insert + text.slice(at + remove);
        const { plan, problems } = compilePlan(text);
        expect(plan === null).toBe(problems.some((problem) => problem.severity === 'error'));
        if (plan) resolvePlan(plan, fitOf());
      }),
      { numRuns: 40, seed: 20_261_201 },
    );
  });
});

describe('what is written as text is read in bounded time', () => {
  it.each([parsePrice, parseCoverage, parseMass])(
    '%o refuses a hundred kilobytes of near-matches',
    (read) => {
      for (const piece of ['1', '1.', ' ', '1 m2/', '78.00 EUR/', '9 kg']) {
        expect(read(piece.repeat(100_000 / piece.length)).ok).toBe(false);
      }
    },
  );
});

describe('addresses', () => {
  it.each([
    'https://a.example/b?c#d',
    'http://a.example',
    'mailto:a@b.example',
    '/plans',
    'a/b',
    '#top',
    '?x=1',
    'a?b=c:d',
  ])('lets %s through', (address) => {
    expect(safeHref(address)).toBe(address);
  });
  it.each([
    'javascript:alert(1)',
    ' javascript:alert(1)',
    'java\tscript:alert(1)',
    'java\nscript:alert(1)',
    'data:text/html,x',
    'vbscript:x',
    'file:///etc/passwd',
    '//evil.example',
    '/\\evil.example',
    'blob:x',
    '',
    '\u0000https://a',
  ])('refuses %j', (address) => {
    expect(safeHref(address)).toBeNull();
  });
});
