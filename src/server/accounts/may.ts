import { refuse } from '../errors.ts';
import type { Actor, ImprintRole, SignedInUser } from './actor.ts';

interface ImprintThing {
  imprintId: string;
}
interface PlanThing extends ImprintThing {
  planId: string;
  state: 'draft' | 'published' | 'unpublished';
}
/** What decides about a licence: whose it is and whether it still holds. */
export interface LicenceThing {
  userId: string | null;
  state: 'active' | 'refunded' | 'revoked';
}
interface OwnThing {
  userId: string | null;
}

/** Every action, and what has to be known of the thing to decide about it. */
export interface Things {
  /** The page of a plan: photos, story, limits, totals; never a part size. */
  'plan:read-public': PlanThing & { licences?: readonly LicenceThing[] };
  /** Formulas, part sizes, steps, layouts, templates of one revision. `licences`: those of this plan that the actor has. */
  'plan:read-whole': PlanThing & {
    revisionState: 'draft' | 'published' | 'superseded';
    licences: readonly LicenceThing[];
  };
  'plan:create': ImprintThing;
  'draft:write': ImprintThing;
  'plan:publish': ImprintThing;
  'plan:price': ImprintThing;
  'plan:unpublish': ImprintThing;
  'correction:write': ImprintThing;
  'proof:invite': ImprintThing;
  'proof:report': { planId: string };
  'proof:read': ImprintThing;
  'codes:manage': ImprintThing;
  'sources:manage': ImprintThing;
  'sales:read': ImprintThing;
  'payout:start': ImprintThing;
  'imprint:apply': null;
  'imprint:admit': null;
  'imprint:read': ImprintThing;
  'imprint:edit': ImprintThing;
  'members:manage': ImprintThing;
  'checkout:start': PlanThing;
  'order:read': OwnThing;
  /** `imprintIds`: those whose plans stand in the order. */
  'order:refund': { imprintIds: readonly string[] };
  'licence:read': LicenceThing;
  'licence:use': LicenceThing;
  /** `licence` is the one that the copy was made for. */
  'copy:download': { licence: LicenceThing };
  'fit:write': OwnThing;
  'question:ask': PlanThing;
  'question:answer': ImprintThing;
  'question:hide': ImprintThing;
  'build:write': LicenceThing;
  'build:hide': ImprintThing;
  'mistake:report': PlanThing & { licences: readonly LicenceThing[] };
  'mistake:settle': ImprintThing;
  'account:manage': OwnThing;
  'house:keep': null;
}
export type Action = keyof Things;

interface Rule<Thing> {
  user: (actor: SignedInUser, thing: Thing) => boolean;
  /** Left out: a visitor may not. */
  visitor?: (thing: Thing) => boolean;
  /** Whether a person who may not should not even learn that the thing exists. */
  isHidden?: (thing: Thing) => boolean;
}

const isStaff = (actor: SignedInUser) => actor.role === 'staff';
const isOwn = (actor: SignedInUser, thing: OwnThing) => thing.userId === actor.id;
const isOwnActive = (actor: SignedInUser, licence: LicenceThing) =>
  isOwn(actor, licence) && licence.state === 'active';
const isIn = (actor: SignedInUser, imprintId: string, roles: readonly ImprintRole[]) => {
  const role = actor.imprints.get(imprintId);
  return role !== undefined && roles.includes(role);
};
const makes = (actor: SignedInUser, thing: ImprintThing) => isIn(actor, thing.imprintId, ['owner', 'editor']);
const owns = (actor: SignedInUser, thing: ImprintThing) => isIn(actor, thing.imprintId, ['owner']);
const isPublished = (thing: PlanThing) => thing.state === 'published';
const always = () => true;

