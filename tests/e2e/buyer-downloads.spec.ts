import path from 'node:path';
import { expect } from 'playwright/test';
import { signIns } from '#db/seeds/sign-ins.ts';
import {
  makeAccount,
  makeWord,
  payByCard,
  readMail,
  readPdf,
  signIn,
  test,
  waitForIslands,
} from './house.ts';
import { order } from './shop.ts';

const scratch = process.env['E2E_SCRATCH'] ?? 'test-results';

test('a buyer finds a plan, sizes it, pays, and downloads a stamped copy; after a refund it can no longer be fetched', async ({
  page,
  browser,
}) => {
  const name = `Žofie Ångström ${makeWord()}`;
  await page.goto('/plans');
  await page.getByLabel('Words').fill('boots narrow hall');
  await page.getByRole('button', { name: 'Look' }).click();
  await page.getByRole('link', { name: 'Boot bench for a narrow hall' }).first().click();

  // Sizing: too narrow for five bays first, which the tape refuses with the reason, then a width that holds.
  const width = page.getByRole('textbox', { name: 'Overall width' });
  await width.scrollIntoViewIfNeeded();
  await waitForIslands(page);
  await expect(page.locator('astro-island[ssr]')).toHaveCount(0);
  await page.getByRole('spinbutton', { name: 'Boot bays' }).fill('5');
  await width.fill('700 mm');
  await width.press('Enter');
  await expect(page.getByText(/A bay must be at least 180 mm wide/).first()).toBeVisible();
  await page.getByRole('spinbutton', { name: 'Boot bays' }).fill('3');
  await expect(page).toHaveURL(/s\.bays=3/);
  await expect(page.locator('.fitting__results')).toHaveAttribute('aria-busy', 'false');
  await width.fill('985 mm');
  await width.press('Enter');
  await expect(page.getByText('It can be built at this size')).toBeVisible();
  await expect(page).toHaveURL(/s\.width=985/);

  // Buying asks to sign in, and the sizes are there again afterwards.
  await order(page);
  await expect(page).toHaveURL(/sign-in/);
  const next = new URL(page.url()).searchParams.get('next') ?? '';
  expect(next).toContain('985');
  const buyer = await makeAccount(page, name);
  await page.goto(next);
  await order(page);

  // The first card is declined; nothing is lost, the second one pays.
  await payByCard(page, '4000000000000002', name);
  await expect(page.getByRole('alert')).toBeVisible();
  await payByCard(page, '4242424242424242', name);
  await expect(page.getByText('Thank you')).toBeVisible();
  const receipt = await readMail(buyer.email, /^Receipt for order/);
  expect(receipt.text).toContain('€24.00');

  await page.getByRole('link', { name: 'Open in the drawer' }).click();
  await waitForIslands(page);
  await expect(page.getByRole('textbox', { name: 'Overall width' })).toHaveValue(/985/);
  await page.getByRole('button', { name: 'Make a copy' }).click();
  const link = page.getByRole('link', { name: /^Download copy/ });
  await expect(link).toBeVisible({ timeout: 60_000 });
  const [download] = await Promise.all([page.waitForEvent('download'), link.click()]);
  const file = path.join(scratch, `copy-${makeWord()}.pdf`);
  await download.saveAs(file);
  expect(download.url()).toContain('X-Amz-Signature');

  const number = /copy (\d+)/i.exec((await link.textContent()) ?? '')?.[1] ?? '';
  const pages = readPdf(file);
  expect(pages.length).toBeGreaterThan(3);
  const today = new Date().toISOString().slice(0, 10);
  for (const [index, text] of pages.entries()) {
    expect(text, `page ${String(index + 1)} carries the name`).toContain(name);
    expect(text, `page ${String(index + 1)} carries the copy number`).toContain(number);
    expect(text, `page ${String(index + 1)} carries the revision`).toMatch(/\bB\b/);
    expect(text, `page ${String(index + 1)} carries the date`).toContain(today);
  }

  // The same address without its signature gives nothing.
  const bare = await fetch(download.url().split('?')[0] ?? '');
  expect(bare.status).toBe(403);
  const address = (await link.getAttribute('href')) ?? '';

  const staff = signIns.at(-1);
  if (!staff) throw new Error('the demo has no staff');
  const desk = await browser.newContext();
  const office = await desk.newPage();
  await signIn(office, staff.email, staff.password);
  const orderNumber = /\d+/.exec(receipt.subject)?.[0] ?? '';
  await office.goto(`/staff?order=${orderNumber}`);
  await office.getByRole('button', { name: `Refund order ${orderNumber}` }).click();
  await expect(office.getByText('The money is on its way back')).toBeVisible();
  await desk.close();
  await readMail(buyer.email, /^Refund for order/);

  expect((await page.request.get(address, { maxRedirects: 0 })).status()).toBe(403);
  await page.reload();
  await expect(page.getByText('This licence was refunded')).toBeVisible();
});
