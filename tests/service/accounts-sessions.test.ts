import { afterAll, describe, expect, it, vi } from 'vitest';
import { sequelize } from '#db/client.ts';
import { Account, Session, User, Verification } from '#db/models/index.ts';
import { newPasswordSchema } from '#server/accounts/account-schemas.ts';
import { findActor } from '#server/accounts/actor.ts';
import { changePassword } from '#server/accounts/change-password.ts';
import { requestPasswordReset } from '#server/accounts/request-password-reset.ts';
import { requestVerification } from '#server/accounts/request-verification.ts';
import { resetPassword } from '#server/accounts/reset-password.ts';
import {
  listSessions,
  revokeOtherSessions,
  revokeSession,
  sweepSessions,
} from '#server/accounts/sessions.ts';
import { signIn } from '#server/accounts/sign-in.ts';
import { signOut } from '#server/accounts/sign-out.ts';
import { signUp } from '#server/accounts/sign-up.ts';
import { verifyEmail } from '#server/accounts/verify-email.ts';
import { AppError } from '#server/errors.ts';
import {
  actAs,
  browserHeaders,
  codeOf,
  listMails,
  makePerson,
  makeWord,
  readMailedToken,
  signInAs,
} from './people.ts';

afterAll(() => sequelize.close());

const kindOf = async (headers: Headers) => (await findActor(headers)).kind;

/** What a person is told when something is refused. */
async function refusalOf(run: Promise<unknown>): Promise<Record<string, unknown>> {
  const error: unknown = await run.then(
    () => undefined,
    (cause: unknown) => cause,
  );
  if (!(error instanceof AppError)) throw new Error('it was not refused');
  return { code: error.code, status: error.status, detail: error.detail, fields: error.fields };
}

describe('signing up', () => {
  it('lets nobody in before the address is confirmed, and only then', async () => {
    const person = await makePerson({ isVerified: false });
    expect(await codeOf(signInAs(person))).toBe('EMAIL_UNVERIFIED');
    const token = await readMailedToken(person.email, 'verify-email');
    await verifyEmail({ token, headers: browserHeaders() });
    expect(await kindOf(await signInAs(person))).toBe('user');
  });

  it('does not say to a wrong password that the address waits for its confirmation', async () => {
    const person = await makePerson({ isVerified: false });
    expect(await codeOf(signInAs({ ...person, password: 'not the right one' }))).toBe('WRONG_PASSWORD');
  });

  it('takes two spellings of an address for one account', async () => {
    const person = await makePerson();
    const shouted = { ...person, email: person.email.toUpperCase() };
    expect(await kindOf(await signInAs(shouted))).toBe('user');
  });

  it('answers for a known address as for a new one, changes nothing, and tells the owner', async () => {
    const person = await makePerson();
    const answer = await signUp({
      name: 'Somebody',
      email: person.email,
      password: `another of ${makeWord()}`,
      headers: browserHeaders(),
    });
    expect(answer).toBeUndefined();
    expect(await User.count({ where: { email: person.email } })).toBe(1);
    expect(await kindOf(await signInAs(person))).toBe('user');
    expect(await listMails(person.email, 'existing-account')).toHaveLength(1);
  });

  it('keeps a hash of the password and nothing that can be read', async () => {
    const person = await makePerson();
    const account = await Account.findOne({ where: { userId: person.id }, rejectOnEmpty: true });
    expect(account.password).toBeTruthy();
    expect(account.password).not.toContain(person.password);
  });

  it('refuses a forged confirmation', async () => {
    const person = await makePerson({ isVerified: false });
    const token = await readMailedToken(person.email, 'verify-email');
    const forged = `${token.slice(0, -4)}AAAA`;
    expect(await codeOf(verifyEmail({ token: forged, headers: browserHeaders() }))).toBe('TOKEN_SPENT');
  });
});

