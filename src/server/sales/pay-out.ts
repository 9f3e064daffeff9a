import { randomUUID } from 'node:crypto';
import { sequelize } from '#db/client.ts';
import { Imprint, Payout } from '#db/models/index.ts';
import { paths } from '#lib/paths.ts';
import type { Actor } from '../accounts/actor.ts';
import { may } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { log } from '../log.ts';
import { payments } from '../payments/client.ts';
import { postLedger } from './post-ledger.ts';
import { requireImprint } from './require-imprint.ts';
import { settlePaymentAccount } from './settle-payment-account.ts';
import { sumImprint, type ImprintBalance } from './sum-imprint.ts';

const unavailable = (cause: unknown): never => {
  log.warn({ err: cause }, 'payment account could not be opened');
  return refuse('PAYMENT_UNAVAILABLE', {
    detail: 'The payment service does not answer just now. Nothing was changed; try again.',
    cause,
  });
};

/**
 * Opens the payment account that an imprint is paid to, where there is none yet, and gives the address at which the payment service asks the owner for
 * what the law wants to know. We never see bank details.
 */
export async function openPaymentAccount(actor: Actor, slug: string): Promise<string> {
  const imprint = await requireImprint(actor, slug, 'payout:start');
  const back = new URL(paths.salesPayouts(slug), env.SITE_URL).href;
  try {
    if (!imprint.paymentAccountId) {
      const account = await payments.accounts.create(
        {
          type: 'express',
          metadata: { imprint_id: imprint.id },
          capabilities: { transfers: { requested: true } },
        },
        { idempotencyKey: `account-${imprint.id}` },
      );
      await imprint.update({ paymentAccountId: account.id });
    }
    const link = await payments.accountLinks.create({
      account: imprint.paymentAccountId ?? '',
      type: 'account_onboarding',
      refresh_url: back,
      return_url: back,
    });
    return link.url;
  } catch (cause) {
    return unavailable(cause);
  }
}

/**
 * Starts paying out what an imprint is owed in one currency. The row is written first and a job sends the money, so that a cut line
 * neither loses nor doubles it.
 * @throws BAD_INPUT when nothing is owed or the payment account is not ready, CONFLICT while another payout is under way
 */
export async function startPayout(options: { actor: Actor; slug: string; currency: string }): Promise<void> {
  const { actor, slug, currency } = options;
  const imprint = await requireImprint(actor, slug, 'payout:start');
  if (!imprint.paymentAccountId || !imprint.payoutsEnabled) {
    refuse('BAD_INPUT', {
      detail: 'Open the payment account first; the payment service does not pay out to it yet.',
    });
  }
  await sequelize.transaction(async (transaction) => {
    await Imprint.findByPk(imprint.id, { transaction, lock: transaction.LOCK.UPDATE });
    if (await Payout.count({ where: { imprintId: imprint.id, currency, state: 'started' }, transaction })) {
      refuse('CONFLICT', { detail: 'A payout in this currency is under way already.' });
    }
    const owed =
      (await sumImprint(imprint.id)).find((balance) => balance.currency === currency)?.owedMinor ?? 0;
    if (owed <= 0) refuse('BAD_INPUT', { detail: 'Nothing is owed in this currency.' });
    const payout = await Payout.create(
      { id: randomUUID(), imprintId: imprint.id, amountMinor: owed, currency },
      { transaction },
    );
    await writeAudit(
      { actor, action: 'payout:start', thing: { kind: 'payout', id: payout.id }, details: { amount: owed } },
      transaction,
    );
    await enqueue('send-payout', { payoutId: payout.id }, { key: `payout:${payout.id}`, transaction });
  });
}

/** Sends one payout by a transfer; safe to run again, since the payment service knows it by its key. */
export async function sendPayout(payoutId: string): Promise<void> {
  const payout = await Payout.findByPk(payoutId, { include: [{ model: Imprint, as: 'imprint' }] });
  const imprint = payout?.imprint;
  if (payout?.state !== 'started' || !imprint?.paymentAccountId) return;
  const transfer = await payments.transfers.create(
    {
      amount: payout.amountMinor,
      currency: payout.currency.toLowerCase(),
      destination: imprint.paymentAccountId,
      metadata: { payout_id: payout.id },
    },
    { idempotencyKey: `payout-${payout.id}` },
  );
  await sequelize.transaction(async (transaction) => {
    await postLedger(
      {
        reference: `payout:${payout.id}`,
        kind: 'payout',
        imprintId: imprint.id,
        orderLineId: null,
        currency: payout.currency,
        memo: 'Paid out',
        happenedAt: new Date(transfer.created * 1000),
        split: {
          clearingMinor: -payout.amountMinor,
          feesMinor: 0,
          taxMinor: 0,
          imprintMinor: payout.amountMinor,
          houseMinor: 0,
        },
      },
      transaction,
    );
    await payout.update(
      { state: 'sent', paymentTransferId: transfer.id, sentAt: new Date() },
      { transaction },
    );
  });
}

export interface PayoutView {
  id: string;
  amountMinor: number;
  currency: string;
  state: 'started' | 'sent' | 'failed';
  createdAt: string;
}

export interface PayoutPage {
  balances: ImprintBalance[];
  payouts: PayoutView[];
  isAccountOpen: boolean;
  payoutsEnabled: boolean;
  mayPayOut: boolean;
}

/**
 * The payouts of an imprint, newest first, and what is owed. An account that is not ready yet is asked after, so that the owner who comes back
 * from the payment service sees the truth.
 * @throws NOT_FOUND to people who may not read the sales book
 */
export async function getPayoutPage(actor: Actor, slug: string): Promise<PayoutPage> {
  const imprint = await requireImprint(actor, slug, 'sales:read');
  if (imprint.paymentAccountId && !imprint.payoutsEnabled) {
    try {
      await settlePaymentAccount(imprint.paymentAccountId);
      await imprint.reload();
    } catch (error) {
      log.warn({ err: error }, 'payment service did not answer');
    }
  }
  const [balances, payouts] = await Promise.all([
    sumImprint(imprint.id),
    Payout.findAll({ where: { imprintId: imprint.id }, order: [['createdAt', 'DESC']], limit: 100 }),
  ]);
  return {
    balances,
    payouts: payouts.map(({ id, amountMinor, currency, state, createdAt }) => ({
      id,
      amountMinor,
      currency,
      state,
      createdAt: createdAt.toISOString(),
    })),
    isAccountOpen: imprint.paymentAccountId !== null,
    payoutsEnabled: imprint.payoutsEnabled,
    mayPayOut: may(actor, 'payout:start', { imprintId: imprint.id }),
  };
}
