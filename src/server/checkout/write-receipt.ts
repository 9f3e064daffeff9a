import type { Transaction } from 'sequelize';
import type { Licence, Order, OrderLine } from '#db/models/index.ts';
import { formatMoney } from '#lib/money/format-money.ts';
import { paths } from '#lib/paths.ts';
import { env } from '../env.ts';
import { writeEmail } from '../mail/write-email.ts';

const LABEL = { personal: 'personal licence', workshop: 'workshop licence' } as const;

/** The receipt, put into the outbox in the transaction that made the order paid. */
export async function writeReceipt(
  order: Order,
  lines: readonly OrderLine[],
  licences: readonly Licence[],
  transaction: Transaction,
): Promise<void> {
  const money = (minor: number) => formatMoney(minor, order.currency);
  const rows: [string, string][] = lines.map((line) => [
    `${line.title}, ${LABEL[line.kind]}`,
    money(line.priceMinor),
  ]);
  if (order.discountMinor > 0) rows.push(['Discount', money(-order.discountMinor)]);
  rows.push(['Paid', money(order.totalMinor)]);
  rows.push(['of which tax', money(order.taxMinor)]);
  const numbers = licences.map((licence) => licence.number).join(', ');
  await writeEmail(
    {
      kind: 'receipt',
      reference: `receipt:${order.id}`,
      to: { name: order.name, address: order.email },
      subject: `Receipt for order ${order.number}`,
      paragraphs: [
        `Thank you. Order ${order.number} was paid on ${(order.paidAt ?? new Date()).toISOString().slice(0, 10)}.`,
        `Licence ${numbers} lies in your drawer. Size the plan there and make a copy whenever you need one, also next year.`,
        `You agreed: ${order.consent}`,
      ],
      rows,
      action: { label: 'Open the drawer', url: new URL(paths.drawer(), env.SITE_URL).href },
    },
    transaction,
  );
}

/** Tells a buyer that money went back, and what became of the licence. */
export async function writeRefundLetter(
  order: Order,
  refund: { id: string; amountMinor: number },
  hasEnded: boolean,
  transaction: Transaction,
): Promise<void> {
  await writeEmail(
    {
      kind: 'refund',
      reference: `refund:${refund.id}`,
      to: { name: order.name, address: order.email },
      subject: `Refund for order ${order.number}`,
      paragraphs: [
        `${formatMoney(refund.amountMinor, order.currency)} of order ${order.number} go back to the card that was charged. Your bank may take some days.`,
        hasEnded
          ? 'The licence has ended: its copies can no longer be fetched or made. What you have built stays yours.'
          : 'The licence stays as it is.',
      ],
      action: { label: 'See the order', url: new URL(paths.order(order.id), env.SITE_URL).href },
    },
    transaction,
  );
}