describe('passwords', () => {
  it.each([
    [7, false],
    [8, true],
    [64, true],
    [128, true],
    [129, false],
    [10_000, false],
  ])('of %i characters: accepted %s', (length, isAccepted) => {
    const password = 'Oak-ash-elm-'.repeat(1_000).slice(0, length);
    expect(newPasswordSchema.safeParse(password).success).toBe(isAccepted);
  });

  // The published list of the most used passwords (zxcvbn's, compiled from leaks) starts with these among those of 8 and more.
  it.each(['password', '12345678', '123456789', 'baseball', 'football', 'PASSWORD', 'iloveyou', 'zzzzzzzzz'])(
    'refuses %s, which is among the first to be tried',
    (password) => {
      expect(newPasswordSchema.safeParse(password).success).toBe(false);
    },
  );

  it('is used whole: the last of 128 characters counts, and so does every letter of other scripts', async () => {
    for (const password of [`${'a-long-one '.repeat(11)}1234567`, 'Łąka święty dąb 王小明']) {
      const word = makeWord();
      const person = { email: `${word}@readers.test`, name: word, password };
      await signUp({ ...person, headers: browserHeaders() });
      await User.update({ emailVerified: true }, { where: { email: person.email } });
      const shorter = password.slice(0, -1);
      expect(
        await codeOf(signIn({ email: person.email, password: shorter, headers: browserHeaders() })),
      ).toBe('WRONG_PASSWORD');
      expect(await codeOf(signIn({ email: person.email, password, headers: browserHeaders() }))).toBe('none');
    }
  });
});

describe('a session', () => {
  it('is a new one after signing in, and the one before is dead', async () => {
    const [attacker, victim] = await Promise.all([makePerson(), makePerson()]);
    const planted = await signInAs(attacker);
    const { email, password } = victim;
    const { cookies } = await signIn({ email, password, headers: planted });
    const now = browserHeaders({ cookies });
    expect(now.get('cookie')).not.toBe(planted.get('cookie'));
    expect(await findActor(now)).toMatchObject({ kind: 'user', id: victim.id });
    expect(await kindOf(planted)).toBe('visitor');
  });

  it('ends when the person signs out, also for a cookie that was kept', async () => {
    const headers = await signInAs(await makePerson());
    expect(await kindOf(headers)).toBe('user');
    await signOut(headers);
    expect(await kindOf(headers)).toBe('visitor');
  });

  it('cannot be forged by a token without its signature', async () => {
    const person = await makePerson();
    const headers = await signInAs(person);
    const session = await Session.findOne({ where: { userId: person.id }, rejectOnEmpty: true });
    const name = (headers.get('cookie') ?? '').split('=')[0] ?? '';
    expect(await kindOf(new Headers({ cookie: `${name}=${session.token}` }))).toBe('visitor');
    expect(await kindOf(new Headers({ cookie: `${name}=${session.token}.AAAA` }))).toBe('visitor');
  });

  it('runs out after thirty days and not before', async () => {
    const person = await makePerson();
    const headers = await signInAs(person);
    const session = await Session.findOne({ where: { userId: person.id }, rejectOnEmpty: true });
    const days = (session.expiresAt.getTime() - session.createdAt.getTime()) / 86_400_000;
    expect(days).toBeCloseTo(30, 2);
    await session.update({ expiresAt: new Date(Date.now() - 1_000) });
    expect(await kindOf(headers)).toBe('visitor');
  });

  it('is swept once it has run out, and not before', async () => {
    const person = await makePerson();
    const headers = await signInAs(person);
    await sweepSessions();
    expect(await kindOf(headers)).toBe('user');
    await Session.update({ expiresAt: new Date(Date.now() - 1_000) }, { where: { userId: person.id } });
    await sweepSessions();
    expect(await Session.count({ where: { userId: person.id } })).toBe(0);
  });

  it('is listed without its token, and its owner can end it', async () => {
    const person = await makePerson();
    const [here, there] = [await signInAs(person), await signInAs(person)];
    const actor = await findActor(here);
    if (actor.kind !== 'user') throw new Error('not signed in');
    const listed = await listSessions(actor);
    expect(listed).toHaveLength(2);
    expect(JSON.stringify(listed)).not.toContain('token');
    const other = listed.find(({ isThis }) => !isThis);
    await revokeSession({ actor, sessionId: other?.id ?? '' });
    expect(await kindOf(there)).toBe('visitor');
    expect(await kindOf(here)).toBe('user');
  });

  it('of somebody else cannot be ended', async () => {
    const [owner, stranger] = [await makePerson(), await makePerson()];
    const headers = await signInAs(owner);
    const session = await Session.findOne({ where: { userId: owner.id }, rejectOnEmpty: true });
    const actor = await actAs(stranger);
    expect(await codeOf(revokeSession({ actor, sessionId: session.id }))).toBe('NOT_FOUND');
    expect(await kindOf(headers)).toBe('user');
  });

  it('alone is left when the others are signed out', async () => {
    const person = await makePerson();
    const others = [await signInAs(person), await signInAs(person)];
    const actor = await actAs(person);
    expect(await revokeOtherSessions(actor)).toBe(2);
    expect(await Promise.all(others.map(kindOf))).toEqual(['visitor', 'visitor']);
  });

  it('has the role that the account has now, not the one it began with', async () => {
    const person = await makePerson();
    await User.update({ role: 'staff' }, { where: { id: person.id } });
    const headers = await signInAs(person);
    expect(await findActor(headers)).toMatchObject({ role: 'staff' });
    await User.update({ role: 'member' }, { where: { id: person.id } });
    expect(await findActor(headers)).toMatchObject({ role: 'member' });
  });

  it('costs two queries to know, and none without a cookie', async () => {
    const headers = await signInAs(await makePerson());
    const count = vi.fn();
    sequelize.addHook('beforeQuery', 'count', count);
    try {
      await findActor(headers);
      expect(count).toHaveBeenCalledTimes(2);
      count.mockClear();
      await findActor(new Headers());
      expect(count).not.toHaveBeenCalled();
    } finally {
      sequelize.removeHook('beforeQuery', 'count');
    }
  });
});

