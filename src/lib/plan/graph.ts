/** What ordering a dependency graph gives: every node after those it needs, and each cycle as the path that closes it. */
export interface SortedGraph {
  order: string[];
  /** Paths such as [a, b, c, a]; nodes on a cycle or behind one are left out of `order`. */
  cycles: string[][];
}

/**
 * Orders nodes so that each stands after what it needs (depth-first search, Tarjan 1976), keeping the given order where it is
 * free. Works with a stack of its own, so that a chain of thousands is as safe as a short one; linear in nodes and edges.
 */
export function sortGraph(
  nodes: readonly string[],
  needs: ReadonlyMap<string, readonly string[]>,
): SortedGraph {
  const state = new Map<string, 'open' | 'done' | 'bad'>();
  const order: string[] = [];
  const cycles: string[][] = [];
  for (const root of nodes) {
    if (state.has(root)) continue;
    const path: { node: string; next: number; isBad: boolean }[] = [{ node: root, next: 0, isBad: false }];
    state.set(root, 'open');
    for (let top = path.at(-1); top !== undefined; top = path.at(-1)) {
      const needed = needs.get(top.node)?.[top.next];
      if (needed === undefined) {
        path.pop();
        state.set(top.node, top.isBad ? 'bad' : 'done');
        if (!top.isBad) order.push(top.node);
        const parent = path.at(-1);
        if (parent && top.isBad) parent.isBad = true;
        continue;
      }
      top.next += 1;
      const known = state.get(needed);
      if (known === 'bad') top.isBad = true;
      else if (known === 'open') {
        top.isBad = true;
        const from = path.findIndex((each) => each.node === needed);
        cycles.push([...path.slice(from).map((each) => each.node), needed]);
      } else if (known === undefined && needs.has(needed)) {
        state.set(needed, 'open');
        path.push({ node: needed, next: 0, isBad: false });
      }
    }
  }
  return { order, cycles };
}
