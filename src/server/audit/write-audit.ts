import type { Transaction } from 'sequelize';
import { Audit } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';

/** Notes who did what to which thing, for the staff to look up. Details carry ids and amounts, never personal data. */
export async function writeAudit(
  note: {
    actor: Actor | null;
    action: string;
    thing: { kind: string; id: string };
    details?: Record<string, string | number | boolean | null>;
  },
  transaction?: Transaction,
): Promise<void> {
  await Audit.create(
    {
      actorId: note.actor?.kind === 'user' ? note.actor.id : null,
      action: note.action,
      thingKind: note.thing.kind,
      thingId: note.thing.id,
      details: note.details ?? {},
    },
    { transaction: transaction ?? null },
  );
}