describe('changing the password', () => {
  it('asks for the one in use', async () => {
    const person = await makePerson();
    const headers = await signInAs(person);
    const actor = await findActor(headers);
    if (actor.kind !== 'user') throw new Error('not signed in');
    const change = { actor, currentPassword: 'a wrong guess', newPassword: `new ${makeWord()}`, headers };
    expect(await refusalOf(changePassword(change))).toMatchObject({
      code: 'BAD_INPUT',
      fields: { currentPassword: 'This is not your current password.' },
    });
  });

  it('ends every other session, gives this browser a new one, and tells the person', async () => {
    const person = await makePerson();
    const [elsewhere, here] = [await signInAs(person), await signInAs(person)];
    const actor = await findActor(here);
    if (actor.kind !== 'user') throw new Error('not signed in');
    const newPassword = `new words ${makeWord()}`;
    const { cookies } = await changePassword({
      actor,
      currentPassword: person.password,
      newPassword,
      headers: here,
    });
    expect(await kindOf(elsewhere)).toBe('visitor');
    expect(await kindOf(here)).toBe('visitor');
    expect(await kindOf(browserHeaders({ cookies }))).toBe('user');
    expect(await codeOf(signInAs(person))).toBe('WRONG_PASSWORD');
    expect(await codeOf(signInAs({ ...person, password: newPassword }))).toBe('none');
    expect(await listMails(person.email, 'password-changed')).toHaveLength(1);
  });
});

