import { execFileSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { expect, test as base, type Page } from 'playwright/test';
import * as z from 'zod';

/** Every test of the house: an error in the browser's console that nobody expects fails it. */
export const test = base.extend<{ quiet: null }>({
  quiet: [
    async ({ page }, use) => {
      const said: string[] = [];
      page.on('console', (message) => {
        // A refused form comes back with its status, which the browser reports as an error of loading.
        if (message.type() === 'error' && !/Failed to load resource/.test(message.text()))
          said.push(message.text());
      });
      page.on('pageerror', (error) => said.push(error.message));
      await use(null);
      expect(said, 'what the browser complained of').toEqual([]);
    },
    { auto: true },
  ],
});

export const makeWord = () => randomBytes(4).toString('hex');

const mailSchema = z.array(
  z.object({ id: z.number(), subject: z.string(), text: z.string(), to: z.array(z.string()) }),
);
export type Mail = z.infer<typeof mailSchema>[number];

/** Waits for a mail to an address whose subject matches. */
export async function readMail(address: string, subject: RegExp): Promise<Mail> {
  const deadline = Date.now() + 30_000;
  for (;;) {
    const answer = await fetch(
      `${process.env['E2E_MAIL'] ?? ''}/api/messages?to=${encodeURIComponent(address)}`,
    );
    const mail = mailSchema.parse(await answer.json()).findLast((each) => subject.test(each.subject));
    if (mail) return mail;
    if (Date.now() > deadline) throw new Error(`no mail to ${address} about ${String(subject)}`);
    await new Promise((resolve) => setTimeout(resolve, 250));
  }
}

/** The first link of the site in a mail. */
export function linkIn(mail: Mail): string {
  const site = process.env['E2E_SITE'] ?? '';
  const link = mail.text.match(/https?:\/\/\S+/g)?.find((each) => each.startsWith(site));
  if (!link) throw new Error(`no link in “${mail.subject}”`);
  return link;
}

export async function signIn(page: Page, email: string, password: string): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password').fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).not.toHaveURL(/sign-in/);
}

/** Waits until the islands of a page live, so that a click is not lost. */
export async function waitForIslands(page: Page): Promise<void> {
  await expect(
    page.locator('astro-island[ssr][client="load"], astro-island[ssr][client="idle"]'),
  ).toHaveCount(0);
}

export interface NewBuyer {
  name: string;
  email: string;
  password: string;
}

/** Makes an account from where the page is (the sign-in page, with its way back) and confirms the address by the link in the mail. */
export async function makeAccount(page: Page, name: string): Promise<NewBuyer> {
  const word = makeWord();
  const buyer = { name, email: `${word}@readers.test`, password: `four words of ${word}` };
  await page.getByRole('link', { name: 'Make one' }).first().click();
  await page.getByLabel('Name').fill(buyer.name);
  await page.getByLabel('E-mail').fill(buyer.email);
  await page.getByLabel('Password').fill(buyer.password);
  await page.getByRole('button', { name: 'Make the account' }).click();
  await page.goto(linkIn(await readMail(buyer.email, /confirm/i)));
  await page.getByRole('button', { name: 'Confirm this address' }).click();
  await expect(page).not.toHaveURL(/verify-email/);
  if (/sign-in/.test(page.url())) {
    await page.getByLabel('E-mail').fill(buyer.email);
    await page.getByLabel('Password').fill(buyer.password);
    await page.getByRole('button', { name: 'Sign in' }).click();
    await expect(page).not.toHaveURL(/sign-in/);
  }
  return buyer;
}

/** Pays on the hosted payment page with a test card. */
export async function payByCard(page: Page, card: string, name: string): Promise<void> {
  await page.getByLabel('Name').fill(name);
  await page.getByLabel('Country').selectOption('DE');
  await page.getByLabel('Card number').fill(card);
  await page.getByLabel(/Expiry/).fill('12 / 30');
  await page.getByLabel(/Security code/).fill('123');
  await page.getByRole('button', { name: /^Pay|Complete the order/ }).click();
}

/** The text of a PDF, page by page, as an independent reader (poppler) sees it. */
export function readPdf(file: string): string[] {
  const text = execFileSync('pdftotext', ['-layout', file, '-'], { encoding: 'utf8' });
  return text.split('\f').filter((page) => page.trim() !== '');
}
