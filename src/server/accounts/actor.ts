import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';
import type { UnitSystem } from '#lib/plan/types.ts';
import { auth } from './auth.ts';

export type ImprintRole = 'owner' | 'editor' | 'bookkeeper';

export interface Visitor {
  readonly kind: 'visitor';
}
export interface SignedInUser {
  readonly kind: 'user';
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly role: 'member' | 'staff';
  /** The e-mail address has been confirmed. */
  readonly isVerified: boolean;
  readonly units: UnitSystem;
  /** What the person is in which imprint, by imprint id. */
  readonly imprints: ReadonlyMap<string, ImprintRole>;
  /** Ids of the plans whose drafts the person was invited to build from. */
  readonly proofPlans: ReadonlySet<string>;
  /** The session that asked, so that a list of sessions can point it out. */
  readonly sessionId: string;
}
/** Who is asking. */
export type Actor = Visitor | SignedInUser;

export const VISITOR: Visitor = { kind: 'visitor' };

type Tie = { kind: 'imprint'; id: string; role: ImprintRole } | { kind: 'proof'; id: string; role: null };

async function findTies(userId: string): Promise<Tie[]> {
  return sequelize.query<Tie>(
    `select 'imprint' as kind, imprint_id as id, role from imprint_members where user_id = :userId
     union all
     select 'proof', plan_id, null from proof_invites
     where user_id = :userId and accepted_at is not null and revoked_at is null`,
    { replacements: { userId }, type: QueryTypes.SELECT },
  );
}

/**
 * Decides who is asking, by the session cookie alone. Role and memberships are read afresh each time, so that a demotion
 * holds at once. Two queries for a person who is signed in, none for a browser without a session cookie.
 */
export async function findActor(headers: Headers): Promise<Actor> {
  const found = await auth.api.getSession({ headers, query: { disableRefresh: true } });
  if (!found || found.user.erasedAt) return VISITOR;
  const { user, session } = found;
  const ties = await findTies(user.id);
  return {
    kind: 'user',
    id: user.id,
    name: user.name,
    email: user.email,
    role: user.role === 'staff' ? 'staff' : 'member',
    isVerified: user.emailVerified,
    units: user.units === 'in' ? 'in' : 'mm',
    imprints: new Map(ties.flatMap((tie) => (tie.kind === 'imprint' ? [[tie.id, tie.role] as const] : []))),
    proofPlans: new Set(ties.flatMap((tie) => (tie.kind === 'proof' ? [tie.id] : []))),
    sessionId: session.id,
  };
}
