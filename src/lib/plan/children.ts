import { placeOfElement } from './attribute-reading.ts';
import type { ReadContext } from './attribute-reading.ts';
import { COMPONENTS } from './components.ts';
import type { Element, MdxNode } from './parse.ts';
import { placeAt } from './source.ts';
import { suggestName } from './suggest.ts';

function isElement(node: MdxNode): node is Element {
  return node.type === 'mdxJsxFlowElement' || node.type === 'mdxJsxTextElement';
}

/** The components among children, with paragraphs of nothing but components opened; other content is returned apart. */
function sortChildren(children: readonly MdxNode[]): { elements: Element[]; others: MdxNode[] } {
  const elements: Element[] = [];
  const others: MdxNode[] = [];
  for (const child of children) {
    if (isElement(child)) elements.push(child);
    else if (child.type === 'paragraph') {
      const inner = sortChildren(child.children);
      elements.push(...inner.elements);
      others.push(...inner.others);
    } else if (child.type === 'text' && child.value.trim() === '') continue;
    else if (
      (child.type === 'mdxFlowExpression' || child.type === 'mdxTextExpression') &&
      child.value.trim() === ''
    )
      continue;
    else others.push(child);
  }
  return { elements, others };
}

function placeOfNode(node: MdxNode, context: ReadContext): ReturnType<typeof placeAt> {
  return placeAt(context.source, node.position?.start.offset ?? 0, node.position?.end.offset ?? 1);
}

/** Only components of some names may stand inside this one. */
export function checkChildren(element: Element, allowed: readonly string[], context: ReadContext): Element[] {
  const { elements, others } = sortChildren(element.children);
  for (const other of others) {
    context.problems.add(placeOfNode(other, context), {
      rule: 'misplaced',
      message: `Text has no place inside <${element.name}>.`,
      hint:
        allowed.length === 0
          ? `Close it at once: <${element.name} … />.`
          : `Only ${allowed.join(', ')} stand there.`,
    });
  }
  return elements.filter((child) => {
    if (allowed.includes(child.name ?? '')) return true;
    reportUnknown(
      child,
      context,
      allowed,
      `<${child.name ?? ''}> has no place inside <${element.name}>.`,
      element.name ?? '',
    );
    return false;
  });
}

/** Says that a component is unknown, or that it stands where it has no place. */
export function reportUnknown(
  element: Element,
  context: ReadContext,
  allowed: readonly string[],
  misplaced: string,
  parent: string,
): void {
  const name = element.name ?? '';
  const isKnown = COMPONENTS.has(name);
  const near = suggestName(name, isKnown ? allowed : COMPONENTS.keys());
  const inside = COMPONENTS.get(name)?.inside;
  context.problems.add(placeOfElement(element, context), {
    rule: isKnown ? 'misplaced' : 'unknown-component',
    message: isKnown
      ? misplaced
      : name === ''
        ? 'An empty tag has no place in a plan.'
        : `There is no component <${name}>.`,
    found: name,
    hint: isKnown
      ? inside
        ? `It stands inside <${inside}>.`
        : `Put it before or after <${parent}>.`
      : near
        ? `Did you mean <${near}>?`
        : `The components are ${[...COMPONENTS.keys()].join(', ')}.`,
  });
}
