import type { Expression as EsExpression } from 'estree';

import type { ReadContext } from './attribute-reading.ts';
import { readAttributes } from './attributes.ts';
import { COMPONENTS } from './components.ts';
import { checkExpression } from './expressions.ts';
import { sortGraph } from './graph.ts';
import type { Element, ElementAttribute, MdxNode } from './parse.ts';
import { createProblemList } from './problems.ts';
import { isMark, isName, isReservedName } from './scope.ts';
import type { Meaning, Member } from './scope.ts';
import { placeAt } from './source.ts';
import { expressionOf, namesIn } from './syntax-tree.ts';
import type { ChoiceOption, Kind } from './types.ts';

/** The most components that a plan may have. */
export const MAX_DECLARATIONS = 2000;

function isElement(node: MdxNode): node is Element {
  return node.type === 'mdxJsxFlowElement' || node.type === 'mdxJsxTextElement';
}

/** Every component of a tree in the order of the file, found without recursion. */
export function collectElements(nodes: readonly MdxNode[]): Element[] {
  const elements: Element[] = [];
  const stack: MdxNode[] = [...nodes].reverse();
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
    if (isElement(node)) elements.push(node);
    if ('children' in node) {
      for (let i = node.children.length - 1; i >= 0; i -= 1) {
        const child = node.children[i];
        if (child) stack.push(child);
      }
    }
  }
  return elements;
}

function attributeOf(element: Element, name: string): ElementAttribute | undefined {
  return element.attributes.find(
    (attribute): attribute is ElementAttribute =>
      attribute.type === 'mdxJsxAttribute' && attribute.name === name,
  );
}

function nameOf(element: Element): string | undefined {
  const value = attributeOf(element, element.name === 'Part' ? 'mark' : 'name')?.value;
  const text = typeof value === 'string' ? value.trim() : undefined;
  if (text === undefined || isReservedName(text, element.name)) return undefined;
  return (element.name === 'Part' ? isMark(text) : isName(text)) ? text : undefined;
}

/** The options of a choice, read without reporting: the second reading reports. */
export function readOptions(
  element: Element,
  context: ReadContext,
): { kind: Kind | null; options: ChoiceOption[] } {
  const spec = COMPONENTS.get('Option');
  const options: ChoiceOption[] = [];
  let kind: Kind | null = null;
  for (const child of collectElements(element.children)) {
    if (child.name !== 'Option' || !spec) continue;
    const attributes = readAttributes(child, spec, context);
    const constant = attributes.constant('value');
    const label = attributes.text('label');
    if (constant === undefined || label === undefined) continue;
    kind ??= constant.kind;
    options.push({ value: constant.value, label });
  }
  return { kind, options };
}

function meaningOf(element: Element, context: ReadContext): Meaning | null {
  // Attributes are read here for their kinds only; the second reading reports what is wrong with them.
  const quiet: ReadContext = { ...context, problems: createProblemList(), scope: new Map() };
  const spec = COMPONENTS.get(element.name ?? '');
  switch (element.name) {
    case 'Size': {
      const constant = spec && readAttributes(element, spec, quiet).constant('default');
      return { type: 'size', kind: constant?.kind ?? null };
    }
    case 'Choice':
      return { type: 'choice', ...readOptions(element, quiet) };
    case 'Let':
      return { type: 'let', kind: null };
    case 'Material': {
      const members = new Set<Member>(['thickness']);
      if (attributeOf(element, 'width')) members.add('width');
      if (attributeOf(element, 'length')) members.add('length');
      return { type: 'material', members };
    }
    case 'Part':
      return { type: 'part' };
    default:
      return null;
  }
}

const WORD: Readonly<Record<Meaning['type'], string>> = {
  size: 'a size',
  choice: 'a choice',
  let: 'a derived value',
  material: 'a material',
  part: 'a part',
};

/**
 * Fills the scope with every name that the plan declares, and decides the kinds of derived values in the order in which they
 * need each other. Names declared twice and derived values that need themselves are reported.
 */
export function declareNames(elements: readonly Element[], context: ReadContext): void {
  const { scope, problems, source } = context;
  const lets = new Map<string, { element: Element; root: EsExpression }>();
  for (const element of elements) {
    const name = nameOf(element);
    if (name === undefined) continue;
    const meaning = meaningOf(element, context);
    if (meaning === null) continue;
    const earlier = scope.get(name);
    if (earlier) {
      const attribute = attributeOf(element, element.name === 'Part' ? 'mark' : 'name');
      problems.add(
        placeAt(source, attribute?.position?.start.offset ?? 0, attribute?.position?.end.offset ?? 1),
        {
          rule: 'repeated-name',
          message: `“${name}” is already the name of ${WORD[earlier.type]}.`,
          found: name,
          hint: 'Give it another name: sizes, choices, values, materials and marks share one set of names.',
        },
      );
      continue;
    }
    scope.set(name, meaning);
    if (meaning.type !== 'let') continue;
    const value = attributeOf(element, 'value')?.value;
    const root = value && typeof value !== 'string' ? expressionOf(value.data?.estree) : null;
    if (root) lets.set(name, { element, root });
  }

  const needs = new Map(
    [...lets].map(([name, { root }]) => [name, namesIn(root).filter((each) => lets.has(each))]),
  );
  const { order, cycles } = sortGraph([...lets.keys()], needs);
  for (const cycle of cycles) reportCycle(cycle, lets.get(cycle[0] ?? '')?.element, context);
  const quiet: ReadContext = { ...context, problems: createProblemList() };
  for (const name of order) {
    const meaning = scope.get(name);
    const declared = lets.get(name);
    if (meaning?.type === 'let' && declared)
      meaning.kind = checkExpression(declared.root, quiet)?.kind ?? null;
  }
}

/** Says which values need each other, as the path that closes. */
function reportCycle(cycle: readonly string[], element: Element | undefined, context: ReadContext): void {
  const attribute = element && (attributeOf(element, 'value') ?? element.attributes[0]);
  const start = attribute?.position?.start.offset ?? element?.position?.start.offset ?? 0;
  const end = attribute?.position?.end.offset ?? start + 1;
  const path = cycle.length > 12 ? [...cycle.slice(0, 6), '…', ...cycle.slice(-5)] : cycle;
  context.problems.add(placeAt(context.source, start, end), {
    rule: 'cycle',
    message: `“${cycle[0]}” needs itself: ${path.join(' → ')}.`,
    found: path.join(' → '),
    hint: 'Work one of them out from sizes alone.',
  });
}
