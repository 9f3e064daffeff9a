import { randomUUID } from 'node:crypto';
import { SavedFit, Plan } from '#db/models/index.ts';
import type { Fit } from '#lib/plan/types.ts';
import type { Actor } from '../accounts/actor.ts';
import { refuse } from '../errors.ts';
import { requireFit } from './require-fit.ts';

export interface FitToSave {
  actor: Actor;
  planId: string;
  /** Replaces this fit of the same owner; left out for a new one. */
  fitId?: string | undefined;
  name: string;
  /** As it came from a form or an island; checked against the plan's limits here. */
  fit: unknown;
}

/** A fit as the drawer and the islands know it. */
export interface SavedFitView {
  id: string;
  name: string;
  fit: Fit;
  updatedAt: string;
}

/** The plain view of a row. */
export function viewFit(row: SavedFit): SavedFitView {
  return {
    id: row.id,
    name: row.name,
    fit: { values: row.values, measured: row.measured, units: row.units, prices: row.prices },
    updatedAt: row.updatedAt.toISOString(),
  };
}

/**
 * Keeps a fit for its owner, checked against the limits of the plan's current revision.
 * @throws SIGN_IN_REQUIRED, NOT_FOUND for a plan without a revision or another's fit, BAD_INPUT with the sizes at fault
 */
export async function saveFit({ actor, planId, fitId, name, fit: input }: FitToSave): Promise<SavedFitView> {
  if (actor.kind === 'visitor') return refuse('SIGN_IN_REQUIRED');
  const plan = await Plan.findByPk(planId, { attributes: ['id', 'currentRevisionId'] });
  if (!plan?.currentRevisionId) return refuse('NOT_FOUND');
  const fit = await requireFit(plan.currentRevisionId, input);
  const content = {
    name: name.trim().slice(0, 120) || 'My fit',
    values: fit.values,
    measured: fit.measured,
    prices: fit.prices ?? {},
    units: fit.units,
  };
  if (fitId) {
    const row = await SavedFit.findOne({ where: { id: fitId, userId: actor.id, planId } });
    if (!row) return refuse('NOT_FOUND');
    await row.update(content, { fields: ['name', 'values', 'measured', 'prices', 'units'] });
    return viewFit(row);
  }
  const row = await SavedFit.create({ id: randomUUID(), userId: actor.id, planId, ...content });
  return viewFit(await row.reload());
}

/** Removes a fit; the copies made of it stay. @throws NOT_FOUND for another's fit */
export async function removeFit(actor: Actor, fitId: string): Promise<void> {
  if (actor.kind === 'visitor') return refuse('SIGN_IN_REQUIRED');
  const removed = await SavedFit.destroy({ where: { id: fitId, userId: actor.id } });
  if (removed === 0) refuse('NOT_FOUND');
}
