/** `npm start`: the whole house in one terminal, on this machine alone. */
import { existsSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { buildSite } from './build-site.ts';
import { prepareData, startHouse, startSite, type House } from './house.ts';
import { isFree, portsFrom } from './ports.ts';

const base = Number(process.env['PORT'] || 4400);
if (!Number.isInteger(base) || base < 1024 || base > 65_000)
  throw new Error(`PORT must be a number from 1024 to 65000, not ${String(process.env['PORT'])}`);
const ports = portsFrom(base);
const folder = path.resolve('.data', String(base));
const dist = `dist/${String(base)}`;
const lock = path.join(folder, 'running');

let house: House | null = null;
let isLeaving = false;

async function leave(code: number, message?: string): Promise<void> {
  if (isLeaving) return;
  isLeaving = true;
  console.log(message ? `\n${message}\nStopping the rest …` : '\nStopping …');
  await house?.stop();
  rmSync(lock, { force: true });
  console.log('All is stopped.');
  process.exit(code);
}
process.on('SIGINT', () => void leave(0));
process.on('SIGTERM', () => void leave(0));
process.on('SIGHUP', () => void leave(0));

function isAlive(pid: number): boolean {
  try {
    process.kill(pid, 0);
    return readFileSync(`/proc/${String(pid)}/cmdline`, 'utf8').includes('launch/start');
  } catch {
    return false;
  }
}

function takeLock(): void {
  mkdirSync(folder, { recursive: true });
  const pid = existsSync(lock) ? Number(readFileSync(lock, 'utf8')) : 0;
  if (pid && isAlive(pid)) {
    console.error(
      `Benchleaf runs on port ${String(base)} already (process ${String(pid)}). Stop it, or take other ports: PORT=${String(base + 100)} npm start`,
    );
    process.exit(1);
  }
  writeFileSync(lock, String(process.pid));
}

async function tellWhereToLook({ standIns, env }: House): Promise<void> {
  const lines = [`The site           ${env['SITE_URL'] ?? ''}`];
  if (standIns.mail) lines.push(`Mail that was sent ${standIns.mail}`);
  if (standIns.payments)
    lines.push(`Payments           ${standIns.payments} (stand-in: no real money; card 4242 4242 4242 4242)`);
  console.log(`\n${lines.join('\n')}\n`);
  const { signIns } = await import('#db/seeds/sign-ins.ts');
  console.log('Sign in as');
  for (const person of signIns)
    console.log(`  ${person.role.padEnd(22)} ${person.email.padEnd(36)} ${person.password}`);
  console.log('\nCtrl-C stops everything.\n');
}

async function start(): Promise<void> {
  takeLock();
  const taken: number[] = [];
  // PostgreSQL and the stand-ins of a killed run are ended by their own steps; the site's own port must be free now.
  if (!(await isFree(ports.web))) taken.push(ports.web);
  if (taken.length) {
    rmSync(lock, { force: true });
    console.error(`Port ${taken.join(', ')} is in use. Take others: PORT=${String(base + 100)} npm start`);
    process.exit(1);
  }
  console.log('Starting PostgreSQL and the stand-ins …');
  house = await startHouse({
    ports,
    folder,
    dist,
    isThrowaway: false,
    onDeath: (message) => void leave(1, message),
  });
  console.log('Building the site …');
  const isNew = await buildSite(house.supervisor, dist, house.env);
  console.log(isNew ? 'The site is built.' : 'The site is unchanged since the last build.');
  console.log('Preparing the database and the demo …');
  await prepareData(house, { isSeeded: true });
  await startSite(house);
  await tellWhereToLook(house);
}

start().catch((error: unknown) => leave(1, error instanceof Error ? error.message : String(error)));
