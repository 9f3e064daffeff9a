import type { CompiledPlan, ProseNode, ResolvedProse, ResolvedProseNode } from '#lib/plan/types.ts';

function openAll(nodes: readonly ProseNode[]): ResolvedProse | null {
  const open: ResolvedProse = [];
  for (const node of nodes) {
    const shown = openNode(node);
    if (!shown) return null;
    open.push(shown);
  }
  return open;
}

/** A node as a visitor may read it: plain words and pictures. Null when it holds a computed value or a component anywhere inside. */
function openNode(node: ProseNode): ResolvedProseNode | null {
  switch (node.node) {
    case 'value':
    case 'declared':
    case 'table':
      return null;
    case 'paragraph':
    case 'quote':
    case 'emphasis':
    case 'strong':
    case 'strike':
    case 'heading':
    case 'link': {
      const children = openAll(node.children);
      return children && { ...node, children };
    }
    case 'list': {
      const items: ResolvedProseNode[][] = [];
      for (const item of node.items) {
        const open = openAll(item);
        if (!open) return null;
        items.push(open);
      }
      return { ...node, items };
    }
    default:
      return node;
  }
}

/**
 * The story of a plan: the prose before its first component, without any block that holds a computed value. Only this much of the text is
 * shown to people who have not paid.
 */
export function publicStory(plan: CompiledPlan): ResolvedProse {
  const end = plan.body.findIndex((node) => node.node === 'declared');
  return plan.body.slice(0, end === -1 ? undefined : end).flatMap((node) => openNode(node) ?? []);
}

/** The story as plain text, for the search. */
export function storyText(story: ResolvedProse): string {
  const textOf = (node: ResolvedProseNode): string => {
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
  const walk = (node: ResolvedProseNode): void => {
    if (node.node === 'picture') names.add(node.src);
    if ('children' in node) node.children.forEach(walk);
    if (node.node === 'list') node.items.flat().forEach(walk);
  };
  publicStory(plan).forEach(walk);
  return names;
}
