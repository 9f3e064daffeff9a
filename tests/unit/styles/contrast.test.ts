import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync(new URL('../../../src/styles/global.css', import.meta.url), 'utf8');

/** The colour tokens of the first block that follows a selector. */
function readTokens(selector: string): Map<string, string> {
  const at = css.indexOf(`${selector} {`);
  expect(at, `a block for ${selector}`).toBeGreaterThanOrEqual(0);
  const block = css.slice(at, css.indexOf('}', at));
  return new Map(
    [...block.matchAll(/--([a-z-]+): (#[0-9a-f]{6});/g)].map(([, name = '', hex = '']) => [name, hex]),
  );
}

/** Relative luminance of a colour as WCAG 2.2 defines it. */
function luminance(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
    const share = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(a: string, b: string): number {
  const [darker = 0, lighter = 0] = [luminance(a), luminance(b)].sort((x, y) => x - y);
  return (lighter + 0.05) / (darker + 0.05);
}

const themes = {
  light: readTokens(':root'),
  dark: readTokens(":root[data-theme='dark']"),
};

/** Text on its ground, 4.5 to 1 (WCAG 2.2, success criterion 1.4.3). */
const textPairs = [
  ['ink', 'sheet'],
  ['pencil', 'sheet'],
  ['marking-blue', 'sheet'],
  ['red-pencil', 'sheet'],
  ['oiled-green', 'sheet'],
  ['ink', 'wash'],
  ['pencil', 'wash'],
  ['marking-blue', 'wash'],
  ['red-pencil', 'wash'],
  ['on-tape', 'tape'],
  ['sheet', 'marking-blue'],
] as const;

/** Lines, outlines and states of what can be operated, 3 to 1 (success criterion 1.4.11). */
const linePairs = [
  ['ink', 'sheet'],
  ['pencil', 'sheet'],
  ['marking-blue', 'sheet'],
  ['red-pencil', 'sheet'],
  ['oiled-green', 'sheet'],
] as const;

function pairContrast(theme: keyof typeof themes, [front, ground]: readonly [string, string]): number {
  const tokens = themes[theme];
  const frontHex = tokens.get(front);
  const groundHex = tokens.get(ground);
  if (frontHex === undefined || groundHex === undefined) throw new Error(`no token ${front} or ${ground}`);
  return contrast(frontHex, groundHex);
}

describe('the colours of the house', () => {
  it('measures contrast as WCAG does: black on white is 21, and #767676 on white 4.54', () => {
    expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 5);
    expect(contrast('#767676', '#ffffff')).toBeCloseTo(4.54, 2);
  });

  for (const theme of ['light', 'dark'] as const) {
    it.each(textPairs)(`sets %s on %s at 4.5 to 1 or more (${theme})`, (...pair) => {
      expect(pairContrast(theme, pair)).toBeGreaterThanOrEqual(4.5);
    });

    it.each(linePairs)(`draws %s on %s at 3 to 1 or more (${theme})`, (...pair) => {
      expect(pairContrast(theme, pair)).toBeGreaterThanOrEqual(3);
    });
  }

  it('is the same in the dark whether the system or the reader asked for it', () => {
    expect(readTokens(":root:not([data-theme='light'])")).toEqual(themes.dark);
  });

  it('names the same tokens in both themes', () => {
    expect([...themes.dark.keys()]).toEqual([...themes.light.keys()]);
  });

  it('never sets text in the yellow of the tape', () => {
    const sheets = ['elements', 'sheet', 'title-block', 'controls', 'tables', 'notes', 'tape'];
    for (const name of sheets) {
      const text = readFileSync(new URL(`../../../src/styles/${name}.css`, import.meta.url), 'utf8');
      expect(text, name).not.toMatch(/[\s;{]color: var\(--tape\)/);
    }
  });
});