describe('setting a new password by a link', () => {
  async function askReset(email: string): Promise<string> {
    await requestPasswordReset({ email, headers: browserHeaders() });
    return readMailedToken(email, 'reset-password');
  }
  const newOne = () => `new words ${makeWord()}`;

  it('works once, and signs everybody out', async () => {
    const person = await makePerson();
    const elsewhere = await signInAs(person);
    const token = await askReset(person.email);
    const password = newOne();
    await resetPassword({ token, password, headers: browserHeaders() });
    expect(await kindOf(elsewhere)).toBe('visitor');
    expect(await codeOf(signInAs({ ...person, password }))).toBe('none');
    const again = resetPassword({ token, password: newOne(), headers: browserHeaders() });
    expect(await codeOf(again)).toBe('TOKEN_SPENT');
  });

  it('works for one of two that come at the same moment', async () => {
    const person = await makePerson();
    const token = await askReset(person.email);
    const codes = await Promise.all(
      [newOne(), newOne()].map((password) =>
        codeOf(resetPassword({ token, password, headers: browserHeaders() })),
      ),
    );
    expect(codes.sort()).toEqual(['TOKEN_SPENT', 'none']);
  });

  it('runs out after an hour', async () => {
    const person = await makePerson();
    const token = await askReset(person.email);
    const waiting = await Verification.findOne({ where: { value: person.id }, rejectOnEmpty: true });
    const minutes = (waiting.expiresAt.getTime() - waiting.createdAt.getTime()) / 60_000;
    expect(minutes).toBeGreaterThan(59);
    expect(minutes).toBeLessThan(61);
    await waiting.update({ expiresAt: new Date(Date.now() - 1_000) });
    const late = resetPassword({ token, password: newOne(), headers: browserHeaders() });
    expect(await codeOf(late)).toBe('TOKEN_SPENT');
  });

  it('is not kept in a form that opens anything', async () => {
    const person = await makePerson();
    const token = await askReset(person.email);
    const rows = await Verification.findAll({ where: { value: person.id } });
    expect(rows).toHaveLength(1);
    expect(JSON.stringify(rows)).not.toContain(token);
  });

  it('refuses a guess', async () => {
    const guess = resetPassword({ token: 'a'.repeat(24), password: newOne(), headers: browserHeaders() });
    expect(await codeOf(guess)).toBe('TOKEN_SPENT');
  });

  it('confirms the address, for whoever opened the link reads its mail', async () => {
    const person = await makePerson({ isVerified: false });
    const password = newOne();
    await resetPassword({ token: await askReset(person.email), password, headers: browserHeaders() });
    expect(await codeOf(signInAs({ ...person, password }))).toBe('none');
  });
});

describe('an address that is not known', () => {
  it('is refused at the door in the same words as a wrong password', async () => {
    const person = await makePerson();
    const wrong = { ...person, password: 'surely not this' };
    const unknown = { ...wrong, email: `${makeWord()}@readers.test` };
    expect(await refusalOf(signInAs(unknown))).toEqual(await refusalOf(signInAs(wrong)));
  });

  it('gets the same answer when a new password or link is asked for, and no mail', async () => {
    const person = await makePerson({ isVerified: false });
    const unknown = `${makeWord()}@readers.test`;
    for (const ask of [requestPasswordReset, requestVerification]) {
      const answers = await Promise.all(
        [person.email, unknown].map((email) => ask({ email, headers: browserHeaders() })),
      );
      expect(answers).toEqual([undefined, undefined]);
    }
    expect(await listMails(unknown)).toEqual([]);
    expect(await listMails(person.email, 'reset-password')).toHaveLength(1);
  });
});

describe('the session cookie', () => {
  it('is kept from scripts and from other sites', async () => {
    const { email, password } = await makePerson();
    const { cookies } = await signIn({ email, password, headers: browserHeaders() });
    expect(cookies).toHaveLength(1);
    expect(cookies[0]).toMatch(/; Path=\/(;|$)/);
    expect(cookies[0]).toMatch(/; HttpOnly(;|$)/);
    expect(cookies[0]).toMatch(/; SameSite=Lax(;|$)/);
    expect(cookies[0]).not.toMatch(/; Domain=/);
  });

  it('travels over https alone, and says so in its name, on a site with https', async () => {
    vi.resetModules();
    vi.stubEnv('SITE_URL', 'https://benchleaf.test');
    try {
      const { auth } = await import('#server/accounts/auth.ts');
      const { sessionToken } = (await auth.$context).authCookies;
      expect(sessionToken.name).toMatch(/^__(Secure|Host)-/);
      expect(sessionToken.attributes).toMatchObject({ secure: true, httpOnly: true, sameSite: 'lax' });
    } finally {
      vi.unstubAllEnvs();
      vi.resetModules();
    }
  });
});
