import { describe, expect, it } from 'vitest';
import { VISITOR, type Actor, type SignedInUser } from '#server/accounts/actor.ts';
import { ACTIONS, may, requireMay, type Action, type Things } from '#server/accounts/may.ts';
import { AppError } from '#server/errors.ts';

const IMPRINT = 'imprint-1';
const PLAN = 'plan-1';

function person(id: string, given: Partial<SignedInUser> = {}): SignedInUser {
  return {
    kind: 'user',
    id,
    name: id,
    email: `${id}@house.test`,
    role: 'member',
    isVerified: true,
    units: 'mm',
    imprints: new Map(),
    proofPlans: new Set(),
    sessionId: `session-of-${id}`,
    ...given,
  };
}

/** Everybody who may come to the house. */
const people = {
  visitor: VISITOR,
  unverified: person('unverified', { isVerified: false }),
  stranger: person('stranger'),
  /** Holds the licence, made the order, wrote the fit that the things below speak of. */
  holder: person('holder'),
  owner: person('owner', { imprints: new Map([[IMPRINT, 'owner']]) }),
  editor: person('editor', { imprints: new Map([[IMPRINT, 'editor']]) }),
  bookkeeper: person('bookkeeper', { imprints: new Map([[IMPRINT, 'bookkeeper']]) }),
  /** Owns another imprint, which gives no right here. */
  rival: person('rival', { imprints: new Map([['imprint-2', 'owner']]) }),
  prover: person('prover', { proofPlans: new Set([PLAN]) }),
  staff: person('staff', { role: 'staff' }),
} satisfies Record<string, Actor>;
type Who = keyof typeof people;
const everybody = Object.keys(people) as Who[];
const signedIn = everybody.filter((who) => who !== 'visitor');
const verified = signedIn.filter((who) => who !== 'unverified');

const imprint = { imprintId: IMPRINT };
const draft = { imprintId: IMPRINT, planId: PLAN, state: 'draft' } as const;
const published = { ...draft, state: 'published' } as const;
const unpublished = { ...draft, state: 'unpublished' } as const;
const active = { userId: 'holder', state: 'active' } as const;
const refunded = { userId: 'holder', state: 'refunded' } as const;
const revoked = { userId: 'holder', state: 'revoked' } as const;
const own = { userId: 'holder' };

type Row = { [A in Action]: { action: A; when: string; thing: Things[A]; by: readonly Who[] } }[Action];

/** Who may what, written from the jobs of the people in the house, one row for each case that makes a difference. */
const table: readonly Row[] = [
  { action: 'plan:read-public', when: 'published', thing: published, by: everybody },
  {
    action: 'plan:read-public',
    when: 'a draft',
    thing: { ...draft, licences: [active] },
    by: ['owner', 'editor', 'prover', 'staff', 'holder'],
  },
  {
    action: 'plan:read-public',
    when: 'unpublished and bought before',
    thing: { ...unpublished, licences: [active] },
    by: ['owner', 'editor', 'prover', 'staff', 'holder'],
  },
  {
    action: 'plan:read-public',
    when: 'unpublished and given back',
    thing: { ...unpublished, licences: [refunded] },
    by: ['owner', 'editor', 'prover', 'staff'],
  },
  {
    action: 'plan:read-whole',
    when: 'published and bought',
    thing: { ...published, revisionState: 'published', licences: [active] },
    by: ['owner', 'editor', 'staff', 'holder'],
  },
  {
    action: 'plan:read-whole',
    when: 'an earlier revision, bought',
    thing: { ...published, revisionState: 'superseded', licences: [active] },
    by: ['owner', 'editor', 'staff', 'holder'],
  },
  {
    action: 'plan:read-whole',
    when: 'no longer sold, bought before',
    thing: { ...unpublished, revisionState: 'published', licences: [active] },
    by: ['owner', 'editor', 'staff', 'holder'],
  },
  {
    action: 'plan:read-whole',
    when: 'given back',
    thing: { ...published, revisionState: 'published', licences: [refunded, revoked] },
    by: ['owner', 'editor', 'staff'],
  },
  {
    action: 'plan:read-whole',
    when: 'a draft of a plan that was bought',
    thing: { ...published, revisionState: 'draft', licences: [active] },
    by: ['owner', 'editor', 'staff', 'prover'],
  },
  { action: 'plan:create', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'draft:write', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'plan:publish', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'plan:price', when: 'an imprint', thing: imprint, by: ['owner'] },
  { action: 'plan:unpublish', when: 'an imprint', thing: imprint, by: ['owner', 'staff'] },
  { action: 'correction:write', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'proof:invite', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'proof:report', when: 'a plan', thing: { planId: PLAN }, by: ['prover'] },
  { action: 'proof:read', when: 'an imprint', thing: imprint, by: ['owner', 'editor', 'staff'] },
  { action: 'codes:manage', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'sources:manage', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'sales:read', when: 'an imprint', thing: imprint, by: ['owner', 'bookkeeper', 'staff'] },
  { action: 'payout:start', when: 'an imprint', thing: imprint, by: ['owner'] },
  { action: 'imprint:apply', when: 'always', thing: null, by: verified },
  { action: 'imprint:admit', when: 'always', thing: null, by: ['staff'] },
  {
    action: 'imprint:read',
    when: 'an imprint',
    thing: imprint,
    by: ['owner', 'editor', 'bookkeeper', 'staff'],
  },
  { action: 'imprint:edit', when: 'an imprint', thing: imprint, by: ['owner'] },
  { action: 'members:manage', when: 'an imprint', thing: imprint, by: ['owner'] },
  { action: 'checkout:start', when: 'published', thing: published, by: verified },
  { action: 'checkout:start', when: 'a draft', thing: draft, by: [] },
  { action: 'checkout:start', when: 'unpublished', thing: unpublished, by: [] },
  { action: 'order:read', when: 'an order', thing: own, by: ['holder', 'staff'] },
  { action: 'order:read', when: 'an order of an erased person', thing: { userId: null }, by: ['staff'] },
  {
    action: 'order:refund',
    when: 'of one imprint',
    thing: { imprintIds: [IMPRINT] },
    by: ['owner', 'staff'],
  },
  {
    action: 'order:refund',
    when: 'of two imprints',
    thing: { imprintIds: [IMPRINT, 'imprint-2'] },
    by: ['staff'],
  },
  { action: 'order:refund', when: 'of none', thing: { imprintIds: [] }, by: ['staff'] },
  { action: 'licence:read', when: 'active', thing: active, by: ['holder', 'staff'] },
  { action: 'licence:read', when: 'ended', thing: refunded, by: ['holder', 'staff'] },
  { action: 'licence:use', when: 'active', thing: active, by: ['holder'] },
  { action: 'licence:use', when: 'refunded', thing: refunded, by: [] },
  { action: 'licence:use', when: 'revoked', thing: revoked, by: [] },
  { action: 'copy:download', when: 'active', thing: { licence: active }, by: ['holder'] },
  { action: 'copy:download', when: 'refunded', thing: { licence: refunded }, by: [] },
  { action: 'fit:write', when: 'own', thing: own, by: ['holder'] },
  { action: 'question:ask', when: 'published', thing: published, by: verified },
  { action: 'question:ask', when: 'a draft', thing: draft, by: [] },
  { action: 'question:answer', when: 'an imprint', thing: imprint, by: ['owner', 'editor', 'staff'] },
  { action: 'question:hide', when: 'an imprint', thing: imprint, by: ['owner', 'editor', 'staff'] },
  { action: 'build:write', when: 'active', thing: active, by: ['holder'] },
  { action: 'build:write', when: 'refunded', thing: refunded, by: [] },
  { action: 'build:hide', when: 'an imprint', thing: imprint, by: ['staff'] },
  {
    action: 'mistake:report',
    when: 'bought',
    thing: { ...published, licences: [active] },
    by: ['holder', 'prover'],
  },
  { action: 'mistake:settle', when: 'an imprint', thing: imprint, by: ['owner', 'editor'] },
  { action: 'account:manage', when: 'own', thing: own, by: ['holder'] },
  { action: 'house:keep', when: 'always', thing: null, by: ['staff'] },
];

