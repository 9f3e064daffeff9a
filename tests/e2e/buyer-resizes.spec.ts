import path from 'node:path';
import { expect, type Page } from 'playwright/test';
import { makeWord, readPdf, test, waitForIslands } from './house.ts';
import { buyAsStranger } from './shop.ts';

const scratch = process.env['E2E_SCRATCH'] ?? 'test-results';

/** The parts table as it reads: mark, quantity and the three sizes of each row. */
async function readTable(page: Page): Promise<string[]> {
  const rows = await page.getByRole('table', { name: 'Parts table' }).locator('tbody tr').all();
  return Promise.all(
    rows.map(async (row) => {
      const mark = (await row.getAttribute('data-mark')) ?? '';
      const sizes = await row.locator('td.is-figure .unseen').allTextContents();
      return `${mark} ${sizes.map((size) => size.trim()).join(' x ')}`;
    }),
  );
}

async function makeCopy(page: Page): Promise<string[]> {
  const links = page.getByRole('link', { name: /^Download copy/ });
  const before = await links.count();
  await page.getByRole('button', { name: 'Make a copy' }).click();
  await expect(links).toHaveCount(before + 1, { timeout: 60_000 });
  const [download] = await Promise.all([page.waitForEvent('download'), links.first().click()]);
  const file = path.join(scratch, `copy-${makeWord()}.pdf`);
  await download.saveAs(file);
  return readPdf(file);
}

test('a buyer resizes and switches units a hundred times without drift, and the next copies agree with the screen', async ({
  page,
}) => {
  await buyAsStranger(page, '/plans/boot-bench-for-a-narrow-hall', 'Ingrid Falk');
  await page.getByRole('link', { name: 'Open in the drawer' }).click();
  await waitForIslands(page);

  const width = page.getByRole('textbox', { name: 'Overall width' });
  await width.fill('37 3/8 in');
  await width.press('Enter');
  const sheet = page.getByRole('textbox', { name: 'Birch plywood', exact: true });
  await sheet.fill('17.6 mm');
  await sheet.press('Enter');
  await page.getByRole('button', { name: /millimet/i }).click();
  const table = page.getByRole('table', { name: 'Parts table' });
  // 37 3/8 in are 949.325 mm. Clear inside: 949.325 - 2 x 17.6 = 914.125; three bays: (914.125 - 2 x 17.6) / 3 = 292.975.
  await expect(table.locator('tr[data-mark="D"]')).toContainText('914');
  await expect(table.locator('tr[data-mark="A"]')).toContainText('17.6');
  const metric = await readTable(page);
  await page.getByRole('button', { name: /inches/i }).click();
  await expect(table.locator('tr[data-mark="B"]')).toContainText('37 3/8');
  const inches = await readTable(page);
  for (let turn = 0; turn < 50; turn += 1) {
    await page.getByRole('button', { name: /millimet/i }).click();
    await page.getByRole('button', { name: /inches/i }).click();
  }
  expect(await readTable(page)).toEqual(inches);
  const printed = (await makeCopy(page)).join('\n');
  expect(printed).toContain('37 3/8');
  await page.getByRole('button', { name: /millimet/i }).click();
  expect(await readTable(page)).toEqual(metric);
  await expect(width).toHaveValue(/949/);

  // Every size of the screen's table stands in the copy's, to the last digit.
  const pages = (await makeCopy(page)).join('\n');
  for (const row of metric) {
    for (const size of row.replace(/^\w+ /, '').split(' x ')) {
      const figure = size.replace(/\s*mm$/, '');
      expect(pages, `${row} stands in the copy`).toContain(figure);
    }
  }
});
