import AxeBuilder from '@axe-core/playwright';
import { expect, type Page } from 'playwright/test';
import { signIns } from '#db/seeds/sign-ins.ts';
import { signIn, test, waitForIslands } from './house.ts';

const PUBLIC = [
  '/',
  '/plans',
  '/plans?q=nothingthatexists',
  '/plans/boot-bench-for-a-narrow-hall',
  '/plans/writing-desk-with-two-drawers?units=in',
  '/imprints/low-fell-joinery',
  '/guides',
  '/guides/safety',
  '/guides/writing-a-plan',
  '/sign-in',
  '/sign-up',
  '/forgot-password',
  '/nothing-here',
];

/** What holds on every page: axe finds nothing, no form stands in another, and nothing runs out sideways on a narrow phone. */
async function judge(page: Page, address: string): Promise<void> {
  await page.setViewportSize({ width: 1280, height: 900 });
  const answer = await page.goto(address);
  await waitForIslands(page);
  const html = (await answer?.text()) ?? '';
  let depth = 0;
  for (const [tag] of html.matchAll(/<\/?form\b/g)) {
    depth += tag.startsWith('</') ? -1 : 1;
    expect(depth, `forms on ${address}`).toBeLessThan(2);
  }
  expect(depth, `forms on ${address}`).toBe(0);
  const found = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .analyze();
  expect(
    found.violations.map((violation) => `${violation.id}: ${violation.nodes[0]?.html.slice(0, 200) ?? ''}`),
    `axe on ${address}`,
  ).toEqual([]);
  await page.setViewportSize({ width: 320, height: 700 });
  const overflow = await page.evaluate(
    () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
  );
  expect(overflow, `sideways on ${address}`).toBeLessThanOrEqual(0);
}

for (const scheme of ['light', 'dark'] as const) {
  test(`public pages are sound in the ${scheme}`, async ({ page }) => {
    test.setTimeout(180_000);
    await page.emulateMedia({ colorScheme: scheme });
    for (const address of PUBLIC) await judge(page, address);
  });
}

const ROOMS: { mailbox: string; addresses: string[] }[] = [
  { mailbox: 'lukasz', addresses: ['/drawer', '/orders', '/account'] },
  {
    mailbox: 'wenna',
    addresses: [
      '/office',
      '/office/low-fell-joinery',
      '/office/low-fell-joinery/people',
      '/sales/low-fell-joinery',
      '/sales/low-fell-joinery/payouts',
      '/sales/low-fell-joinery/sources',
      '/sales/low-fell-joinery/codes',
    ],
  },
  { mailbox: 'pia', addresses: ['/staff'] },
];
for (const { mailbox, addresses } of ROOMS) {
  test(`the rooms of ${mailbox} are sound`, async ({ page }) => {
    const person = signIns.find((each) => each.email.startsWith(`${mailbox}@`));
    await signIn(page, person?.email ?? '', person?.password ?? '');
    for (const address of addresses) await judge(page, address);
    if (mailbox === 'lukasz') {
      await page.goto('/drawer');
      await judge(
        page,
        (await page
          .getByRole('link', { name: 'Boot bench for a narrow hall' })
          .first()
          .getAttribute('href')) ?? '',
      );
    }
    if (mailbox === 'wenna') {
      await page.goto('/office/low-fell-joinery');
      await judge(
        page,
        (await page.getByRole('link', { name: 'Plate rack for a sloping wall' }).getAttribute('href')) ?? '',
      );
    }
  });
}

test('the plan chest, a plan and the way to the payment page work without scripts', async ({ browser }) => {
  const context = await browser.newContext({
    javaScriptEnabled: false,
    baseURL: process.env['E2E_SITE'] ?? '',
  });
  const page = await context.newPage();
  const buyer = signIns.find((each) => each.email.startsWith('lukasz@'));
  await page.goto('/plans/alcove-shelves-with-a-cupboard-for-walls-that-are-not-square?s.front=900+mm');
  await expect(page.getByText('It can be built at this size')).toBeVisible();
  await page.getByLabel(/I want the licence at once/).check();
  await page.getByRole('button', { name: 'Go to the payment page' }).click();
  await page.getByLabel('E-mail').fill(buyer?.email ?? '');
  await page.getByLabel('Password').fill(buyer?.password ?? '');
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByRole('heading', { level: 1 })).toContainText('Alcove shelves');
  await page.getByLabel(/I want the licence at once/).check();
  await page.getByRole('button', { name: 'Go to the payment page' }).click();
  await expect(page.getByRole('button', { name: /^Pay/ })).toBeVisible();
  await page.getByRole('link', { name: /Back to the shop/ }).click();
  await expect(page.getByText('You left the payment page')).toBeVisible();
  await context.close();
});
