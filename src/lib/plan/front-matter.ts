import { parseDocument, LineCounter, isMap } from 'yaml';
import * as z from 'zod';

import type { ProblemList } from './problems.ts';
import { suggestName } from './suggest.ts';
import type { FrontMatter, Place } from './types.ts';

const text = (most: number): z.ZodString => z.string().trim().min(1).max(most);
const words = z.array(text(60)).max(30).default([]);

/** The front matter of a plan. */
const frontMatterSchema = z.strictObject({
  title: text(120),
  summary: text(200),
  skill: z.union([z.literal(1), z.literal(2), z.literal(3), z.literal(4), z.literal(5)]),
  hours: z
    .tuple([z.number().positive().max(10_000), z.number().positive().max(10_000)])
    .refine(([low, high]) => low <= high),
  spaces: words,
  tools: words,
  tags: words,
  cover: z
    .string()
    .regex(/^[A-Za-z0-9][A-Za-z0-9._-]{0,99}$/)
    .optional(),
});

const WANTED: ReadonlyMap<string, readonly [wanted: string, hint: string]> = new Map<
  string,
  readonly [string, string]
>([
  ['title', ['a text of 1 to 120 characters', 'title: Boot bench for a narrow hall']],
  ['summary', ['a text of 1 to 200 characters', 'summary: A low bench with open bays for boots.']],
  ['skill', ['a whole number from 1 to 5', 'skill: 2']],
  ['hours', ['the fewest and the most hours of work', 'hours: [7, 12]']],
  ['spaces', ['a list of places', 'spaces: [hall, alcove]']],
  ['tools', ['a list of tools', 'tools: [track saw, drill]']],
  ['tags', ['a list of words', 'tags: [bench, storage]']],
  ['cover', ['the name of an uploaded picture', 'cover: boot-bench.jpg']],
]);

const FALLBACK: FrontMatter = {
  title: '',
  summary: '',
  skill: 1,
  hours: [1, 1],
  spaces: [],
  tools: [],
  tags: [],
};

/** Reads the front matter. @param yaml its text without the fences @param firstLine the line of the file that its first line stands on */
export function readFrontMatter(
  yaml: string | undefined,
  firstLine: number,
  problems: ProblemList,
): FrontMatter {
  if (yaml === undefined) {
    problems.add(
      { line: 1, column: 1, length: 1 },
      {
        rule: 'front-matter-missing',
        message: 'The plan has no front matter.',
        wanted: [...WANTED.keys()].join(', '),
        hint: 'Begin the file with a line of three dashes, then title: …, summary: …, skill: …, hours: […], and three dashes again.',
      },
    );
    return FALLBACK;
  }
  const lines = new LineCounter();
  // Aliases are switched off: a few lines of them can unfold to gigabytes.
  const document = parseDocument(yaml, {
    lineCounter: lines,
    prettyErrors: false,
    uniqueKeys: true,
    merge: false,
  });
  const placeAt = (offset: number, length = 1): Place => {
    const { line, col } = lines.linePos(offset);
    return { line: firstLine - 1 + Math.max(1, line), column: Math.max(1, col), length };
  };
  for (const error of document.errors) {
    problems.add(placeAt(error.pos[0]), {
      rule: 'front-matter-syntax',
      message: 'The front matter cannot be read here.',
      hint: 'Write one name: value on a line; put a value with a colon in it in double quotes.',
    });
  }
  if (document.errors.length > 0) return FALLBACK;
  let values: unknown;
  try {
    values = document.toJS({ maxAliasCount: 0 });
  } catch {
    problems.add(placeAt(0), {
      rule: 'front-matter-syntax',
      message: 'The front matter uses references.',
      hint: 'Write each value out.',
    });
    return FALLBACK;
  }
  const placeOfKey = (key: string): Place => {
    const contents = document.contents;
    const pair = isMap(contents) ? contents.items.find((item) => String(item.key) === key) : undefined;
    const range = (pair?.key as { range?: [number, number, number] } | undefined)?.range;
    return range ? placeAt(range[0], Math.max(1, range[1] - range[0])) : placeAt(0, 1);
  };
  const read = frontMatterSchema.safeParse(values);
  if (read.success) return read.data;
  const told = new Set<string>();
  for (const issue of read.error.issues) {
    const keys = issue.code === 'unrecognized_keys' ? issue.keys : [String(issue.path[0] ?? '')];
    for (const key of keys) {
      if (told.has(key)) continue;
      told.add(key);
      if (issue.code === 'unrecognized_keys') {
        const near = suggestName(key, WANTED.keys());
        problems.add(placeOfKey(key), {
          rule: 'front-matter-unknown',
          message: `The front matter has no “${key}”.`,
          found: key,
          wanted: [...WANTED.keys()].join(', '),
          hint: near ? `Did you mean ${near}?` : 'Leave the line out.',
        });
        continue;
      }
      const [wanted, hint] = WANTED.get(key) ?? ['name: value lines', 'title: Boot bench for a narrow hall'];
      const isMissing = typeof values !== 'object' || values === null || !Object.hasOwn(values, key);
      problems.add(isMissing ? placeAt(0) : placeOfKey(key), {
        rule: isMissing ? 'front-matter-missing' : 'front-matter-value',
        message: isMissing
          ? `The front matter lacks “${key || 'title'}”.`
          : `“${key}” in the front matter is not what it should be.`,
        wanted,
        hint: `Write ${hint}`,
      });
    }
  }
  return FALLBACK;
}
