import type Stripe from 'stripe';
import { sequelize } from '#db/client.ts';
import { InboxEvent } from '#db/models/index.ts';
import { env } from '../env.ts';
import { refuse } from '../errors.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { payments } from '../payments/client.ts';

/** Oldest and most future timestamp that a signature may carry, in seconds. */
const TOLERANCE_SECONDS = 300;

/** The SDK refuses old signatures but takes future ones, so the other bound is ours. */
function requirePresent(signature: string): void {
  const stamp = /(?:^|,)\s*t=(\d{1,12})(?:,|$)/.exec(signature)?.[1];
  if (!stamp || Number(stamp) > Date.now() / 1000 + TOLERANCE_SECONDS) {
    refuse('BAD_INPUT', { detail: 'The signature does not hold.' });
  }
}

/** Our own events and those of connected accounts come by endpoints of their own, each with its secret. */
function readEvent(rawText: string, signature: string): Stripe.Event {
  const secrets = [env.STRIPE_WEBHOOK_SECRET, env.STRIPE_CONNECT_WEBHOOK_SECRET].filter(
    (secret) => secret !== undefined,
  );
  let cause: unknown;
  for (const secret of secrets) {
    try {
      return payments.webhooks.constructEvent(rawText, signature, secret, TOLERANCE_SECONDS);
    } catch (error) {
      cause = error;
    }
  }
  return refuse('BAD_INPUT', { detail: 'The signature does not hold.', cause });
}

/** The one id of an event's object; all that is ever taken from an event. */
function objectIdOf(object: unknown): string {
  return typeof object === 'object' && object !== null && 'id' in object && typeof object.id === 'string'
    ? object.id
    : '';
}

/**
 * Takes an event of the payment service: checks the signature over the raw text, stores the event once, and leaves the work to a job.
 * A second delivery of the same event changes nothing.
 * @throws BAD_INPUT when the signature is missing, wrong, too old or from the future
 */
export async function receiveEvent(rawText: string, signature: string | null): Promise<void> {
  if (!signature) refuse('BAD_INPUT', { detail: 'The signature is missing.' });
  requirePresent(signature);
  const event = readEvent(rawText, signature);
  const { id, type } = event;
  const objectId = objectIdOf(event.data.object);
  await sequelize.transaction(async (transaction) => {
    const [, isNew] = await InboxEvent.findOrCreate({
      where: { id },
      defaults: { id, type, objectId },
      transaction,
    });
    if (isNew) await enqueue('work-inbox-event', { eventId: id }, { key: `event:${id}`, transaction });
  });
}