const decide = <A extends Action>(who: Who, action: A, thing: Things[A]) => may(people[who], action, thing);

function refusalOf<A extends Action>(who: Who, action: A, thing: Things[A]): string {
  try {
    requireMay(people[who], action, thing);
  } catch (error) {
    if (error instanceof AppError) return error.code;
    throw error;
  }
  return 'none';
}

describe('who may what', () => {
  it('names every action in the table', () => {
    expect(new Set(table.map(({ action }) => action))).toEqual(new Set(ACTIONS));
  });

  it.each(table)('$action, $when: allowed to exactly those in the table', ({ action, thing, by }) => {
    const allowed = everybody.filter((who) => decide(who, action as never, thing as never));
    expect(allowed).toEqual(everybody.filter((who) => by.includes(who)));
  });

  it.each(table)('$action, $when: the guard refuses whom the table leaves out', ({ action, thing, by }) => {
    for (const who of everybody) {
      const code = refusalOf(who, action as never, thing as never);
      if (by.includes(who)) expect([who, code]).toEqual([who, 'none']);
      else
        expect(code, who).toMatch(/^(SIGN_IN_REQUIRED|NOT_FOUND|FORBIDDEN|LICENCE_ENDED|EMAIL_UNVERIFIED)$/);
    }
  });
});

describe('how a refusal sounds', () => {
  it('asks a visitor to sign in', () => {
    expect(refusalOf('visitor', 'licence:use', active)).toBe('SIGN_IN_REQUIRED');
  });
  it('does not tell a visitor that an unpublished plan exists', () => {
    expect(refusalOf('visitor', 'plan:read-public', draft)).toBe('NOT_FOUND');
  });
  it('does not tell a stranger that the licence of another person exists', () => {
    expect(refusalOf('stranger', 'copy:download', { licence: active })).toBe('NOT_FOUND');
    expect(refusalOf('stranger', 'order:read', own)).toBe('NOT_FOUND');
  });
  it('tells a holder that the licence has ended', () => {
    expect(refusalOf('holder', 'copy:download', { licence: refunded })).toBe('LICENCE_ENDED');
  });
  it('tells somebody who only lacks a confirmed address just that', () => {
    expect(refusalOf('unverified', 'checkout:start', published)).toBe('EMAIL_UNVERIFIED');
  });
  it('tells a member of the imprint plainly that something is the owner’s', () => {
    expect(refusalOf('editor', 'plan:price', imprint)).toBe('FORBIDDEN');
  });
  it('keeps the parts of a published plan from somebody who has not bought it, and says so', () => {
    const thing = { ...published, revisionState: 'published', licences: [] } as const;
    expect(refusalOf('stranger', 'plan:read-whole', thing)).toBe('FORBIDDEN');
  });
});
