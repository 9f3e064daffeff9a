import { randomUUID } from 'node:crypto';
import { sequelize } from '#db/client.ts';
import { Imprint, ImprintMember } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay, requireUser } from '../accounts/may.ts';
import { takeToken } from '../accounts/rate-limit.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { slugOf } from './slug.ts';

/**
 * Applies for an imprint. Plans can be written at once; the staff admit the imprint before it can publish.
 * @throws SIGN_IN_REQUIRED, EMAIL_UNVERIFIED, CONFLICT when the name is taken
 */
export async function applyForImprint(options: {
  actor: Actor;
  name: string;
  about: string;
}): Promise<{ slug: string }> {
  const user = requireUser(options.actor);
  requireMay(user, 'imprint:apply', null);
  await takeToken(`apply:${user.id}`, { limit: 3, seconds: 86_400 });
  const name = options.name.trim();
  const slug = slugOf(name);
  if (await Imprint.count({ where: { slug } }))
    refuse('CONFLICT', { fields: { name: 'An imprint of that name exists. Choose another.' } });
  await sequelize.transaction(async (transaction) => {
    const imprint = await Imprint.create(
      { id: randomUUID(), slug, name, about: options.about.trim() },
      { transaction },
    );
    await ImprintMember.create({ imprintId: imprint.id, userId: user.id, role: 'owner' }, { transaction });
    await writeAudit(
      { actor: user, action: 'imprint:apply', thing: { kind: 'imprint', id: imprint.id } },
      transaction,
    );
  });
  return { slug };
}

/** Changes what stands on an imprint's page. */
export async function editImprint(options: { actor: Actor; slug: string; about: string }): Promise<void> {
  const imprint = await Imprint.findOne({ where: { slug: options.slug } });
  if (!imprint) return refuse('NOT_FOUND');
  requireMay(options.actor, 'imprint:edit', { imprintId: imprint.id });
  await imprint.update({ about: options.about.trim() });
}
