import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import { User } from '#db/models/index.ts';
import { findActor } from '#server/accounts/actor.ts';
import { GET as exportData } from '#src/pages/api/account/export.ts';
import { POST as changeEmail } from '#src/pages/api/account/email.ts';
import { POST as erase } from '#src/pages/api/account/erase.ts';
import { POST as changePassword } from '#src/pages/api/account/password.ts';
import { POST as changeProfile } from '#src/pages/api/account/profile.ts';
import { POST as endSession } from '#src/pages/api/account/sessions.ts';
import { POST as signIn } from '#src/pages/api/account/sign-in.ts';
import { POST as signOut } from '#src/pages/api/account/sign-out.ts';
import { POST as signUp } from '#src/pages/api/account/sign-up.ts';
import { browserHeaders, makePerson, makeWord, signInAs } from './people.ts';
import { submitForm } from './submit-form.ts';

afterAll(() => sequelize.close());

const locationOf = ({ response }: { response: Response }) => response.headers.get('location');

describe('the form to sign up', () => {
  const path = '/api/account/sign-up';

  it('takes name, address and password and nothing else that is sent', async () => {
    const email = `${makeWord()}@readers.test`;
    const id = '11111111-1111-4111-8111-111111111111';
    const password = `four words of ${makeWord()}`;
    const extra = {
      id,
      role: 'staff',
      emailVerified: 'true',
      email_verified: 'true',
      erasedAt: '',
      units: 'in',
    };
    const fields = { name: 'Wim Lathe', email, password, ...extra };
    const { response } = await submitForm(signUp, { path, fields, headers: browserHeaders() });
    expect(response.status).toBe(303);
    const user = await User.findOne({ where: { email }, rejectOnEmpty: true });
    expect(user).toMatchObject({ name: 'Wim Lathe', role: 'member', emailVerified: false, units: 'mm' });
    expect(user.id).not.toBe(id);
  });

  it('comes back with what was typed and what was wrong, but never with the password', async () => {
    const fields = { name: 'Wim Lathe', email: 'no address', password: 'short' };
    const submitted = await submitForm(signUp, { path, fields, headers: browserHeaders() });
    expect(locationOf(submitted)).toBe('/sign-up?next=%2Fdrawer');
    expect(submitted.memory.values).toEqual({ name: 'Wim Lathe', email: 'no address' });
    expect(submitted.memory.errors).toEqual({
      email: 'This is not an e-mail address.',
      password: 'A password needs at least 8 characters.',
    });
  });

  it('answers alike for a new address and a known one', async () => {
    const person = await makePerson();
    const submit = (email: string) => {
      const fields = { name: 'Wim Lathe', email, password: `four words of ${makeWord()}` };
      return submitForm(signUp, { path, fields, headers: browserHeaders() });
    };
    const unknown = `${makeWord()}@readers.test`;
    const [known, fresh] = [await submit(person.email), await submit(unknown)];
    expect(known.response.status).toBe(fresh.response.status);
    expect([...known.response.headers]).toEqual([...fresh.response.headers]);
    expect(known.memory.notice?.replace(person.email, '')).toBe(fresh.memory.notice?.replace(unknown, ''));
  });

  it.each(['a@b.test\r\nBcc: c@d.test', 'a@b.test, c@d.test', '"A" <a@b.test>', 'a b@c.test', 'a@b'])(
    'refuses %j as an address',
    async (email) => {
      const fields = { name: 'Wim', email, password: `four words of ${makeWord()}` };
      const { memory } = await submitForm(signUp, { path, fields, headers: browserHeaders() });
      expect(memory.errors['email']).toBe('This is not an e-mail address.');
    },
  );

  it.each(['', '   ', 'a'.repeat(101), 'Wim\u202eehtaL', 'Wim\u0000'])(
    'refuses %j as a name',
    async (name) => {
      const fields = { name, email: `${makeWord()}@readers.test`, password: `four words of ${makeWord()}` };
      const { memory } = await submitForm(signUp, { path, fields, headers: browserHeaders() });
      expect(Object.keys(memory.errors)).toEqual(['name']);
    },
  );
});

