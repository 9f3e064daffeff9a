import { runTool } from './run-tool.ts';

const bin = (pkg: string, file: string) => `node_modules/${pkg}/${file}`;

/** What must be clean before anything is tried: types, lint, format, the arrows between folders, unused code. */
const CHECKS: readonly { name: string; script: string; args: string[] }[] = [
  { name: 'types', script: bin('astro', 'astro.js'), args: ['check'] },
  { name: 'lint', script: bin('eslint', 'bin/eslint.js'), args: ['.', '--max-warnings', '0'] },
  {
    name: 'format',
    script: bin('prettier', 'bin/prettier.cjs'),
    args: ['--check', '--log-level', 'warn', '.'],
  },
  {
    name: 'arrows',
    script: bin('dependency-cruiser', 'bin/dependency-cruise.mjs'),
    args: ['src', 'db', 'tests', '--config', '.dependency-cruiser.cjs'],
  },
  { name: 'unused code', script: bin('knip', 'bin/knip.js'), args: [] },
];

/** Runs all checks, also after one has failed, and says which did. */
export async function checkAll(): Promise<{ name: string; isClean: boolean }[]> {
  const results = [];
  for (const { name, script, args } of CHECKS) {
    console.log(`\n== ${name}`);
    results.push({ name, isClean: (await runTool(script, args)) === 0 });
  }
  return results;
}
