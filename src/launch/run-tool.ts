import { spawn } from 'node:child_process';

/** Runs a command-line tool of ours or of a package to its end with the terminal's output. @returns its exit code */
export function runTool(
  script: string,
  args: readonly string[],
  env: Record<string, string> = {},
): Promise<number> {
  return new Promise((resolve) => {
    const child = spawn(process.execPath, [script, ...args], {
      stdio: ['ignore', 'inherit', 'inherit'],
      env: { ...process.env, ...env },
    });
    child.once('exit', (code) => {
      resolve(code ?? 1);
    });
  });
}
