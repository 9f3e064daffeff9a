import type { Declaration, Expression, Formula } from './types.ts';

/** A value that is worked out and kept: a let, a measure of a material, or a measure of a part. */
export interface KeptValue {
  /** `bay`, `ply.thickness`, `A.length`. */
  key: string;
  formula: Formula;
  declaration: Declaration;
}

/** Keys of kept values and names of sizes and choices that an expression reads, found without recursion. */
export function namesRead(root: Expression): string[] {
  const names = new Set<string>();
  const stack: Expression[] = [root];
  for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
    switch (node.op) {
      case 'name':
        names.add(node.name);
        break;
      case 'member':
        names.add(`${node.name}.${node.member}`);
        break;
      case 'unary':
        stack.push(node.of);
        break;
      case 'binary':
        stack.push(node.right, node.left);
        break;
      case 'if':
        stack.push(node.otherwise, node.then, node.test);
        break;
      case 'call':
        stack.push(...node.args);
        break;
      case 'list':
        stack.push(...node.items);
        break;
      case 'value':
        break;
    }
  }
  return [...names];
}

function memberOf(name: string, member: 'thickness'): Expression {
  return { op: 'member', kind: 'length', of: 'material', name, member };
}

/**
 * Every kept value of a plan in the order of the file. A part's thickness is its material's when it states none; its
 * quantity is nothing where `when` leaves it out, so that other formulas may count on it.
 */
export function keptValues(declarations: readonly Declaration[]): KeptValue[] {
  const kept: KeptValue[] = [];
  for (const declaration of declarations) {
    const keep = (key: string, formula: Formula | undefined): void => {
      if (formula) kept.push({ key, formula, declaration });
    };
    if (declaration.type === 'let') keep(declaration.name, declaration.value);
    else if (declaration.type === 'material') {
      keep(`${declaration.name}.thickness`, declaration.thickness);
      keep(`${declaration.name}.width`, declaration.width);
      keep(`${declaration.name}.length`, declaration.length);
    } else if (declaration.type === 'part') {
      const { mark, qty, when, material } = declaration;
      keep(`${mark}.length`, declaration.length);
      keep(`${mark}.width`, declaration.width);
      keep(
        `${mark}.thickness`,
        declaration.thickness ?? {
          at: declaration.at,
          text: `${material}.thickness`,
          expression: memberOf(material, 'thickness'),
        },
      );
      keep(
        `${mark}.qty`,
        when === undefined
          ? qty
          : {
              ...qty,
              expression: {
                op: 'if',
                kind: 'number',
                test: when.expression,
                then: qty.expression,
                otherwise: { op: 'value', kind: 'number', value: 0 },
              },
            },
      );
    }
  }
  return kept;
}
