import { randomBytes, randomUUID } from 'node:crypto';
import { sequelize } from '#db/client.ts';
import { Plan, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { slugOf } from './slug.ts';
import { starterSource } from './starter-source.ts';

/**
 * Lays a new plan on the board of an imprint, with a draft that already resolves.
 * @throws NOT_FOUND or FORBIDDEN to people who may not write for the imprint
 */
export async function createPlan(options: {
  actor: Actor;
  imprintId: string;
  title: string;
}): Promise<{ planId: string }> {
  const { actor, imprintId } = options;
  requireMay(actor, 'plan:create', { imprintId });
  const title = options.title.trim();
  const slug = slugOf(title);
  return sequelize.transaction(async (transaction) => {
    const isTaken = (await Plan.count({ where: { slug }, transaction })) > 0;
    const plan = await Plan.create(
      {
        id: randomUUID(),
        imprintId,
        title,
        slug: isTaken ? `${slug}-${randomBytes(3).toString('hex')}` : slug,
      },
      { transaction },
    );
    await Revision.create(
      { planId: plan.id, source: starterSource(title), createdBy: actor.kind === 'user' ? actor.id : null },
      { transaction },
    );
    return { planId: plan.id };
  });
}
