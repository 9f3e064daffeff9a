/** `npm test`: everything, from types to the journeys in a real browser, on ports and data of its own. */
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import * as z from 'zod';
import { buildSite } from './build-site.ts';
import { checkAll } from './check-all.ts';
import { prepareData, startHouse, startSite, type House } from './house.ts';
import { findFreeBase, portsFrom } from './ports.ts';
import { runTool } from './run-tool.ts';

interface Tally {
  name: string;
  passed: number;
  failed: number;
}

const scratch = mkdtempSync(path.join(tmpdir(), 'benchleaf-test-'));
let house: House | null = null;

async function clearUp(): Promise<void> {
  await house?.stop();
  house = null;
  rmSync(scratch, { recursive: true, force: true });
}
for (const signal of ['SIGINT', 'SIGTERM'] as const)
  process.on(signal, () => void clearUp().then(() => process.exit(130)));

function readReport<Schema extends z.ZodType>(file: string, schema: Schema): z.infer<Schema> | null {
  try {
    return schema.parse(JSON.parse(readFileSync(file, 'utf8')));
  } catch {
    return null;
  }
}

async function runVitest(): Promise<Tally> {
  const report = path.join(scratch, 'vitest.json');
  const code = await runTool('node_modules/vitest/vitest.mjs', [
    'run',
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${report}`,
  ]);
  const read = readReport(report, z.object({ numPassedTests: z.number(), numFailedTests: z.number() }));
  const failed = read?.numFailedTests ?? 0;
  return {
    name: 'unit, outside, component and service tests',
    passed: read?.numPassedTests ?? 0,
    failed: code === 0 ? failed : Math.max(1, failed),
  };
}

async function runJourneys(): Promise<Tally> {
  const ports = portsFrom(await findFreeBase());
  // Beside the other built sites: a build outside the checkout does not find its packages.
  const dist = `dist/test-${String(ports.web)}`;
  try {
    house = await startHouse({
      ports,
      folder: path.join(scratch, 'house'),
      dist,
      isThrowaway: true,
      onDeath: (message) => {
        console.error(message);
      },
    });
    console.log('Building the site …');
    await buildSite(house.supervisor, dist, house.env);
    await prepareData(house, { isSeeded: true });
    await startSite(house);
    const report = path.join(scratch, 'journeys.json');
    const code = await runTool(
      'node_modules/playwright/cli.js',
      ['test', '-c', 'tests/e2e/playwright.config.ts'],
      {
        ...house.env,
        E2E_SITE: house.env['SITE_URL'] ?? '',
        E2E_MAIL: house.standIns.mail ?? '',
        E2E_PAYMENTS: house.standIns.payments ?? '',
        E2E_SCRATCH: scratch,
        PLAYWRIGHT_JSON_OUTPUT_NAME: report,
      },
    );
    const read = readReport(
      report,
      z.object({ stats: z.object({ expected: z.number(), unexpected: z.number(), flaky: z.number() }) }),
    );
    const failed = (read?.stats.unexpected ?? 0) + (read?.stats.flaky ?? 0);
    return {
      name: 'journeys in the browser',
      passed: read?.stats.expected ?? 0,
      failed: code === 0 ? failed : Math.max(1, failed),
    };
  } finally {
    await house?.stop();
    house = null;
    rmSync(dist, { recursive: true, force: true });
  }
}

async function test(): Promise<number> {
  const tallies: Tally[] = [];
  const checks = await checkAll();
  tallies.push({
    name: 'checks',
    passed: checks.filter((check) => check.isClean).length,
    failed: checks.filter((check) => !check.isClean).length,
  });
  tallies.push(await runVitest());
  tallies.push(
    await runJourneys().catch((error: unknown): Tally => {
      console.error(error instanceof Error ? error.message : error);
      return { name: 'journeys in the browser', passed: 0, failed: 1 };
    }),
  );
  console.log('');
  for (const { name, passed, failed } of tallies)
    console.log(
      `${name.padEnd(46)} ${String(passed).padStart(5)} passed ${String(failed).padStart(4)} failed`,
    );
  const passed = tallies.reduce((sum, tally) => sum + tally.passed, 0);
  const failed = tallies.reduce((sum, tally) => sum + tally.failed, 0);
  console.log(`\n${String(passed)} passed, ${String(failed)} failed`);
  return failed === 0 ? 0 : 1;
}

const code = await test().finally(clearUp);
process.exit(code);
