import { printValue } from './print-value.ts';
import { dataOf, isPresent } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type { Prose, ProseNode, ResolvedProse, ResolvedProseNode } from './types.ts';

/** Numbers of the steps that are present, by the index of their declaration. */
export type StepNumbers = ReadonlyMap<number, number>;

/** Fills a prose tree in: values printed in the reader's units, components replaced by what a page shows there. */
export function resolveProse(prose: Prose, resolving: Resolving, steps: StepNumbers): ResolvedProse {
  return prose.flatMap((node) => resolveNode(node, resolving, steps));
}

function resolveNode(node: ProseNode, resolving: Resolving, steps: StepNumbers): ResolvedProseNode[] {
  const inside = (nodes: Prose): ResolvedProse => resolveProse(nodes, resolving, steps);
  switch (node.node) {
    case 'paragraph':
    case 'quote':
    case 'emphasis':
    case 'strong':
    case 'strike':
      return [{ node: node.node, children: inside(node.children) }];
    case 'heading':
      return [{ node: 'heading', depth: node.depth, children: inside(node.children) }];
    case 'list':
      return [{ ...node, items: node.items.map(inside) }];
    case 'table':
      return [{ ...node, rows: node.rows.map((row) => row.map(inside)) }];
    case 'link':
      return [{ node: 'link', href: node.href, children: inside(node.children) }];
    case 'value': {
      const { kind } = node.formula.expression;
      const value = dataOf(resolving, 'Text', 'value', node.formula);
      return [{ node: 'value', kind, value, text: printValue(kind, value, resolving.units) }];
    }
    case 'declared':
      return resolveDeclared(node.index, resolving, steps);
    default:
      return [node];
  }
}

function resolveDeclared(index: number, resolving: Resolving, steps: StepNumbers): ResolvedProseNode[] {
  const declaration = resolving.plan.declarations[index];
  if (!declaration || !isPresent(resolving, declaration)) return [];
  switch (declaration.type) {
    case 'figure': {
      const { src, alt, caption } = declaration;
      return [{ node: 'figure', src, alt, ...(caption !== undefined && { caption }) }];
    }
    case 'caution':
      return [
        {
          node: 'caution',
          about: declaration.about,
          text: plainText(resolveProse(declaration.text, resolving, steps)),
        },
      ];
    case 'step':
      return [{ node: 'step', number: steps.get(index) ?? 0 }];
    case 'view':
    case 'template':
    case 'parts-table':
    case 'stock-layout':
    case 'hardware-table':
    case 'shopping-list':
      return [{ node: 'place', what: declaration.type, index }];
    default:
      return [];
  }
}

/** The words of resolved prose as one plain text, blocks divided by a space: for messages and labels. */
export function plainText(prose: ResolvedProse): string {
  const pieces: string[] = [];
  const read = (nodes: ResolvedProse): void => {
    for (const node of nodes) {
      switch (node.node) {
        case 'text':
        case 'code':
        case 'value':
          pieces.push(node.text);
          break;
        case 'list':
          for (const item of node.items) read(item);
          break;
        case 'table':
          for (const row of node.rows) for (const cell of row) read(cell);
          break;
        case 'break':
          pieces.push(' ');
          break;
        default:
          if ('children' in node) read(node.children);
      }
      if (node.node === 'paragraph' || node.node === 'heading') pieces.push(' ');
    }
  };
  read(prose);
  return pieces.join('').replace(/\s+/g, ' ').trim();
}
