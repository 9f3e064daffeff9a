import type { Root, RootContent, PhrasingContent } from 'mdast';
import remarkFrontmatter from 'remark-frontmatter';
import remarkGfm from 'remark-gfm';
import remarkMdx from 'remark-mdx';
import remarkParse from 'remark-parse';
import { unified } from 'unified';

import { precheck } from './precheck.ts';
import type { ProblemList } from './problems.ts';
import type { Source } from './source.ts';

export type MdxNode = RootContent | PhrasingContent;
/** A component in the tree: on lines of its own (flow) or inside a paragraph (text). */
export type Element = Extract<MdxNode, { type: 'mdxJsxFlowElement' | 'mdxJsxTextElement' }>;
export type ElementAttribute = Extract<Element['attributes'][number], { type: 'mdxJsxAttribute' }>;

/** The tree of a plan, and where an expression was blanked because its fault is reported already. */
export interface ParsedText {
  tree: Root;
  blanked: ReadonlySet<number>;
}

const processor = unified()
  .use(remarkParse)
  .use(remarkFrontmatter, ['yaml'])
  .use(remarkGfm)
  .use(remarkMdx)
  .freeze();

/** The parser's own wording, in ours, with the cure. */
const WORDINGS: readonly (readonly [RegExp, message: string, hint: string])[] = [
  [
    /Expected a closing tag for `<([^`>]*)>`/,
    'The component <$1> is opened and not closed.',
    'Close it with </$1>, or write <$1 … /> when nothing stands in it.',
  ],
  [
    /Unexpected closing (?:slash `\/` in )?tag(?: `<\/([^`>]*)>`)?/,
    'A component is closed here that was not opened.',
    'Leave the closing tag out, or open the component before.',
  ],
  [
    /Unexpected character `!`/,
    'An HTML comment or instruction has no place in a plan.',
    'Write a comment as {/* … */}.',
  ],
  [
    /before name|in name|before local name/,
    'Behind < a component’s name is expected.',
    'Write \\< for a “less than” that is only text, and [text](https://…) for a link.',
  ],
  [
    /attribute/i,
    'The attributes of this component cannot be read.',
    'Write name="text", name={expression} or the name alone.',
  ],
  [
    /import|export|acorn/i,
    'The text cannot be read here.',
    'Leave import and export out; a plan has everything it needs in its own file.',
  ],
];

function wordOf(reason: string): { message: string; hint: string } {
  for (const [pattern, message, hint] of WORDINGS) {
    const match = pattern.exec(reason);
    if (match) {
      const name = match[1] ?? '…';
      return { message: message.replaceAll('$1', name), hint: hint.replaceAll('$1', name) };
    }
  }
  return {
    message: 'The text cannot be read from here on.',
    hint: 'Check that every component and every brace is closed.',
  };
}

interface ParserFault {
  reason?: unknown;
  line?: unknown;
  column?: unknown;
  place?: { start?: { line: number; column: number }; line?: number; column?: number };
}

function placeOf(fault: ParserFault): { line: number; column: number } {
  // An unclosed component is told in words only: “(12:1-12:7)”.
  const told = typeof fault.reason === 'string' ? / \((\d+):(\d+)/.exec(fault.reason) : null;
  if (told) return { line: Number(told[1]), column: Number(told[2]) };
  const line =
    fault.place?.start?.line ?? fault.place?.line ?? (typeof fault.line === 'number' ? fault.line : 1);
  const column =
    fault.place?.start?.column ??
    fault.place?.column ??
    (typeof fault.column === 'number' ? fault.column : 1);
  return { line, column };
}

/**
 * Parses the text of a plan to a tree, without running any of it. Nothing is compiled to code: expressions stay as
 * syntax trees. Null means that the text could not be read; the problems say where and why.
 */
export function parseText(source: Source, problems: ProblemList): ParsedText | null {
  const checked = precheck(source, problems);
  if (checked === null) return null;
  try {
    return { tree: processor.parse(checked.text), blanked: checked.blanked };
  } catch (fault) {
    if (fault instanceof RangeError) {
      problems.add(
        { line: 1, column: 1, length: 1 },
        {
          rule: 'nested-too-deep',
          message: 'The plan is nested too deep to be read.',
          hint: 'Close each component, list and quote.',
        },
      );
      return null;
    }
    const parserFault = fault as ParserFault;
    if (typeof parserFault.reason !== 'string') throw fault;
    const place = placeOf(parserFault);
    problems.add({ ...place, length: 1 }, { rule: 'text-syntax', ...wordOf(parserFault.reason) });
    return null;
  }
}
