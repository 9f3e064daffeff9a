import type { Actor } from './actor.ts';

/** What the head of a sheet shows of the person; null for a visitor. */
export function viewActor(actor: Actor): { name: string; isStaff: boolean; hasImprint: boolean } | null {
  if (actor.kind === 'visitor') return null;
  return { name: actor.name, isStaff: actor.role === 'staff', hasImprint: actor.imprints.size > 0 };
}
