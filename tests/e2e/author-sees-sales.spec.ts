import { expect } from 'playwright/test';
import { signIns } from '#db/seeds/sign-ins.ts';
import { readMail, signIn, test } from './house.ts';
import { buyAsStranger } from './shop.ts';

const amountOf = (text: string) => Math.round(Number(text) * 100);

test('an author sees a sale with its source, a refund, and a statement that adds up to the cent', async ({
  page,
  browser,
}) => {
  const buyerContext = await browser.newContext();
  const buyerPage = await buyerContext.newPage();
  const buyer = await buyAsStranger(
    buyerPage,
    '/plans/boot-bench-for-a-narrow-hall?from=winter-letter',
    'Nils Abernathy',
  );
  const number = /\d+/.exec((await readMail(buyer.email, /^Receipt for order/)).subject)?.[0] ?? '';
  await buyerContext.close();

  const wenna = signIns[0];
  if (!wenna) throw new Error('the demo has no author');
  await signIn(page, wenna.email, wenna.password);
  await page.goto('/sales/low-fell-joinery');
  const sale = page.getByRole('row').filter({ hasText: number });
  await expect(sale).toContainText('sale');
  await expect(sale).toContainText('Winter letter');
  await expect(sale).toContainText('€24.00');
  await expect(sale).toContainText('DE');

  // Half of it goes back.
  await page.getByRole('link', { name: number }).click();
  await page.getByLabel('Amount in EUR').fill('12.00');
  await page.getByLabel('Reason').fill('a page was unreadable');
  await page.getByRole('button', { name: 'Refund' }).click();
  await expect(page.getByText('The money is on its way back')).toBeVisible();
  await readMail(buyer.email, /^Refund for order/);
  await page.goto('/sales/low-fell-joinery');
  await expect(page.getByRole('row').filter({ hasText: number }).filter({ hasText: 'refund' })).toContainText(
    '-€12.00',
  );

  const month = new Date().toISOString().slice(0, 7);
  const answer = await page.request.get(`/api/sales/low-fell-joinery/statement?month=${month}&currency=EUR`);
  expect(answer.headers()['content-disposition']).toContain(`benchleaf-low-fell-joinery-${month}-EUR.csv`);
  const rows = (await answer.text())
    .trimEnd()
    .split('\r\n')
    .map((line) => line.split(','));
  const [head, opening, ...rest] = rows;
  const closing = rest.pop();
  expect(head?.at(-1)).toBe('balance');
  let balance = amountOf(opening?.at(-1) ?? '');
  for (const row of rest) {
    const [paid, tax, fee, house, imprint] = row.slice(9, 14).map(amountOf);
    if (row[1] !== 'paid out')
      expect((tax ?? 0) + (fee ?? 0) + (house ?? 0) + (imprint ?? 0), row.join(',')).toBe(paid);
    balance += imprint ?? 0;
    expect(amountOf(row.at(-1) ?? '')).toBe(balance);
  }
  expect(amountOf(closing?.at(-1) ?? '')).toBe(balance);
  expect(rest.filter((row) => row[2] === number).map((row) => [row[1], row[9]])).toEqual([
    ['sale', '24.00'],
    ['refund', '-12.00'],
  ]);
});
