import { Imprint } from '#db/models/index.ts';
import { payments } from '../payments/client.ts';

/** Whether the payment service would pay an imprint out, as it says now. */
export async function settlePaymentAccount(accountId: string): Promise<void> {
  const account = await payments.accounts.retrieve(accountId);
  await Imprint.update(
    { payoutsEnabled: account.payouts_enabled === true },
    { where: { paymentAccountId: account.id } },
  );
}
