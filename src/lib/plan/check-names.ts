import type { Expression as EsExpression, Node as EsNode } from 'estree';

import { FUNCTIONS, UNITS } from './functions.ts';
import { quoteSource } from './problems.ts';
import type { Finding, ProblemList } from './problems.ts';
import { MATERIAL_MEMBERS, PART_MEMBERS } from './scope.ts';
import type { Member, Scope } from './scope.ts';
import { placeAt } from './source.ts';
import type { Source } from './source.ts';
import { suggestName } from './suggest.ts';
import { rangeOf } from './syntax-tree.ts';
import type { Expression } from './types.ts';

/** What checking an expression needs to know. */
export interface CheckContext {
  source: Source;
  problems: ProblemList;
  scope: Scope;
}

/** Reports a fault at a node; gives null, as a check of a faulty node does. */
export function report(context: CheckContext, node: EsNode, finding: Finding): null {
  const [start, end] = rangeOf(node);
  context.problems.add(placeAt(context.source, start, end), finding);
  return null;
}

/** A node as the author wrote it, cut to one short line. */
export function textOf(context: CheckContext, node: EsNode): string {
  const [start, end] = rangeOf(node);
  return quoteSource(context.source.text.slice(start, end));
}

/** Checks a number, a text, or a yes or no. */
export function checkLiteral(
  node: EsExpression & { type: 'Literal' },
  context: CheckContext,
): Expression | null {
  if ('bigint' in node && node.bigint !== undefined) {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'A number with an n behind it has no place in a plan.',
      hint: 'Leave the n out.',
    });
  }
  if ('regex' in node && node.regex !== undefined) {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'A text pattern has no place in a plan.',
      hint: 'Compare with ===.',
    });
  }
  if (typeof node.value === 'number') {
    if (!Number.isFinite(node.value)) {
      return report(context, node, {
        rule: 'not-finite',
        message: `${textOf(context, node)} is too large for a number.`,
      });
    }
    return { op: 'value', kind: 'number', value: node.value };
  }
  if (typeof node.value === 'string') return { op: 'value', kind: 'text', value: node.value };
  if (typeof node.value === 'boolean') return { op: 'value', kind: 'yesno', value: node.value };
  return report(context, node, {
    rule: 'not-in-the-language',
    message: '“null” has no place in a plan.',
    hint: 'Leave the attribute out, or use when={…}.',
  });
}

/** Checks a bare name: a unit, a size, a choice or a derived value. */
export function checkName(
  node: EsNode & { type: 'Identifier' },
  context: CheckContext,
  isFactor: boolean,
): Expression | null {
  const { name } = node;
  const unit = UNITS.get(name);
  const meaning = context.scope.get(name);
  if (unit && (isFactor || meaning === undefined)) return { op: 'value', kind: unit.kind, value: unit.value };
  if (meaning === undefined) {
    const called = FUNCTIONS.get(name);
    if (called) {
      return report(context, node, {
        rule: 'function-without-values',
        message: `“${name}” is a function and needs values in brackets.`,
        hint: `Write ${called.usage}.`,
      });
    }
    const near = suggestName(name, [...context.scope.keys(), ...UNITS.keys(), ...FUNCTIONS.keys()]);
    return report(context, node, {
      rule: 'unknown-name',
      message: `Nothing in this plan is called “${name}”.`,
      found: name,
      hint: near
        ? `Did you mean ${near}?`
        : `Declare it with <Size name="${name}" …/> or <Let name="${name}" value={…} />.`,
    });
  }
  if (meaning.type === 'material' || meaning.type === 'part') {
    const members = meaning.type === 'material' ? [...meaning.members] : PART_MEMBERS;
    return report(context, node, {
      rule: 'needs-member',
      message: `“${name}” is a ${meaning.type}, not a value.`,
      hint: `Write ${members.map((member) => `${name}.${member}`).join(', ')}.`,
    });
  }
  return meaning.kind === null ? null : { op: 'name', kind: meaning.kind, name };
}

/** Checks a measure of a material or a part: `ply.thickness`, `A.qty`. */
export function checkMember(
  node: EsExpression & { type: 'MemberExpression' },
  context: CheckContext,
): Expression | null {
  if (node.computed || node.property.type !== 'Identifier') {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: 'Square brackets behind a name have no place in a plan.',
      hint: 'Write a plain point: ply.thickness.',
    });
  }
  if (node.object.type !== 'Identifier') {
    return report(context, node, {
      rule: 'not-in-the-language',
      message: `“${textOf(context, node.object)}” has no members.`,
      hint: 'Only a material and a part have members: ply.thickness, A.length.',
    });
  }
  const { name } = node.object;
  const member = node.property.name;
  const meaning = context.scope.get(name);
  if (meaning === undefined) {
    const marks = [...context.scope].filter(
      ([, found]) => found.type === 'material' || found.type === 'part',
    );
    const near = suggestName(
      name,
      marks.map(([known]) => known),
    );
    return report(context, node.object, {
      rule: 'unknown-name',
      message: `Nothing in this plan is called “${name}”.`,
      found: name,
      hint: near
        ? `Did you mean ${near}.${member}?`
        : 'Declare it with <Material name="…" …/> or <Part mark="…" …/>.',
    });
  }
  if (meaning.type !== 'material' && meaning.type !== 'part') {
    return report(context, node, {
      rule: 'no-members',
      message: `“${name}” is a ${meaning.type === 'let' ? 'derived value' : meaning.type} and has no members.`,
      hint: `Write ${name} alone.`,
    });
  }
  const all = meaning.type === 'material' ? MATERIAL_MEMBERS : PART_MEMBERS;
  const known = all.find((candidate) => candidate === member);
  if (known === undefined) {
    const near = suggestName(member, all);
    return report(context, node, {
      rule: 'unknown-member',
      message: `A ${meaning.type} has no “${member}”.`,
      found: member,
      wanted: all.join(', '),
      hint: near
        ? `Did you mean ${name}.${near}?`
        : `Write ${all.map((each) => `${name}.${each}`).join(', ')}.`,
    });
  }
  if (meaning.type === 'material' && !meaning.members.has(known)) {
    return report(context, node, {
      rule: 'undeclared-measure',
      message: `The material “${name}” states no ${known}.`,
      hint: `Add ${known}="…" to <Material name="${name}" …/>.`,
    });
  }
  return {
    op: 'member',
    kind: known === 'qty' ? 'number' : 'length',
    of: meaning.type,
    name,
    member: known satisfies Member,
  };
}
