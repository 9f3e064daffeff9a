import { readFile } from 'node:fs/promises';
import { parseArgs } from 'node:util';
import * as z from 'zod';
import { type Instance, instanceFileSchema, readInstances, writeLayout } from '#lib/stock/instance.ts';
import { layOut } from '#lib/stock/lay-out.ts';

const USAGE =
  'usage: plan layout --instance FILE.json [--ms N] [--steps N] [--seed N] [--rip-first] [--json]';
const DEFAULT_MS = 1000;
/** With a clock the clock decides; this only keeps the count finite. */
const STEPS_BY_CLOCK = 1_000_000_000;

const flagsSchema = z.object({
  instance: z.string(),
  ms: z.coerce.number().int().nonnegative().optional(),
  steps: z.coerce.number().int().nonnegative().optional(),
  seed: z.coerce.number().int().default(1),
  json: z.boolean().default(false),
  'rip-first': z.boolean().default(false),
});

function readFlags(args: string[]): z.output<typeof flagsSchema> | string {
  try {
    const { values } = parseArgs({
      args,
      options: {
        instance: { type: 'string' },
        ms: { type: 'string' },
        steps: { type: 'string' },
        seed: { type: 'string' },
        json: { type: 'boolean' },
        'rip-first': { type: 'boolean' },
      },
    });
    const checked = flagsSchema.safeParse(values);
    return checked.success ? checked.data : z.prettifyError(checked.error);
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

async function readFileOf(path: string): Promise<z.output<typeof instanceFileSchema> | string> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch {
    return `Cannot read ${path}.`;
  }
  let data: unknown;
  try {
    data = JSON.parse(text);
  } catch (error) {
    return `${path} is not JSON: ${error instanceof Error ? error.message : String(error)}`;
  }
  const checked = instanceFileSchema.safeParse(data);
  return checked.success ? checked.data : `${path} is not an instance:\n${z.prettifyError(checked.error)}`;
}

/**
 * `plan layout`: lays out the instances of a file, each for `--ms` milliseconds or `--steps` steps, and prints the layouts,
 * one object for one instance and a list for a list. Everything else goes to stderr.
 * @returns the exit code: 0 when every part is laid, 1 when some are not, 2 when the arguments or the file are wrong.
 */
export async function runLayoutInstances(args: string[]): Promise<number> {
  const flags = readFlags(args);
  if (typeof flags === 'string') {
    process.stderr.write(`${flags}\n${USAGE}\n`);
    return 2;
  }
  const file = await readFileOf(flags.instance);
  if (typeof file === 'string') {
    process.stderr.write(`${file}\n`);
    return 2;
  }
  const instances: Instance[] = Array.isArray(file) ? file : [file];
  const milliseconds = flags.ms ?? (flags.steps === undefined ? DEFAULT_MS : Infinity);
  const answers = readInstances(instances, flags['rip-first']).map((problem, index) => {
    const start = performance.now();
    const layout = layOut(problem, {
      seed: flags.seed,
      steps: flags.steps ?? STEPS_BY_CLOCK,
      shouldStop: () => performance.now() - start >= milliseconds,
    });
    const elapsedMs = Math.round((performance.now() - start) * 10) / 10;
    return { ...writeLayout(instances[index]?.name ?? '', layout), elapsedMs };
  });
  if (flags.json) process.stdout.write(`${JSON.stringify(Array.isArray(file) ? answers : answers[0])}\n`);
  else {
    for (const { name, used, newCost, lowerBound, elapsedMs } of answers) {
      process.stdout.write(
        `${name || 'instance'}: ${used} pieces, new stock ${newCost} (at least ${lowerBound}), ${elapsedMs} ms\n`,
      );
    }
  }
  for (const { name, unplaced } of answers) {
    for (const { part, qty, reason } of unplaced)
      process.stderr.write(`${name}: ${qty} of ${part} not laid (${reason})\n`);
  }
  return answers.some((answer) => answer.unplaced.length > 0) ? 1 : 0;
}
