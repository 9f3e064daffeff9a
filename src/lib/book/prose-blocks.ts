import type { ResolvedProse, ResolvedProseNode } from '#lib/plan/types.ts';
import { safeHref } from '#lib/plan/safe-href.ts';
import type { UnitSystem } from '#lib/units/length.ts';

import { setCaution } from './cautions.ts';
import { cleanText } from './clean-text.ts';
import { setFigure } from './figures.ts';
import { needRoom, PROSE, setParagraph, setSubheading, skip, words, type Flow } from './flow.ts';
import { breakLines, lengthInline, type Inline } from './inline.ts';
import type { TextStyle } from './pen.ts';
import { BLUE, INK, PENCIL, RULE } from './sheet.ts';
import { setTable, type Cell } from './table.ts';

interface Style {
  face: 'regular' | 'italic' | 'semibold' | 'mono';
  color?: string;
  href?: string;
  size: number;
}

/** Running text of a paragraph's nodes, values and links included. Spaces between words are kept as written. */
export function inlinesOf(nodes: ResolvedProse, units: UnitSystem, style: Style): Inline[] {
  return nodes.flatMap((node): Inline[] => {
    const set = (text: string, textStyle: Style = style): Inline[] => {
      const look: TextStyle = { face: textStyle.face, size: textStyle.size, color: textStyle.color ?? INK };
      return [
        { kind: 'text', text: cleanText(text), style: look, ...(textStyle.href && { href: textStyle.href }) },
      ];
    };
    switch (node.node) {
      case 'text':
        return set(node.text);
      case 'code':
        return set(node.text, { ...style, face: 'mono' });
      case 'value':
        return node.kind === 'length' && typeof node.value === 'number'
          ? [lengthInline(node.value, units, style.size)]
          : set(node.text);
      case 'emphasis':
        return inlinesOf(node.children, units, { ...style, face: 'italic' });
      case 'strong':
        return inlinesOf(node.children, units, { ...style, face: 'semibold' });
      case 'link': {
        const href = safeHref(node.href);
        return inlinesOf(node.children, units, {
          ...style,
          ...(href && /^(https?|mailto):/i.test(href) && { href, color: BLUE }),
        });
      }
      case 'break':
        return [{ kind: 'break' }];
      case 'paragraph':
      case 'strike':
      case 'quote':
        return inlinesOf(node.children, units, style);
      default:
        return [];
    }
  });
}

/** Sets prose in the text column: paragraphs, lists, tables, pictures, cautions. Steps and placed tables stand elsewhere. */
export function setProse(flow: Flow, prose: ResolvedProse, units: UnitSystem): void {
  for (const node of prose) setBlock(flow, node, units);
}

function setBlock(flow: Flow, node: ResolvedProseNode, units: UnitSystem): void {
  const style: Style = { face: 'regular', size: PROSE.size };
  switch (node.node) {
    case 'paragraph': {
      const inlines = inlinesOf(node.children, units, style);
      if (breakLines(inlines, 1000, flow.faces.measure).length > 0) {
        setParagraph(flow, inlines);
        skip(flow, 6);
      }
      // A figure or a caution may stand on a line of its own inside a paragraph.
      for (const child of node.children)
        if (['figure', 'caution', 'picture'].includes(child.node)) setBlock(flow, child, units);
      return;
    }
    case 'heading':
      setSubheading(flow, inlineText(inlinesOf(node.children, units, style)));
      return;
    case 'quote':
      for (const child of node.children)
        if ('children' in child) {
          setParagraph(
            flow,
            inlinesOf(child.children, units, { ...style, face: 'italic', color: PENCIL }),
            PROSE,
            {
              x: flow.sheet.text + 14,
            },
          );
          skip(flow, 6);
        }
      return;
    case 'list':
      setList(flow, node, units);
      return;
    case 'table':
      setProseTable(flow, node.rows, node.align, units);
      return;
    case 'code':
      setParagraph(flow, [words(cleanText(node.text), { face: 'mono', size: 9.5 })]);
      skip(flow, 6);
      return;
    case 'figure':
      setFigure(flow, node.src, node.alt, node.caption);
      return;
    case 'picture':
      setFigure(flow, node.src, node.alt);
      return;
    case 'caution':
      // The section on cautions, which stands before every step, has said the usual words.
      setCaution(flow, node, true);
      return;
    case 'rule':
      needRoom(flow, 20);
      flow.pen.line(flow.sheet.text, flow.y + 6, flow.sheet.right, flow.y + 6, 0.5, RULE);
      flow.y += 14;
      return;
    default:
      return;
  }
}

const inlineText = (inlines: readonly Inline[]) =>
  inlines
    .map((inline) =>
      inline.kind === 'text' ? inline.text : inline.kind === 'length' ? inline.length.text : ' ',
    )
    .join('');

function setList(flow: Flow, list: Extract<ResolvedProseNode, { node: 'list' }>, units: UnitSystem): void {
  list.items.forEach((item, index) => {
    const label = list.ordered ? `${(list.start ?? 1) + index}.` : '–';
    const [first, ...rest] = item;
    const nodes = first && 'children' in first ? first.children : first ? [first] : [];
    setParagraph(flow, inlinesOf(nodes, units, { face: 'regular', size: PROSE.size }), PROSE, {
      x: flow.sheet.text + 18,
      lead: (pen, baseline) =>
        pen.text(label, flow.sheet.text, baseline, { face: 'regular', size: PROSE.size, color: PENCIL }),
    });
    skip(flow, 2);
    setProse(flow, rest, units);
  });
  skip(flow, 5);
}

function setProseTable(
  flow: Flow,
  rows: readonly ResolvedProse[][],
  align: readonly ('left' | 'right' | 'center' | null)[],
  units: UnitSystem,
): void {
  const [head, ...body] = rows;
  if (!head) return;
  const width = (flow.sheet.right - flow.sheet.text) / head.length;
  const style: Style = { face: 'regular', size: 9.5 };
  setTable(
    flow,
    head.map((cell, index) => ({
      heading: inlineText(inlinesOf(cell, units, style)),
      width,
      align: align[index] === 'right' ? 'right' : 'left',
    })),
    body.map((row) => row.map((cell): Cell => inlinesOf(cell, units, style))),
    flow.sheet.text,
  );
  skip(flow, 8);
}
