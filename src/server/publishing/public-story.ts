import type { CompiledPlan, Prose, ProseNode } from '#lib/plan/types.ts';

/** Nodes that a visitor may read: plain words, without values and without what stands in components. */
function isOpen(node: ProseNode): boolean {
  switch (node.node) {
    case 'value':
    case 'declared':
      return false;
    case 'paragraph':
    case 'quote':
    case 'emphasis':
    case 'strong':
    case 'strike':
    case 'heading':
    case 'link':
      return node.children.every(isOpen);
    case 'list':
      return node.items.every((item) => item.every(isOpen));
    case 'table':
      return false;
    default:
      return true;
  }
}

/**
 * The story of a plan: the prose before the first component, up to the first paragraph that holds a computed value. Only this much of the
 * text is shown to people who have not paid.
 */
export function publicStory(plan: CompiledPlan): Prose {
  const story: Prose = [];
  for (const node of plan.body) {
    if (node.node === 'declared') break;
    if (isOpen(node)) story.push(node);
  }
  return story;
}

/** The story as plain text, for the search. */
export function storyText(story: Prose): string {
  const textOf = (node: ProseNode): string => {
    if (node.node === 'text' || node.node === 'code') return node.text;
    if ('children' in node) return node.children.map(textOf).join('');
    if (node.node === 'list') return node.items.map((item) => item.map(textOf).join(' ')).join(' ');
    return ' ';
  };
  return story.map(textOf).join('\n').slice(0, 8000);
}

/** Names of the pictures that a visitor may see: the cover and those in the story. */
export function publicPictures(plan: CompiledPlan): Set<string> {
  const names = new Set<string>();
  if (plan.front.cover) names.add(plan.front.cover);
  const walk = (node: ProseNode): void => {
    if (node.node === 'picture') names.add(node.src);
    if ('children' in node) node.children.forEach(walk);
    if (node.node === 'list') node.items.flat().forEach(walk);
  };
  publicStory(plan).forEach(walk);
  return names;
}
