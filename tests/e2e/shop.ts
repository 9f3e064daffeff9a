import { expect, type Page } from 'playwright/test';
import { makeAccount, payByCard, type NewBuyer } from './house.ts';

/** Goes to a plan as a stranger, makes an account on the way, and pays for its personal licence. */
export async function buyAsStranger(
  page: Page,
  address: string,
  name: string,
  card = '4242424242424242',
): Promise<NewBuyer> {
  await page.goto(address);
  await page.getByRole('link', { name: 'Buy' }).click();
  await order(page);
  await expect(page).toHaveURL(/sign-in/);
  const buyer = await makeAccount(page, name);
  await page.goto(address);
  await order(page);
  await payByCard(page, card, name);
  await expect(page.getByText('Thank you')).toBeVisible();
  return buyer;
}

/** Presses the way to the payment page on a plan's page. */
export async function order(page: Page): Promise<void> {
  await page.locator('#buy').scrollIntoViewIfNeeded();
  await page.getByLabel(/I want the licence at once/).check();
  await page.getByRole('button', { name: 'Go to the payment page' }).click();
}
