import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';

export interface ProcessToStart {
  name: string;
  /** Script for tsx, or with `isNode` for Node itself, relative to the checkout. */
  script: string;
  args?: string[];
  env: Record<string, string>;
  isNode?: boolean;
  /** Leaves the process's output out of the terminal unless it fails. */
  isQuiet?: boolean;
}

export interface Supervisor {
  start(process: ProcessToStart): ChildProcess;
  /** Runs to the end; throws when it fails. */
  run(process: ProcessToStart): Promise<void>;
  stopAll(): Promise<void>;
}

const TSX = path.join('node_modules', 'tsx', 'dist', 'cli.mjs');
const STOP_MS = 9_000;

const wait = (ms: number) => new Promise((resolve) => setTimeout(resolve, ms));

function signalGroup(pid: number, signal: NodeJS.Signals): void {
  try {
    process.kill(-pid, signal);
  } catch {
    // It has gone already.
  }
}

/** Processes of an earlier run that was killed before it could stop them, as written down in the data folder. */
function endStale(file: string): void {
  if (!existsSync(file)) return;
  for (const line of readFileSync(file, 'utf8').split('\n')) {
    const [pid, script] = line.split(' ');
    if (!pid || !script) continue;
    try {
      if (readFileSync(`/proc/${pid}/cmdline`, 'utf8').includes(script)) signalGroup(Number(pid), 'SIGKILL');
    } catch {
      // Nothing of that number is there.
    }
  }
  rmSync(file, { force: true });
}

/**
 * Starts processes and answers for them: each runs in a group of its own, its lines get its name in front, one that ends by itself ends the whole house,
 * and `stopAll` leaves none behind.
 * @param folder where the process numbers are kept for the next run to clean up after a kill
 * @param onDeath called with a message when a process ends without being asked to
 */
export function createSupervisor(folder: string, onDeath: (message: string) => void): Supervisor {
  const running = new Map<ChildProcess, string>();
  let isStopping = false;
  mkdirSync(folder, { recursive: true });
  const pidFile = path.join(folder, 'processes');
  endStale(pidFile);

  const launch = (item: ProcessToStart): ChildProcess => {
    const args = [...(item.isNode ? [] : [TSX]), item.script, ...(item.args ?? [])];
    const child = spawn(process.execPath, args, {
      env: { ...process.env, ...item.env },
      detached: true,
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    running.set(child, item.name);
    if (child.pid) writeFileSync(pidFile, `${String(child.pid)} ${item.script}\n`, { flag: 'a' });
    const kept: string[] = [];
    const say = (chunk: Buffer) => {
      for (const line of chunk.toString().split('\n').filter(Boolean)) {
        kept.push(line);
        if (kept.length > 60) kept.shift();
        if (!item.isQuiet) console.log(`${item.name.padEnd(9)}| ${line}`);
      }
    };
    child.stdout.on('data', say);
    child.stderr.on('data', say);
    child.once('exit', (code) => {
      running.delete(child);
      if (item.isQuiet && code !== 0 && !isStopping)
        console.log(kept.map((line) => `${item.name.padEnd(9)}| ${line}`).join('\n'));
    });
    return child;
  };

  return {
    start(item) {
      const child = launch(item);
      child.once('exit', (code, signal) => {
        if (!isStopping) onDeath(`${item.name} ended by itself (${signal ?? String(code)}).`);
      });
      return child;
    },
    async run(item) {
      const child = launch(item);
      const code = await new Promise<number | null>((resolve) => child.once('exit', resolve));
      if (code !== 0) throw new Error(`${item.name} failed (${String(code)}); see above.`);
    },
    async stopAll() {
      isStopping = true;
      // The last started first: those who use a service go before it does.
      for (const [child] of [...running].reverse()) {
        if (!child.pid) continue;
        const gone = new Promise((resolve) => child.once('exit', resolve));
        signalGroup(child.pid, 'SIGTERM');
        await Promise.race([gone, wait(STOP_MS)]);
        signalGroup(child.pid, 'SIGKILL');
      }
      rmSync(pidFile, { force: true });
    },
  };
}

/** Waits until an address answers with success. @throws Error after `seconds` */
export async function waitForAddress(url: string, name: string, seconds = 60): Promise<void> {
  const deadline = Date.now() + seconds * 1_000;
  for (;;) {
    try {
      const answer = await fetch(url, { signal: AbortSignal.timeout(3_000) });
      if (answer.ok || answer.status === 403) return;
    } catch {
      // Not up yet.
    }
    if (Date.now() > deadline)
      throw new Error(`${name} did not answer on ${url} within ${String(seconds)} s.`);
    await wait(150);
  }
}
