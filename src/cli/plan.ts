import { runCheck } from './check.ts';
import { runDiff } from './diff.ts';
import { runLayoutPlan } from './layout-plan.ts';
import { runLayoutInstances } from './layout.ts';
import { runProve } from './prove.ts';
import { runResolve } from './resolve.ts';

const USAGE = `usage: plan check FILE [--json]
       plan resolve FILE [--set width=900mm …] [--measured ply=17.6mm …] [--units mm|in] [--json|--csv|--table]
       plan diff OLD NEW [--set width=900mm …] [--measured ply=17.6mm …] [--units mm|in] [--json]
       plan prove FILE [--seed N] [--tries N] [--units mm|in] [--json]
       plan layout FILE [--set width=900mm …] [--kerf 3.2mm] [--trim 10mm] [--units mm|in] [--json]
       plan layout --instance FILE.json [--ms N] [--json]

exit code: 0 clean, 1 with problems, 2 wrong use`;

type Command = (args: string[]) => number | Promise<number>;

const COMMANDS: ReadonlyMap<string, Command> = new Map<string, Command>([
  ['check', runCheck],
  ['resolve', runResolve],
  ['diff', runDiff],
  ['prove', runProve],
  // Instance files hold bare stock problems; everything else is a plan.
  [
    'layout',
    (args) => (args.some((arg) => arg.startsWith('--instance')) ? runLayoutInstances : runLayoutPlan)(args),
  ],
]);

async function main(args: string[]): Promise<number> {
  const [name, ...rest] = args;
  const command = COMMANDS.get(name ?? '');
  if (command) return command(rest);
  const isAsked = name === '--help' || name === 'help';
  (isAsked ? process.stdout : process.stderr).write(`${USAGE}\n`);
  return isAsked ? 0 : 2;
}

process.exitCode = await main(process.argv.slice(2));
