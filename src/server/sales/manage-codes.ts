import { randomUUID } from 'node:crypto';
import { Code, Plan } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { writeAudit } from '../audit/write-audit.ts';
import { refuse } from '../errors.ts';
import { requireImprint } from './require-imprint.ts';

export interface CodeView {
  id: string;
  code: string;
  percentOff: number | null;
  amountOffMinor: number | null;
  currency: string | null;
  planTitle: string | null;
  used: number;
  maxUses: number | null;
  endsAt: string | null;
  isActive: boolean;
  note: string;
}

/** The codes of an imprint, newest first. */
export async function listCodes(
  actor: Actor,
  imprintSlug: string,
): Promise<{ codes: CodeView[]; plans: { id: string; title: string }[] }> {
  const imprint = await requireImprint(actor, imprintSlug, 'codes:manage');
  const [codes, plans] = await Promise.all([
    Code.findAll({
      where: { imprintId: imprint.id },
      include: [{ model: Plan, as: 'plan', attributes: ['title'] }],
      order: [['createdAt', 'DESC']],
      limit: 200,
    }),
    Plan.findAll({
      where: { imprintId: imprint.id },
      attributes: ['id', 'title'],
      order: [['title', 'ASC']],
    }),
  ]);
  return {
    codes: codes.map((code) => ({
      id: code.id,
      code: code.code,
      percentOff: code.percentOff,
      amountOffMinor: code.amountOffMinor,
      currency: code.currency,
      planTitle: code.plan?.title ?? null,
      used: code.used,
      maxUses: code.maxUses,
      endsAt: code.endsAt?.toISOString() ?? null,
      isActive: code.isActive,
      note: code.note,
    })),
    plans: plans.map(({ id, title }) => ({ id, title })),
  };
}

export interface CodeToCreate {
  actor: Actor;
  imprintSlug: string;
  code: string;
  percentOff: number;
  planId: string | null;
  maxUses: number | null;
  endsAt: Date | null;
  note: string;
}

/** Makes a code for patrons or partners. @throws CONFLICT when the word is taken, NOT_FOUND for another imprint's plan */
export async function createCode(options: CodeToCreate): Promise<void> {
  const imprint = await requireImprint(options.actor, options.imprintSlug, 'codes:manage');
  const code = options.code.trim().toUpperCase();
  if (await Code.count({ where: { code } }))
    refuse('CONFLICT', { fields: { code: 'This code is taken. Choose another word.' } });
  if (options.planId && !(await Plan.count({ where: { id: options.planId, imprintId: imprint.id } })))
    refuse('NOT_FOUND');
  const made = await Code.create({
    id: randomUUID(),
    imprintId: imprint.id,
    planId: options.planId,
    code,
    percentOff: options.percentOff,
    maxUses: options.maxUses,
    endsAt: options.endsAt,
    note: options.note.trim(),
  });
  await writeAudit({
    actor: options.actor,
    action: 'code:create',
    thing: { kind: 'code', id: made.id },
    details: { percentOff: options.percentOff },
  });
}

/** Stops a code, or lets it hold again; orders made with it stay as they are. */
export async function switchCode(options: {
  actor: Actor;
  imprintSlug: string;
  codeId: string;
  isActive: boolean;
}): Promise<void> {
  const imprint = await requireImprint(options.actor, options.imprintSlug, 'codes:manage');
  const [changed] = await Code.update(
    { isActive: options.isActive },
    { where: { id: options.codeId, imprintId: imprint.id } },
  );
  if (changed === 0) refuse('NOT_FOUND');
}
