import { isPictureName } from './attribute-reading.ts';
import type { ReadContext } from './attribute-reading.ts';
import { checkExpression, makeFormula } from './expressions.ts';
import type { Element, MdxNode } from './parse.ts';
import { safeHref } from './safe-href.ts';
import { placeAt } from './source.ts';
import { expressionOf } from './syntax-tree.ts';
import type { Place, Prose, ProseNode } from './types.ts';

/** What a component in prose becomes: the index of its declaration, or null when it is no declaration or in error. */
export type OnElement = (element: Element) => number | null;

const REFUSED: ReadonlyMap<string, readonly [what: string, hint: string]> = new Map<
  string,
  readonly [string, string]
>([
  ['html', ['HTML', 'Use Markdown and the components of the language.']],
  [
    'mdxjsEsm',
    ['“import” or “export”', 'A plan has everything it needs in its own file: leave the line out.'],
  ],
  ['footnoteReference', ['A footnote', 'Write the note into the text.']],
  ['footnoteDefinition', ['A footnote', 'Write the note into the text.']],
  ['definition', ['A link defined apart from its text', 'Write [text](https://…).']],
  ['linkReference', ['A link defined apart from its text', 'Write [text](https://…).']],
  ['imageReference', ['A picture defined apart from its text', 'Write <Figure src="…" alt="…" />.']],
  ['yaml', ['Front matter', 'It stands at the head of the file only.']],
]);

function placeOf(node: MdxNode, context: ReadContext): Place {
  return placeAt(context.source, node.position?.start.offset ?? 0, node.position?.end.offset ?? 1);
}

function isElement(node: MdxNode): node is Element {
  return node.type === 'mdxJsxFlowElement' || node.type === 'mdxJsxTextElement';
}

/** A paragraph of nothing but components and white space is no paragraph: its components stand on lines of their own. */
function isOnlyComponents(children: readonly MdxNode[]): boolean {
  return (
    children.some(isElement) &&
    children.every((child) => isElement(child) || (child.type === 'text' && child.value.trim() === ''))
  );
}

function readValue(
  node: MdxNode & { type: 'mdxTextExpression' | 'mdxFlowExpression' },
  context: ReadContext,
): ProseNode[] {
  const start = node.position?.start.offset ?? 0;
  if (context.blanked.has(start)) return [];
  const root = expressionOf(node.data?.estree);
  // An empty pair of braces, or a comment.
  if (root === null) return [];
  const expression = checkExpression(root, context);
  if (expression === null) return [];
  const lead = node.value.length - node.value.trimStart().length;
  const at = placeAt(context.source, start + 1 + lead, start + 1 + node.value.trimEnd().length);
  if (typeof expression.kind !== 'string') {
    context.problems.add(at, {
      rule: 'wrong-kind',
      message: 'A list cannot be printed in the text.',
      hint: 'Print its values one by one.',
    });
    return [];
  }
  return [{ node: 'value', formula: makeFormula(expression, at, node.value) }];
}

function readNode(node: MdxNode, context: ReadContext, onElement: OnElement): ProseNode[] {
  const inside = (children: readonly MdxNode[]): ProseNode[] => compileProse(children, context, onElement);
  switch (node.type) {
    case 'mdxJsxFlowElement':
    case 'mdxJsxTextElement': {
      const index = onElement(node);
      return index === null ? [] : [{ node: 'declared', index }];
    }
    case 'mdxFlowExpression':
    case 'mdxTextExpression': {
      const value = readValue(node, context);
      return node.type === 'mdxFlowExpression' && value.length > 0
        ? [{ node: 'paragraph', children: value }]
        : value;
    }
    case 'paragraph':
      if (isOnlyComponents(node.children)) return inside(node.children.filter(isElement));
      return [{ node: 'paragraph', children: inside(node.children) }];
    case 'blockquote':
      return [{ node: 'quote', children: inside(node.children) }];
    case 'emphasis':
    case 'strong':
      return [{ node: node.type, children: inside(node.children) }];
    case 'delete':
      return [{ node: 'strike', children: inside(node.children) }];
    case 'heading':
      return [{ node: 'heading', depth: node.depth, children: inside(node.children) }];
    case 'list': {
      const items = node.children.map((item) => inside(item.children));
      const ordered = node.ordered === true;
      return [
        {
          node: 'list',
          ordered,
          ...(ordered && typeof node.start === 'number' && { start: node.start }),
          items,
        },
      ];
    }
    case 'table':
      return [
        {
          node: 'table',
          align: [...(node.align ?? [])].map((align) => align ?? null),
          rows: node.children.map((row) => row.children.map((cell) => inside(cell.children))),
        },
      ];
    case 'text':
      return [{ node: 'text', text: node.value }];
    case 'inlineCode':
    case 'code':
      return [{ node: 'code', text: node.value, block: node.type === 'code' }];
    case 'break':
      return [{ node: 'break' }];
    case 'thematicBreak':
      return [{ node: 'rule' }];
    case 'link': {
      const href = safeHref(node.url);
      if (href !== null) return [{ node: 'link', href, children: inside(node.children) }];
      context.problems.add(placeOf(node, context), {
        rule: 'unsafe-address',
        message: `“${node.url.slice(0, 60)}” is not an address that may stand in a plan.`,
        wanted: 'an http, https, mailto or relative address',
        hint: 'Write [text](https://…).',
      });
      return inside(node.children);
    }
    case 'image':
      if (isPictureName(node.url)) return [{ node: 'picture', src: node.url, alt: node.alt ?? '' }];
      context.problems.add(placeOf(node, context), {
        rule: 'picture-name',
        message: `“${node.url.slice(0, 60)}” is not the name of a picture.`,
        found: node.url.slice(0, 60),
        wanted: 'letters, digits, points, dashes and underscores, 100 at most',
        hint: 'Upload the picture and write its name: ![what it shows](bench.jpg).',
      });
      return [];
    default: {
      const [what, hint] = REFUSED.get(node.type) ?? [
        'This',
        'Use Markdown and the components of the language.',
      ];
      context.problems.add(placeOf(node, context), {
        rule: 'not-in-the-language',
        message: `${what} has no place in a plan.`,
        hint,
      });
      return [];
    }
  }
}

/** Reads Markdown nodes as prose: the allow-list and nothing else. Components are handed to `onElement` in the order of the file. */
export function compileProse(nodes: readonly MdxNode[], context: ReadContext, onElement: OnElement): Prose {
  return nodes.flatMap((node) => readNode(node, context, onElement));
}

/** Prose of one line inside a component stands bare; this puts it into a paragraph like all other prose. */
export function asBlocks(prose: Prose): Prose {
  const inline = new Set<ProseNode['node']>([
    'text',
    'value',
    'emphasis',
    'strong',
    'strike',
    'code',
    'link',
    'break',
    'picture',
  ]);
  const isInline = (node: ProseNode): boolean =>
    inline.has(node.node) && !(node.node === 'code' && node.block);
  const blocks: Prose = [];
  let run: ProseNode[] = [];
  const close = (): void => {
    if (run.some((node) => node.node !== 'text' || node.text.trim() !== ''))
      blocks.push({ node: 'paragraph', children: run });
    run = [];
  };
  for (const node of prose) {
    if (isInline(node)) run.push(node);
    else {
      close();
      blocks.push(node);
    }
  }
  close();
  return blocks;
}
