import { Op } from 'sequelize';
import { Imprint, ImprintMember, Order, OutboxEmail, Plan, User, type OrderState } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { writeEmail } from '../mail/write-email.ts';

export interface StaffPage {
  imprints: {
    id: string;
    slug: string;
    name: string;
    about: string;
    state: 'applied' | 'active' | 'suspended';
    owners: string[];
    plans: number;
  }[];
  plans: { id: string; slug: string; title: string; state: 'published' | 'unpublished'; imprint: string }[];
  orders: {
    id: string;
    number: number;
    email: string;
    state: OrderState;
    totalMinor: number;
    refundedMinor: number;
    currency: string;
    createdAt: string;
  }[];
  nextOrder: number | null;
  /** Mails that could not be sent after many tries. */
  stuckMails: number;
}

const PAGE = 25;

/** The staff's desk: imprints that wait to be admitted, plans on sale, orders, mails that are stuck. @throws NOT_FOUND to others */
export async function getStaffPage(
  actor: Actor,
  query: { order?: number | undefined; after?: number | undefined },
): Promise<StaffPage> {
  requireMay(actor, 'house:keep', null);
  const [imprints, plans, orders, stuckMails] = await Promise.all([
    Imprint.findAll({
      include: [
        {
          model: ImprintMember,
          as: 'members',
          where: { role: 'owner' },
          required: false,
          include: [{ model: User, as: 'user', attributes: ['name'] }],
        },
        { model: Plan, as: 'plans', attributes: ['id'] },
      ],
      order: [['createdAt', 'DESC']],
      limit: 100,
    }),
    Plan.findAll({
      where: { state: ['published', 'unpublished'] },
      include: [{ model: Imprint, as: 'imprint', attributes: ['name'] }],
      order: [['publishedAt', 'DESC']],
      limit: 100,
    }),
    Order.findAll({
      where: {
        ...(query.order ? { number: query.order } : {}),
        ...(query.after ? { number: { [Op.lt]: query.after } } : {}),
      },
      order: [['number', 'DESC']],
      limit: PAGE + 1,
    }),
    OutboxEmail.count({ where: { state: 'waiting', attempts: { [Op.gte]: 5 } } }),
  ]);
  const shown = orders.slice(0, PAGE);
  return {
    imprints: imprints.map((imprint) => ({
      id: imprint.id,
      slug: imprint.slug,
      name: imprint.name,
      about: imprint.about,
      state: imprint.state,
      owners: (imprint.members ?? []).flatMap((member) => member.user?.name ?? []),
      plans: imprint.plans?.length ?? 0,
    })),
    plans: plans.map((plan) => ({
      id: plan.id,
      slug: plan.slug,
      title: plan.title,
      state: plan.state === 'published' ? 'published' : 'unpublished',
      imprint: plan.imprint?.name ?? '',
    })),
    orders: shown.map((order) => ({
      id: order.id,
      number: order.number,
      email: order.email,
      state: order.state,
      totalMinor: order.totalMinor,
      refundedMinor: order.refundedMinor,
      currency: order.currency,
      createdAt: order.createdAt.toISOString(),
    })),
    nextOrder: orders.length > PAGE ? (shown.at(-1)?.number ?? null) : null,
    stuckMails,
  };
}

/** Admits or suspends an imprint; its owners are told. @throws NOT_FOUND */
export async function setImprintState(
  actor: Actor,
  imprintId: string,
  state: 'active' | 'suspended',
): Promise<void> {
  requireMay(actor, 'imprint:admit', null);
  const imprint = await Imprint.findByPk(imprintId);
  if (!imprint) return refuse('NOT_FOUND');
  if (imprint.state === state) return;
  await imprint.update({ state });
  await writeAudit({ actor, action: `imprint:${state}`, thing: { kind: 'imprint', id: imprintId } });
  const owners = await ImprintMember.findAll({
    where: { imprintId, role: 'owner' },
    include: [{ model: User, as: 'user' }],
  });
  for (const { user } of owners) {
    if (!user) continue;
    await writeEmail({
      kind: 'imprint-state',
      reference: `imprint:${imprintId}:${state}:${imprint.updatedAt.getTime()}:${user.id}`,
      to: { name: user.name, address: user.email },
      subject: state === 'active' ? `${imprint.name} is admitted` : `${imprint.name} is suspended`,
      paragraphs: [
        state === 'active'
          ? `${imprint.name} may now publish plans on Benchleaf.`
          : `${imprint.name} is suspended: its plans are not shown in the plan chest. Licences stay good. Write to us if you think this is a mistake.`,
      ],
    });
  }
}

/** Puts an unpublished plan back into the plan chest. */
export async function republishPlan(actor: Actor, planId: string): Promise<void> {
  requireMay(actor, 'house:keep', null);
  const [changed] = await Plan.update(
    { state: 'published' },
    { where: { id: planId, state: 'unpublished' } },
  );
  if (changed === 0) refuse('NOT_FOUND');
  await writeAudit({ actor, action: 'plan:republish', thing: { kind: 'plan', id: planId } });
}
