import { User } from '#db/models/index.ts';
import { findActor, type SignedInUser } from '#server/accounts/actor.ts';
import { CLIENT_ADDRESS_HEADER } from '#server/accounts/client-address.ts';
import { signIn } from '#server/accounts/sign-in.ts';
import { signUp } from '#server/accounts/sign-up.ts';
import { signIns, type SignIn } from './sign-ins.ts';

/** Buyers that only fill the books; nobody signs in as them. */
const OTHER_BUYERS = [
  'Adaeze Lindqvist',
  'Corin Mabey',
  'Dagny Horrocks',
  'Emrys Vantongeren',
  'Fenella Ruiz',
  'Gwil Petrossian',
];

let addresses = 0;
/** Each person sits at a machine of their own, so that the limits on tries do not count the seeder as one. */
const headersOf = (cookies: readonly string[] = []) => {
  addresses += 1;
  const headers = new Headers({ [CLIENT_ADDRESS_HEADER]: `seed-${String(addresses)}` });
  if (cookies.length) headers.set('cookie', cookies.map((cookie) => cookie.split(';')[0]).join('; '));
  return headers;
};

async function findOrMake({
  name,
  email,
  password,
}: Pick<SignIn, 'name' | 'email' | 'password'>): Promise<void> {
  if (!(await User.count({ where: { email } })))
    await signUp({ name, email, password, headers: headersOf() });
  await User.update({ emailVerified: true }, { where: { email } });
}

export interface People {
  /** Signs somebody in and gives them as the services know them, with the rights they have now. */
  as: (email: string) => Promise<SignedInUser>;
  buyers: readonly string[];
}

/** The people of the demo, made as people make their accounts, with their addresses confirmed. */
export async function seedPeople(): Promise<People> {
  const others: SignIn[] = OTHER_BUYERS.map((name, index) => ({
    role: 'buyer',
    name,
    email: `reader${String(index + 1)}@benchleaf.example`,
    password: `a quiet corner of room ${String(index + 1)}`,
  }));
  const all = [...signIns, ...others];
  for (const person of all) await findOrMake(person);
  await User.update({ role: 'staff' }, { where: { email: 'pia@benchleaf.example' } });
  await User.update(
    { units: 'in' },
    { where: { email: ['rosalind@benchleaf.example', 'marguerite@benchleaf.example'] } },
  );
  const as = async (email: string): Promise<SignedInUser> => {
    const person = all.find((each) => each.email === email);
    if (!person) throw new Error(`the demo has nobody with the address ${email}`);
    const { cookies } = await signIn({ email, password: person.password, headers: headersOf() });
    const actor = await findActor(headersOf(cookies));
    if (actor.kind !== 'user') throw new Error(`${email} could not be signed in`);
    return actor;
  };
  return {
    as,
    buyers: [
      'lukasz@benchleaf.example',
      'marguerite@benchleaf.example',
      ...others.map((person) => person.email),
    ],
  };
}
