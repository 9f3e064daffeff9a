import { readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import { expect } from 'playwright/test';
import { signIns } from '#db/seeds/sign-ins.ts';
import { linkIn, makeWord, readMail, signIn, test, waitForIslands } from './house.ts';

const scratch = process.env['E2E_SCRATCH'] ?? 'test-results';
const template = readFileSync('tests/e2e/fixtures/peg-rail-fails.mdx', 'utf8');
const requirement =
  '<Require that={gap >= 60*mm}>Pegs stand less than {60*mm} apart: use fewer pegs or a longer rail.</Require>';

function writePlan(title: string, isMended: boolean): string {
  const file = path.join(scratch, `${isMended ? 'mended' : 'first'}-${makeWord()}.mdx`);
  writeFileSync(file, template.replace('TITLE', title).replace('REQUIRE', isMended ? requirement : ''));
  return file;
}

test('an author writes a plan, mends what the range proof finds, invites a proof builder, sets a price and publishes revision A', async ({
  page,
  browser,
}) => {
  const title = `Peg rail ${makeWord()}`;
  const wenna = signIns[0];
  const bram = signIns.find((person) => person.role === 'proof builder');
  if (!wenna || !bram) throw new Error('the demo has no author');
  await signIn(page, wenna.email, wenna.password);

  await page.goto('/office');
  await page.getByRole('link', { name: 'Low Fell Joinery' }).click();
  await page.getByRole('textbox', { name: 'Title' }).fill(title);
  await page.getByRole('button', { name: 'Lay it on the board' }).click();
  await waitForIslands(page);

  // The text is uploaded and resolves at once, in both units.
  await page.getByLabel('Upload a text').setInputFiles(writePlan(title, false));
  const parts = page.getByRole('table', { name: 'Parts table' });
  // 900 mm by default; the spacer is (900 - 400) / 4 = 125 mm.
  await expect(parts.getByRole('row', { name: /Rail/ })).toContainText('900');
  await expect(parts.getByRole('row', { name: /Spacer/ })).toContainText('125');
  await page.getByRole('button', { name: /inches/i }).click();
  // 900 mm are 35.433 in, 35 7/16 to the nearest thirty-second.
  await expect(parts.getByRole('row', { name: /Rail/ })).toContainText('35 7/16');
  await page.getByRole('button', { name: /millimet/i }).click();
  await page.getByRole('button', { name: 'Save the draft' }).click();
  await expect(page.getByText('All is saved.')).toBeVisible();

  await page.getByLabel('Add a picture').setInputFiles({
    name: 'rail.png',
    mimeType: 'image/png',
    buffer: readFileSync('content/plans/boot-bench/boot-bench.png'),
  });
  await page.getByRole('button', { name: 'Upload', exact: true }).click();
  await expect(page.getByText('rail.png is there')).toBeVisible();
  await waitForIslands(page);

  // At 300 mm the spacer would be negative; the proof finds it and says at which sizes.
  await page.getByRole('button', { name: 'Prove the draft' }).click();
  await expect(page.getByText('The plan fails')).toBeVisible({ timeout: 60_000 });
  await expect(page.getByText(/part B “Spacer” would be/).first()).toBeVisible();

  await page.getByLabel('Upload a text').setInputFiles(writePlan(title, true));
  await page.getByRole('button', { name: 'Save the draft' }).click();
  await expect(page.getByText('All is saved.')).toBeVisible();
  await page.getByRole('button', { name: 'Prove the draft' }).click();
  await expect(page.getByText('The plan holds')).toBeVisible({ timeout: 60_000 });

  await page.getByLabel('E-mail of a proof builder').fill(bram.email);
  await page.getByRole('button', { name: 'Invite' }).click();
  await expect(page.getByText(`An invitation is on its way to ${bram.email}`)).toBeVisible();
  const plan = page.url();

  // The proof builder opens the link, sees the whole draft and reports; the author is told.
  const invitation = linkIn(await readMail(bram.email, new RegExp(title)));
  const other = await browser.newContext();
  const builder = await other.newPage();
  await signIn(builder, bram.email, bram.password);
  await builder.goto(invitation);
  await builder.getByRole('button', { name: 'Accept' }).click();
  await builder.goto(plan.replace('/office/plans/', '/proofs/').split('#')[0] ?? '');
  await expect(builder.getByRole('table', { name: 'Parts table' })).toContainText('Spacer');
  await builder.getByLabel('It holds').check();
  await builder.getByLabel('What you found').fill('Built it at 1200 mm with seven pegs. All well.');
  await builder.getByRole('button', { name: 'Report' }).click();
  await expect(builder.getByText('The report is with the author')).toBeVisible();
  await other.close();
  await readMail(wenna.email, new RegExp(`reports on ${title}`));

  await page.goto(plan);
  await page.getByRole('link', { name: 'Set prices' }).click();
  await page.getByLabel('Personal licence').fill('12.50');
  await page.getByRole('button', { name: 'Set the prices' }).click();
  await expect(page.getByText('The prices hold from the next order on.')).toBeVisible();

  await page.goto(plan);
  await page.getByRole('link', { name: 'Publish' }).click();
  await page.getByRole('button', { name: 'Publish revision A' }).click();
  await expect(page.getByText('Revision A is in the plan chest.')).toBeVisible();

  await page.goto(`/plans?q=${encodeURIComponent(title)}`);
  await page.getByRole('link', { name: title }).first().click();
  await expect(page.getByRole('heading', { level: 1, name: title })).toBeVisible();
  await expect(page.getByText('€12.50').first()).toBeVisible();
});
