import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import * as z from 'zod';

/*
 * The registry's audit endpoint cannot be reached from where these tests run, so the known advisories stand here (as of 2026-12-01) and the lock file is
 * held against them. DEVELOPERS.md explains those that have no fix for our version of Astro.
 */
const lock = z
  .object({ packages: z.record(z.string(), z.object({ version: z.string().optional() })) })
  .parse(JSON.parse(readFileSync('package-lock.json', 'utf8')));

const versionsOf = (name: string) =>
  Object.entries(lock.packages).flatMap(([place, { version }]) =>
    place.endsWith(`node_modules/${name}`) && version ? [version] : [],
  );

const isAtLeast = (version: string, least: string): boolean => {
  const [a, b] = [version, least].map((text) => text.split(/[.-]/).map(Number));
  for (let part = 0; part < 3; part += 1) {
    const difference = (a?.[part] ?? 0) - (b?.[part] ?? 0);
    if (difference !== 0) return difference > 0;
  }
  return true;
};

const LEAST: [name: string, version: string, advisory: string][] = [
  ['sharp', '0.35.4', 'GHSA-26w7-cxv4-gfx2, GHSA-rgj7-g3m4-5g8c, GHSA-f88m-g3jw-g9cj'],
  ['astro', '5.18.2', 'CVE-2026-33769, CVE-2025-66202'],
  ['@astrojs/node', '9.5.5', 'CVE-2026-27729, CVE-2026-27829'],
  ['better-auth', '1.7.25', 'CVE-2026-45364, CVE-2026-45337'],
  ['nodemailer', '9.0.1', 'CVE-2025-14874 and six GHSA of 2026'],
  ['sequelize', '6.37.8', 'CVE-2026-30951'],
  ['vite', '6.4.3', 'CVE-2026-39363, -39364, -39365, -53571'],
  ['vitest', '3.2.5', 'CVE-2026-47429'],
];

describe('the lock file', () => {
  it.each(LEAST)('has %s at %s or later (%s)', (name, least) => {
    const versions = versionsOf(name);
    expect(versions.length).toBeGreaterThan(0);
    for (const version of versions) expect(isAtLeast(version, least), `${name} ${version}`).toBe(true);
  });

  it('holds the overrides: one sharp whose codecs are sound, and a unifont that runs on this Node', () => {
    expect(versionsOf('sharp')).toEqual(['0.35.5']);
    expect(versionsOf('unifont')).toEqual(['0.7.4']);
  });

  it('has none of the packages that are known to be unsafe without a fix', () => {
    for (const name of ['expr-eval', 'vm2', 'safe-eval']) expect(versionsOf(name)).toEqual([]);
  });
});

describe('the source', () => {
  const files = readdirSync('src', { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && /\.(ts|tsx|astro|mjs)$/.test(entry.name))
    .map((entry) => path.join(entry.parentPath, entry.name));

  it('never turns text into code', () => {
    const guilty = files.filter((file) =>
      /\beval\(|new Function\b|node:vm|@mdx-js\/mdx|set:html|define:vars|server:defer|transition:/.test(
        readFileSync(file, 'utf8').replace(/^\s*(\/\/|\*|\/\*).*$/gm, ''),
      ),
    );
    expect(guilty).toEqual([]);
  });
});