describe('the form to sign in', () => {
  it('sets the cookie and leads where the person was going, on this site only', async () => {
    const { email, password } = await makePerson();
    for (const [next, target] of [
      ['/orders', '/orders'],
      ['//evil.test', '/'],
      ['https://evil.test', '/'],
    ]) {
      const path = `/api/account/sign-in?next=${encodeURIComponent(next ?? '')}`;
      const submitted = await submitForm(signIn, {
        path,
        fields: { email, password },
        headers: browserHeaders(),
      });
      expect(submitted.response.status).toBe(303);
      expect(locationOf(submitted)).toBe(target);
      expect(await findActor(browserHeaders({ cookies: submitted.cookies }))).toMatchObject({ kind: 'user' });
    }
  });

  it('answers too many tries with 429 and the seconds to wait', async () => {
    const email = `${makeWord()}@readers.test`;
    const submit = () =>
      submitForm(signIn, {
        path: '/api/account/sign-in',
        fields: { email, password: 'a wrong guess' },
        headers: browserHeaders(),
      });
    for (let index = 0; index < 10; index += 1) expect((await submit()).response.status).toBe(303);
    const { response } = await submit();
    expect(response.status).toBe(429);
    expect(Number(response.headers.get('retry-after'))).toBeGreaterThan(0);
  });
});

describe('the forms of the account', () => {
  it('change name and units, and neither role nor address', async () => {
    const person = await makePerson();
    const fields = {
      name: 'Another Name',
      units: 'in',
      role: 'staff',
      email: 'x@evil.test',
      id: makeWord(),
      emailVerified: 'false',
    };
    const headers = await signInAs(person);
    await submitForm(changeProfile, { path: '/api/account/profile', fields, headers });
    const user = await User.findByPk(person.id, { rejectOnEmpty: true });
    expect(user).toMatchObject({
      name: 'Another Name',
      units: 'in',
      role: 'member',
      email: person.email,
      emailVerified: true,
    });
  });

  it('end the session of the browser that signs out', async () => {
    const headers = await signInAs(await makePerson());
    const submitted = await submitForm(signOut, { path: '/api/account/sign-out', fields: {}, headers });
    expect(submitted.cookies.join()).toMatch(/Max-Age=0/);
    expect(await findActor(headers)).toEqual({ kind: 'visitor' });
  });

  it('say at the password field that the password is wrong', async () => {
    const headers = await signInAs(await makePerson());
    const fields = { newEmail: `${makeWord()}@new.test`, emailPassword: 'a wrong guess' };
    const { memory } = await submitForm(changeEmail, { path: '/api/account/email', fields, headers });
    expect(memory.errors).toEqual({ emailPassword: 'This is not your current password.' });
    expect(memory.values).toEqual({ newEmail: fields.newEmail });
  });

  it('ask for the tick before an account is erased', async () => {
    const person = await makePerson();
    const headers = await signInAs(person);
    const fields = { erasePassword: person.password };
    const { memory } = await submitForm(erase, { path: '/api/account/erase', fields, headers });
    expect(Object.keys(memory.errors)).toEqual(['isSure']);
    expect(await findActor(headers)).toMatchObject({ kind: 'user' });
  });

  it('send a visitor to sign in and back', async () => {
    const newPassword = `four words of ${makeWord()}`;
    const cases = [
      [changeProfile, { name: 'Wim', units: 'mm' }],
      [changeEmail, { newEmail: 'a@b.test', emailPassword: 'some password' }],
      [changePassword, { currentPassword: 'some password', newPassword }],
      [endSession, { sessionId: 'others' }],
      [erase, { erasePassword: 'some password', isSure: 'yes' }],
    ] as const;
    for (const [endpoint, fields] of cases) {
      const submitted = await submitForm(endpoint, {
        path: '/api/account/any',
        fields,
        headers: browserHeaders(),
      });
      expect(locationOf(submitted)).toBe('/sign-in?next=%2Faccount');
    }
  });

  it('give the file of one’s own data to oneself alone', async () => {
    const ask = (headers: Headers) =>
      submitForm(exportData, { path: '/api/account/export', fields: {}, headers, method: 'GET' });
    expect((await ask(browserHeaders())).response.status).toBe(401);
    const person = await makePerson();
    const { response } = await ask(await signInAs(person));
    expect(response.headers.get('cache-control')).toBe('private, no-store');
    expect(response.headers.get('content-disposition')).toContain('attachment');
    expect(await response.json()).toMatchObject({ person: { email: person.email } });
  });
});
