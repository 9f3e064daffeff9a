import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import type { Supervisor } from './processes.ts';

/** Everything that the built site is made of. */
const SOURCES = [
  'src',
  'public',
  'content/guides',
  'db/models',
  'db/client.ts',
  'astro.config.mjs',
  'package-lock.json',
  'tsconfig.json',
];

function listFiles(place: string): string[] {
  if (!existsSync(place)) return [];
  const entries = readdirSync(path.dirname(place), { withFileTypes: true });
  const self = entries.find((entry) => entry.name === path.basename(place));
  if (self?.isFile()) return [place];
  return readdirSync(place, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => path.join(entry.parentPath, entry.name));
}

function hashSources(siteUrl: string): string {
  // The address is part of what is built: Astro checks the origin of forms against it.
  const hash = createHash('sha256').update(siteUrl);
  for (const file of SOURCES.flatMap(listFiles).sort())
    hash.update(file).update('\0').update(readFileSync(file)).update('\0');
  return hash.digest('hex');
}

/** Builds the site into its folder; skipped when nothing it is made of has changed since. @returns whether it was built now */
export async function buildSite(
  supervisor: Supervisor,
  dist: string,
  env: Record<string, string>,
): Promise<boolean> {
  const stamp = path.join(dist, '.sources');
  const hash = hashSources(env['SITE_URL'] ?? '');
  if (existsSync(stamp) && readFileSync(stamp, 'utf8') === hash) return false;
  await supervisor.run({
    name: 'build',
    script: 'node_modules/astro/astro.js',
    args: ['build'],
    env: { ...env, BENCHLEAF_DIST: dist },
    isNode: true,
    isQuiet: true,
  });
  writeFileSync(stamp, hash);
  return true;
}
