import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import { User, Verification } from '#db/models/index.ts';
import { findActor, type SignedInUser } from '#server/accounts/actor.ts';
import { changeEmail } from '#server/accounts/change-email.ts';
import { changePassword } from '#server/accounts/change-password.ts';
import { requestPasswordReset } from '#server/accounts/request-password-reset.ts';
import { resetPassword } from '#server/accounts/reset-password.ts';
import { verifyEmail } from '#server/accounts/verify-email.ts';
import {
  browserHeaders,
  codeOf,
  listMails,
  makePerson,
  makeWord,
  readMailedToken,
  signInAs,
  type TestPerson,
} from './people.ts';

afterAll(() => sequelize.close());

const makeAddress = () => `${makeWord()}@new.test`;
const open = (token: string) => codeOf(verifyEmail({ token, headers: browserHeaders() }));
const addressOf = async ({ id }: TestPerson) =>
  (await User.findByPk(id, { rejectOnEmpty: true })).get('email');

async function start(person: TestPerson, newEmail: string, password = person.password) {
  const headers = await signInAs(person);
  const actor = (await findActor(headers)) as SignedInUser;
  await changeEmail({ actor, newEmail, currentPassword: password, headers });
  return { actor, headers };
}

describe('moving an account to another address', () => {
  it('asks for the password', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    expect(await codeOf(start(person, newEmail, 'a wrong guess'))).toBe('BAD_INPUT');
    expect(await listMails(newEmail)).toEqual([]);
  });

  it('tells the old address at once, moves when the new one is confirmed, and tells the old one again', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    await start(person, newEmail);
    expect(await listMails(person.email, 'email-change')).toHaveLength(1);
    expect(await addressOf(person)).toBe(person.email);
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('none');
    expect(await addressOf(person)).toBe(newEmail);
    expect(await listMails(person.email, 'email-changed')).toHaveLength(1);
    expect(await codeOf(signInAs({ ...person, email: newEmail }))).toBe('none');
    expect(await codeOf(signInAs(person))).toBe('WRONG_PASSWORD');
  });

  it('happens once', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    await start(person, newEmail);
    const token = await readMailedToken(newEmail, 'verify-email');
    const codes = await Promise.all([open(token), open(token)]);
    expect(codes.sort()).toEqual(['TOKEN_SPENT', 'none']);
  });

  it('goes to the address asked for last', async () => {
    const person = await makePerson();
    const [first, second] = [makeAddress(), makeAddress()];
    await start(person, first);
    await start(person, second);
    expect(await open(await readMailedToken(first, 'verify-email'))).toBe('TOKEN_SPENT');
    expect(await open(await readMailedToken(second, 'verify-email'))).toBe('none');
    expect(await addressOf(person)).toBe(second);
  });

  it('is called off by setting a new password through the old address', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    await start(person, newEmail);
    await requestPasswordReset({ email: person.email, headers: browserHeaders() });
    const token = await readMailedToken(person.email, 'reset-password');
    await resetPassword({ token, password: `new words ${makeWord()}`, headers: browserHeaders() });
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('TOKEN_SPENT');
    expect(await addressOf(person)).toBe(person.email);
  });

  it('is called off by changing the password', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    const { actor, headers } = await start(person, newEmail);
    const newPassword = `new words ${makeWord()}`;
    await changePassword({ actor, currentPassword: person.password, newPassword, headers });
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('TOKEN_SPENT');
  });

  it('is off when the account has another address by now', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    await start(person, newEmail);
    await User.update({ email: makeAddress() }, { where: { id: person.id } });
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('TOKEN_SPENT');
  });

  it('runs out after a day', async () => {
    const person = await makePerson();
    const newEmail = makeAddress();
    await start(person, newEmail);
    const where = { identifier: `change-email:${person.id}` };
    await Verification.update({ expiresAt: new Date(Date.now() - 1_000) }, { where });
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('TOKEN_SPENT');
  });

  it('does not tell whether the new address has an account, and sends that account nothing to confirm', async () => {
    const [person, other] = [await makePerson(), await makePerson()];
    const before = await listMails(other.email);
    expect(await codeOf(start(person, other.email))).toBe('none');
    expect(await listMails(other.email)).toHaveLength(before.length);
  });

  it('is refused when another account took the address meanwhile', async () => {
    const [person, other] = [await makePerson(), await makePerson()];
    const newEmail = makeAddress();
    await start(person, newEmail);
    await User.update({ email: newEmail }, { where: { id: other.id } });
    expect(await open(await readMailedToken(newEmail, 'verify-email'))).toBe('CONFLICT');
    expect(await addressOf(person)).toBe(person.email);
  });

  it.each([
    'change.',
    'change.not-an-id.secret',
    `change.${'0'.repeat(8)}-0000-4000-8000-${'0'.repeat(12)}.${'a'.repeat(43)}`,
  ])('refuses the made-up link %s', async (token) => {
    expect(await open(token)).toBe('TOKEN_SPENT');
  });
});
