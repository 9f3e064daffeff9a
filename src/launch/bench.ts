/** `npm run bench [NAME]`: every benchmark in turn, each printing ratios against a baseline that it names and runs beside. */
import { readdirSync } from 'node:fs';
import { runTool } from './run-tool.ts';

const wanted = process.argv[2] ?? '';
const files = readdirSync('tests/bench').filter(
  (file) => file.endsWith('.bench.ts') && file.includes(wanted),
);
let failed = 0;
for (const file of files) {
  console.log(`\n== ${file}`);
  if ((await runTool('node_modules/tsx/dist/cli.mjs', [`tests/bench/${file}`])) !== 0) failed += 1;
}
process.exit(failed ? 1 : 0);
