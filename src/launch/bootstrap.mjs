/**
 * The first step of `npm start`, `npm test` and the other scripts: makes sure that what the house needs is on the machine, then hands over to the
 * script named on the command line. It uses nothing but Node itself, since at this point nothing else may be there.
 */
import { spawn, spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { fileURLToPath } from 'node:url';

const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), '../..');
const script = process.argv[2] ?? 'start';
const SCRIPTS = ['start', 'test', 'dev', 'check', 'bench'];

/** Debian packages: a file that each brings, by which it is known to be there. */
const PACKAGES = {
  postgresql: () => existsSync('/usr/lib/postgresql'),
  chromium: () => existsSync('/usr/bin/chromium'),
  qpdf: () => existsSync('/usr/bin/qpdf'),
  'poppler-utils': () => existsSync('/usr/bin/pdftotext'),
  units: () => existsSync('/usr/bin/units'),
};
const NEEDED = {
  start: ['postgresql'],
  dev: ['postgresql'],
  check: [],
  bench: ['postgresql', 'qpdf', 'poppler-utils'],
  test: ['postgresql', 'chromium', 'qpdf', 'poppler-utils', 'units'],
};

function fail(message) {
  console.error(`\n${message}\n`);
  process.exit(1);
}

function checkNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major !== 20 || minor < 19)
    fail(`Benchleaf runs on Node.js 20 (20.19 or later); this is ${process.versions.node}.`);
}

function installPackages(names) {
  const missing = names.filter((name) => !PACKAGES[name]());
  if (missing.length === 0) return;
  if (process.getuid?.() !== 0) {
    fail(
      `These Debian packages are missing: ${missing.join(' ')}\nInstall them with:  sudo apt-get install --no-install-recommends ${missing.join(' ')}`,
    );
  }
  console.log(`Installing from Debian: ${missing.join(' ')}`);
  if (missing.includes('postgresql') && !existsSync('/etc/postgresql-common/createcluster.conf')) {
    // Our cluster is private; the package need not make one of its own.
    mkdirSync('/etc/postgresql-common', { recursive: true });
    writeFileSync('/etc/postgresql-common/createcluster.conf', 'create_main_cluster = false\n');
  }
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const options = ['-y', '-qq', '-o', 'Dpkg::Options::=--force-confold', '--no-install-recommends'];
  const run = (args) => spawnSync('apt-get', args, { stdio: ['ignore', 'ignore', 'inherit'], env });
  run(['update', '-qq']);
  if (run(['install', ...options, ...missing]).status !== 0)
    fail(`apt-get could not install ${missing.join(' ')}.`);
}

/** Runs `work` while no other script of this checkout installs; a lock left by a killed one is taken over. */
function withInstallLock(work) {
  const lock = path.join(root, '.data', 'install.lock');
  mkdirSync(path.dirname(lock), { recursive: true });
  const deadline = Date.now() + 10 * 60_000;
  for (;;) {
    try {
      mkdirSync(lock);
      break;
    } catch {
      const age = existsSync(lock) ? Date.now() - statSync(lock).mtimeMs : 0;
      if (age > 5 * 60_000) rmSync(lock, { recursive: true, force: true });
      else if (Date.now() > deadline)
        fail(
          'Another installation has been running for ten minutes. Remove .data/install.lock and try again.',
        );
      else Atomics.wait(new Int32Array(new SharedArrayBuffer(4)), 0, 0, 500);
    }
  }
  try {
    work();
  } finally {
    rmSync(lock, { recursive: true, force: true });
  }
}

function installModules() {
  const stamp = path.join(root, 'node_modules', '.benchleaf-lock');
  const hash = createHash('sha256')
    .update(readFileSync(path.join(root, 'package-lock.json')))
    .digest('hex');
  const isCurrent = () => existsSync(stamp) && readFileSync(stamp, 'utf8') === hash;
  if (isCurrent()) return;
  withInstallLock(() => {
    if (isCurrent()) return;
    console.log('Installing packages (npm ci) …');
    // Install scripts stay off: what we use ships its binaries as packages.
    const result = spawnSync(
      'npm',
      ['ci', '--ignore-scripts', '--no-audit', '--no-fund', '--loglevel=error'],
      { cwd: root, stdio: 'inherit' },
    );
    if (result.status !== 0) fail('npm ci failed; see above.');
    writeFileSync(stamp, hash);
  });
}

if (!SCRIPTS.includes(script)) fail(`There is no script “${script}”. There are: ${SCRIPTS.join(', ')}.`);
checkNode();
installPackages(NEEDED[script]);
installModules();

const env = { ...process.env, NODE_NO_WARNINGS: '1', ASTRO_TELEMETRY_DISABLED: '1', TZ: 'UTC' };
// `.env` holds settings of one's own; what the shell says wins over it.
const envFile = path.join(root, '.env');
const own = existsSync(envFile) ? ['--env-file', envFile] : [];
const tsx = path.join(root, 'node_modules', 'tsx', 'dist', 'cli.mjs');
const child = spawn(
  process.execPath,
  [...own, tsx, path.join(root, 'src', 'launch', `${script}.ts`), ...process.argv.slice(3)],
  { cwd: root, stdio: 'inherit', env },
);
// The script cleans up by itself; this process only waits for it.
for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => child.kill(signal));
child.on('exit', (code, signal) => process.exit(signal ? 1 : (code ?? 1)));
