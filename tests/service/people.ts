import { randomBytes } from 'node:crypto';
import { OutboxEmail, User } from '#db/models/index.ts';
import { findActor, type SignedInUser } from '#server/accounts/actor.ts';
import { CLIENT_ADDRESS_HEADER } from '#server/accounts/client-address.ts';
import { signIn } from '#server/accounts/sign-in.ts';
import { signUp } from '#server/accounts/sign-up.ts';

/** A word that no other test uses. */
export const makeWord = () => randomBytes(6).toString('hex');

/** Headers of a browser at an address, with the cookies it was given. Without an address: one that nobody else has. */
export function browserHeaders(options: { address?: string; cookies?: readonly string[] } = {}): Headers {
  const headers = new Headers({ [CLIENT_ADDRESS_HEADER]: options.address ?? `test-${makeWord()}` });
  const pairs = (options.cookies ?? []).map((cookie) => cookie.split(';')[0] ?? '');
  if (pairs.length) headers.set('cookie', pairs.join('; '));
  return headers;
}

export interface TestPerson {
  id: string;
  name: string;
  email: string;
  password: string;
}

/** A person with an account, made as people make theirs; `isVerified: false` leaves the address unconfirmed. */
export async function makePerson(given: { isVerified?: boolean; name?: string } = {}): Promise<TestPerson> {
  const word = makeWord();
  const person = {
    name: given.name ?? `Reader ${word}`,
    email: `${word}@readers.test`,
    password: `four words of ${word}`,
  };
  await signUp({ ...person, headers: browserHeaders() });
  const user = await User.findOne({ where: { email: person.email }, rejectOnEmpty: true });
  if (given.isVerified !== false) await user.update({ emailVerified: true });
  return { ...person, id: user.id };
}

/** Signs a person in at an address of their own. @returns headers of that browser */
export async function signInAs(person: TestPerson): Promise<Headers> {
  const { email, password } = person;
  const { cookies } = await signIn({ email, password, headers: browserHeaders() });
  return browserHeaders({ cookies });
}

/** Who a signed-in person is to the services. */
export async function actAs(person: TestPerson): Promise<SignedInUser> {
  const actor = await findActor(await signInAs(person));
  if (actor.kind !== 'user') throw new Error(`${person.email} is not signed in`);
  return actor;
}

/** The mails of a kind that wait for an address, the oldest first. */
export async function listMails(address: string, kind?: string): Promise<OutboxEmail[]> {
  return OutboxEmail.findAll({
    where: { toAddress: address, ...(kind ? { kind } : {}) },
    order: [['createdAt', 'ASC']],
  });
}

/** The secret in the link of the newest mail of a kind. */
export async function readMailedToken(address: string, kind: string): Promise<string> {
  const mail = (await listMails(address, kind)).at(-1);
  const token = /(?:token=|\/invitations\/)([^\s&]+)/.exec(mail?.textBody ?? '')?.[1];
  if (!token) throw new Error(`no ${kind} link was sent to ${address}`);
  return decodeURIComponent(token);
}

/** The code with which something is refused; `none` when it is not. */
export async function codeOf(run: Promise<unknown>): Promise<string> {
  try {
    await run;
    return 'none';
  } catch (error) {
    if (error instanceof Error && 'code' in error && typeof error.code === 'string') return error.code;
    throw error;
  }
}
