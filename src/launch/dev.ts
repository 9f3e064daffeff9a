/** `npm run dev`: the stand-ins and the worker, with Astro's own server reloading what is changed. On loopback only, and without the front. */
import path from 'node:path';
import { prepareData, startHouse, type House } from './house.ts';
import { portsFrom } from './ports.ts';

const base = Number(process.env['PORT'] || 4500);
let house: House | null = null;
let isLeaving = false;

async function leave(code: number, message?: string): Promise<void> {
  if (isLeaving) return;
  isLeaving = true;
  if (message) console.log(message);
  await house?.stop();
  process.exit(code);
}
process.on('SIGINT', () => void leave(0));
process.on('SIGTERM', () => void leave(0));

async function start(): Promise<void> {
  house = await startHouse({
    ports: portsFrom(base),
    folder: path.resolve('.data', String(base)),
    dist: `dist/${String(base)}`,
    isThrowaway: false,
    onDeath: (message) => void leave(1, message),
  });
  await prepareData(house, { isSeeded: true });
  const env = { ...house.env, NODE_ENV: 'development' };
  house.supervisor.start({ name: 'worker', script: 'src/server/worker.ts', env });
  house.supervisor.start({
    name: 'astro',
    script: 'node_modules/astro/astro.js',
    args: ['dev', '--port', String(base), '--host', '127.0.0.1'],
    env,
    isNode: true,
  });
}

start().catch((error: unknown) => leave(1, error instanceof Error ? error.message : String(error)));