/** The whole of who may what. `house:keep` is the staff's own desk: the catalogue, people, mails that failed. */
const rules: { [A in Action]: Rule<Things[A]> } = {
  'plan:read-public': {
    visitor: isPublished,
    user: (actor, plan) =>
      isPublished(plan) ||
      makes(actor, plan) ||
      isStaff(actor) ||
      actor.proofPlans.has(plan.planId) ||
      (plan.licences ?? []).some((licence) => isOwnActive(actor, licence)),
    isHidden: always,
  },
  'plan:read-whole': {
    user: (actor, plan) =>
      makes(actor, plan) ||
      isStaff(actor) ||
      (plan.revisionState === 'draft'
        ? actor.proofPlans.has(plan.planId)
        : plan.licences.some((licence) => isOwnActive(actor, licence))),
    isHidden: (plan) => !isPublished(plan) || plan.revisionState === 'draft',
  },
  'plan:create': { user: makes, isHidden: always },
  'draft:write': { user: makes, isHidden: always },
  'plan:publish': { user: (actor, thing) => makes(actor, thing) && actor.isVerified, isHidden: always },
  'plan:price': { user: owns },
  'plan:unpublish': { user: (actor, thing) => owns(actor, thing) || isStaff(actor) },
  'correction:write': { user: makes },
  'proof:invite': { user: makes, isHidden: always },
  'proof:report': { user: (actor, thing) => actor.proofPlans.has(thing.planId), isHidden: always },
  'proof:read': { user: (actor, thing) => makes(actor, thing) || isStaff(actor), isHidden: always },
  'codes:manage': { user: makes, isHidden: always },
  'sources:manage': { user: makes, isHidden: always },
  'sales:read': {
    user: (actor, thing) => isIn(actor, thing.imprintId, ['owner', 'bookkeeper']) || isStaff(actor),
    isHidden: always,
  },
  'payout:start': { user: (actor, thing) => owns(actor, thing) && actor.isVerified },
  'imprint:apply': { user: (actor) => actor.isVerified },
  'imprint:admit': { user: isStaff, isHidden: always },
  'imprint:read': {
    user: (actor, thing) => actor.imprints.has(thing.imprintId) || isStaff(actor),
    isHidden: always,
  },
  'imprint:edit': { user: owns },
  'members:manage': { user: owns },
  'checkout:start': {
    user: (actor, plan) => isPublished(plan) && actor.isVerified,
    isHidden: (plan) => !isPublished(plan),
  },
  'order:read': { user: (actor, order) => isOwn(actor, order) || isStaff(actor), isHidden: always },
  'order:refund': {
    // An order across imprints is refunded by the staff, or by someone who owns them all.
    user: (actor, order) =>
      isStaff(actor) ||
      (order.imprintIds.length > 0 && order.imprintIds.every((imprintId) => owns(actor, { imprintId }))),
    isHidden: always,
  },
  'licence:read': { user: (actor, licence) => isOwn(actor, licence) || isStaff(actor), isHidden: always },
  'licence:use': { user: isOwnActive, isHidden: always },
  'copy:download': { user: (actor, copy) => isOwnActive(actor, copy.licence), isHidden: always },
  'fit:write': { user: isOwn, isHidden: always },
  'question:ask': {
    user: (actor, plan) => isPublished(plan) && actor.isVerified,
    isHidden: (plan) => !isPublished(plan),
  },
  'question:answer': { user: (actor, thing) => makes(actor, thing) || isStaff(actor) },
  'question:hide': { user: (actor, thing) => makes(actor, thing) || isStaff(actor) },
  'build:write': { user: isOwnActive, isHidden: always },
  // An imprint must not be able to hide what its buyers think of a plan.
  'build:hide': { user: isStaff },
  'mistake:report': {
    user: (actor, plan) =>
      plan.licences.some((licence) => isOwnActive(actor, licence)) || actor.proofPlans.has(plan.planId),
    isHidden: (plan) => !isPublished(plan),
  },
  'mistake:settle': { user: makes, isHidden: always },
  'account:manage': { user: isOwn, isHidden: always },
  'house:keep': { user: isStaff, isHidden: always },
};

/** Every action there is, for tests that walk them all. */
export const ACTIONS = Object.keys(rules) as Action[];

/** Whether the actor may do this to the thing. Pure: what it needs to know of the thing is handed in, read from the database. */
export function may<A extends Action>(actor: Actor, action: A, thing: Things[A]): boolean {
  const rule: Rule<Things[A]> = rules[action];
  return actor.kind === 'user' ? rule.user(actor, thing) : (rule.visitor?.(thing) ?? false);
}

/** The licence at the heart of a refused action, where it is the actor's own and has ended. */
function hasOwnEnded(actor: SignedInUser, action: Action, thing: unknown): boolean {
  if (action !== 'licence:use' && action !== 'copy:download' && action !== 'build:write') return false;
  const licence =
    action === 'copy:download'
      ? (thing as Things['copy:download']).licence
      : (thing as Things['licence:use']);
  return isOwn(actor, licence) && licence.state !== 'active';
}

const NEEDS_VERIFIED: ReadonlySet<Action> = new Set<Action>([
  'plan:publish',
  'payout:start',
  'imprint:apply',
  'checkout:start',
  'question:ask',
]);

/**
 * The guard of every use case: returns the actor, who is known to be signed in wherever visitors may not.
 * @throws AppError SIGN_IN_REQUIRED for visitors (NOT_FOUND where a plan's page is not public), LICENCE_ENDED for one's own
 *   licence that has ended, EMAIL_UNVERIFIED where only that is missing, NOT_FOUND for what the person may not know of,
 *   otherwise FORBIDDEN
 */
export function requireMay<A extends Action>(actor: Actor, action: A, thing: Things[A]): void {
  if (may(actor, action, thing)) return;
  if (actor.kind === 'visitor') refuse(action === 'plan:read-public' ? 'NOT_FOUND' : 'SIGN_IN_REQUIRED');
  if (hasOwnEnded(actor, action, thing)) refuse('LICENCE_ENDED');
  if (NEEDS_VERIFIED.has(action) && !actor.isVerified && may({ ...actor, isVerified: true }, action, thing))
    refuse('EMAIL_UNVERIFIED');
  const rule: Rule<Things[A]> = rules[action];
  refuse(rule.isHidden?.(thing) ? 'NOT_FOUND' : 'FORBIDDEN');
}

/**
 * Narrows to a signed-in person, before anything is known of a thing.
 * @throws AppError SIGN_IN_REQUIRED
 */
export function requireUser(actor: Actor): SignedInUser {
  return actor.kind === 'user' ? actor : refuse('SIGN_IN_REQUIRED');
}
