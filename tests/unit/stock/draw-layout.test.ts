import { describe, expect, it } from 'vitest';
import { type LayoutDrawing, drawLayout } from '#lib/stock/draw-layout.ts';
import { layOut } from '#lib/stock/lay-out.ts';
import type { LaidPiece } from '#lib/stock/types.ts';
import { bar, barProblem, part, sheet, sheetProblem } from './problems.ts';

const problem = sheetProblem({
  kerf: 3,
  stock: [sheet('ply', 2440, 1220)],
  parts: [part('A', 800, 400, 2, false), part('B', 500, 300, 1, false)],
});
const [laid] = layOut(problem, { steps: 200 }).pieces as [LaidPiece];
const drawing: LayoutDrawing = {
  kerf: 3,
  formatLength: (mm) => `${mm} mm`,
  title: 'Plywood, sheet 1 of 1',
  id: 'ply-1',
  hasGrain: true,
};

const count = (svg: string, what: RegExp) => [...svg.matchAll(what)].length;

describe('the drawing of a layout', () => {
  it('shows every part with its mark in a circle and its sizes, every offcut hatched and every cut numbered', () => {
    const svg = drawLayout(laid, drawing);
    expect(count(svg, /<circle /g)).toBe(3);
    expect(count(svg, />A<\/text>/g)).toBe(2);
    expect(svg).toContain('>800 mm</text>');
    expect(svg).toContain('>400 mm</text>');
    expect(count(svg, /class="offcut"/g)).toBe(laid.offcuts.length);
    expect(count(svg, /class="cut"/g)).toBe(laid.cuts.length);
    expect(svg).toContain('2440 mm × 1220 mm');
  });

  it('has a title for those who cannot see it', () => {
    expect(drawLayout(laid, drawing)).toContain('<title id="ply-1-title">Plywood, sheet 1 of 1</title>');
  });

  it('draws grain arrows on sheets that have grain only', () => {
    expect(count(drawLayout(laid, drawing), /class="grain"/g)).toBe(3);
    expect(drawLayout(laid, { ...drawing, hasGrain: false })).not.toContain('class="grain"');
  });

  it('takes its colours from the page, so that it follows light and dark', () => {
    const colours = drawLayout(laid, drawing).match(/(?:fill|stroke)="[^"]*"/g) ?? [];
    // Only the figures on the yellow of the tape are always dark.
    const fixed = colours.filter((c) => !/var\(--|url\(#|none/.test(c));
    expect(new Set(fixed)).toEqual(new Set(['fill="#1C2326"']));
  });

  it('escapes marks, titles and printed lengths', () => {
    const evil = '<script>"&\'';
    const [piece] = layOut(sheetProblem({ parts: [part(evil, 90, 90)] }), { steps: 0 }).pieces as [LaidPiece];
    const svg = drawLayout(piece, { ...drawing, title: evil, formatLength: () => evil });
    expect(svg).not.toContain('<script');
    expect(svg).toContain('&#60;script&#62;&#34;&#38;&#39;');
  });

  it('keeps every rectangle within the frame', () => {
    const svg = drawLayout(laid, drawing);
    const [, , width = 0, height = 0] = (/viewBox="([^"]*)"/.exec(svg)?.[1] ?? '').split(' ').map(Number);
    for (const [, x, y, w, h] of svg.matchAll(
      /<rect x="([^"]*)" y="([^"]*)" width="([^"]*)" height="([^"]*)"/g,
    )) {
      expect(Number(x)).toBeGreaterThanOrEqual(0);
      expect(Number(y)).toBeGreaterThanOrEqual(0);
      expect(Number(x) + Number(w)).toBeLessThanOrEqual(width);
      expect(Number(y) + Number(h)).toBeLessThanOrEqual(height);
    }
  });

  it('draws a bar as a strip, at the width that it is given', () => {
    const [strip] = layOut(
      barProblem({ kerf: 2, stock: [bar('b', 1000)], parts: [{ id: 'L', length: 300, qty: 2 }] }),
    ).pieces as [LaidPiece];
    const svg = drawLayout(strip, { ...drawing, barWidth: 40 });
    expect(count(svg, /<circle /g)).toBe(2);
    expect(svg).toContain('height="40"');
  });
});
