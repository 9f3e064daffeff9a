import { readdirSync } from 'node:fs';
import path from 'node:path';
import pg from 'pg';
import { expect, request, type APIRequestContext } from 'playwright/test';
import * as z from 'zod';
import { signIns } from '#db/seeds/sign-ins.ts';
import { test } from './house.ts';
import { routes, type Need } from './routes.ts';

const site = process.env['E2E_SITE'] ?? '';

/** The people of the demo by what they are; `visitor` has not signed in. */
const people = {
  visitor: '',
  buyer: 'lukasz',
  otherBuyer: 'marguerite',
  bookkeeper: 'ida',
  editor: 'tomas',
  owner: 'wenna',
  otherOwner: 'rosalind',
  staff: 'pia',
} as const;
type Person = keyof typeof people;

/** Who may see a page of that need; everybody else is turned away. */
const allowed: Record<Need, readonly Person[]> = {
  open: Object.keys(people) as Person[],
  own: ['buyer', 'otherBuyer', 'bookkeeper', 'editor', 'owner', 'otherOwner', 'staff'],
  imprint: ['bookkeeper', 'editor', 'owner', 'staff'],
  writer: ['editor', 'owner'],
  owner: ['owner'],
  books: ['bookkeeper', 'owner', 'staff'],
  staff: ['staff'],
  holder: ['buyer'],
  proof: ['editor', 'owner', 'staff'],
};

const contexts = new Map<Person, APIRequestContext>();
let database: pg.Client;
const ids = new Map<string, string>();

const rowSchema = z.object({ value: z.string() });
async function findValue(sql: string, values: string[] = []): Promise<string> {
  const { rows } = await database.query(sql, values);
  return rowSchema.parse(rows[0]).value;
}

test.beforeAll(async () => {
  database = new pg.Client({ connectionString: process.env['DATABASE_URL'] });
  await database.connect();
  const buyer = await findValue(`select id as value from users where email = 'lukasz@benchleaf.example'`);
  const licence = `select l.id as value from licences l join plans p on p.id = l.plan_id where p.slug = 'boot-bench-for-a-narrow-hall' and l.user_id = $1 and l.state = 'active' limit 1`;
  ids.set('[licenceId]', await findValue(licence, [buyer]));
  ids.set(
    '[copyId]',
    await findValue('select id as value from copies where licence_id = $1 limit 1', [
      ids.get('[licenceId]') ?? '',
    ]),
  );
  ids.set(
    '[orderId]',
    await findValue(
      `select o.id as value from orders o join order_lines l on l.order_id = o.id join plans p on p.id = l.plan_id where p.slug = 'boot-bench-for-a-narrow-hall' and o.paid_at is not null and o.user_id = $1 limit 1`,
      [buyer],
    ),
  );
  ids.set(
    '[planId]',
    await findValue(`select p.id as value from plans p where p.title = 'Plate rack for a sloping wall'`),
  );
  ids.set('[sha256]', await findValue('select sha256 as value from assets where is_public limit 1'));
  ids.set('[slug]', 'boot-bench-for-a-narrow-hall');
  ids.set('[imprint]', 'low-fell-joinery');
  for (const [person, mailbox] of Object.entries(people) as [Person, string][]) {
    const context = await request.newContext({ baseURL: site, extraHTTPHeaders: { origin: site } });
    const known = signIns.find((each) => each.email.startsWith(`${mailbox}@`));
    if (mailbox && known)
      await context.post('/api/account/sign-in', { form: { email: known.email, password: known.password } });
    contexts.set(person, context);
  }
});
test.afterAll(async () => {
  for (const context of contexts.values()) await context.dispose();
  await database.end();
});

const addressOf = (file: string) => {
  const filled = file
    .replace(/\[[^\]]+\]/g, (name) => ids.get(name) ?? name)
    .replace(/\.(astro|ts)$/, '')
    .replace(/(^|\/)index$/, '');
  return `/${filled.startsWith('imprints/') ? 'imprints/low-fell-joinery' : filled}`;
};

test('every page and endpoint stands in the table of routes', () => {
  const files = readdirSync('src/pages', { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => path.relative('src/pages', path.join(entry.parentPath, entry.name)));
  expect(routes.map((route) => route.file).sort()).toEqual(files.sort());
});

const skipped = /\.\.\.slug|invitations|^(403|404|500)\.astro/;
for (const route of routes.filter((each) => each.methods.includes('GET') && !skipped.test(each.file))) {
  test(`GET ${route.file} opens to those who may (${route.need}) and to nobody else`, async () => {
    const query = route.file.endsWith('statement.ts')
      ? `?month=${new Date().toISOString().slice(0, 7)}&currency=EUR`
      : '';
    for (const person of Object.keys(people) as Person[]) {
      const answer = await contexts.get(person)?.get(addressOf(route.file) + query, { maxRedirects: 0 });
      const status = answer?.status() ?? 0;
      // An order is its buyer's, and how far a copy is its holder's; staff may look at both.
      const isLookedAfter = ['orders/[orderId].astro', 'api/copies/[copyId]/index.ts'].includes(route.file);
      const isAllowed = isLookedAfter
        ? ['buyer', 'staff'].includes(person)
        : allowed[route.need].includes(person);
      if (isAllowed) expect([200, 303], `${person} on ${route.file}`).toContain(status);
      else expect([303, 401, 403, 404], `${person} on ${route.file}`).toContain(status);
      if (!isAllowed && status === 303) expect(answer?.headers()['location']).toContain('/sign-in');
      if (isAllowed && status === 303) expect(answer?.headers()['location']).not.toContain('/sign-in');
    }
  });
}

const uuid = '11111111-1111-4111-8111-111111111111';
const forms: { address: () => string; form: Record<string, string>; strangers: readonly Person[] }[] = [
  {
    address: () => '/api/staff/plans',
    form: { planId: ids.get('[planId]') ?? '', what: 'take-out' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'otherOwner'],
  },
  {
    address: () => '/api/staff/imprints',
    form: { imprintId: uuid, state: 'suspended' },
    strangers: ['visitor', 'buyer', 'owner'],
  },
  {
    address: () => '/api/staff/refunds',
    form: { orderId: uuid, requestKey: uuid },
    strangers: ['visitor', 'buyer', 'owner'],
  },
  {
    address: () => '/api/sales/low-fell-joinery/codes',
    form: { what: 'create', code: 'STRANGER-1', percentOff: '100' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'otherOwner', 'staff'],
  },
  {
    address: () => '/api/sales/low-fell-joinery/sources',
    form: { label: 'of a stranger', kind: 'page' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'otherOwner', 'staff'],
  },
  {
    address: () => '/api/sales/low-fell-joinery/payouts',
    form: { what: 'open' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'editor', 'otherOwner', 'staff'],
  },
  {
    address: () => '/api/office/low-fell-joinery/plans',
    form: { title: 'a plan of a stranger' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'otherOwner', 'staff'],
  },
  {
    address: () => '/api/office/low-fell-joinery/people',
    form: { what: 'invite', email: 'stranger@readers.test', role: 'owner' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'editor', 'otherOwner', 'staff'],
  },
  {
    address: () => `/api/office/plans/${ids.get('[planId]') ?? ''}/prices`,
    form: { currency: 'EUR', personal: '0', workshop: '', pieces: '1' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'editor', 'otherOwner', 'staff'],
  },
  {
    address: () => `/api/office/plans/${ids.get('[planId]') ?? ''}/publish`,
    form: { version: '1', notes: '' },
    strangers: ['visitor', 'buyer', 'bookkeeper', 'otherOwner', 'staff'],
  },
];

test('forms of the house change nothing when strangers send them', async () => {
  const state = () =>
    findValue(`select (select count(*) from codes) || ' ' || (select count(*) from sources) || ' ' || (select count(*) from plans) || ' ' || (select count(*) from imprint_invites where email = 'stranger@readers.test') || ' ' ||
      (select count(*) from licence_offers where price_minor = 0) || ' ' || (select string_agg(state, ',' order by id) from imprints) || ' ' || (select count(*) from imprints where payment_account_id is not null) || ' ' ||
      (select count(*) from plans where state = 'unpublished') as value`);
  const before = await state();
  for (const { address, form, strangers } of forms) {
    for (const person of strangers) {
      const answer = await contexts.get(person)?.post(address(), { form, maxRedirects: 0 });
      expect([303, 401, 403, 404], `${person} on ${address()}`).toContain(answer?.status());
    }
  }
  expect(await state()).toBe(before);
});

test('endpoints that speak JSON refuse strangers', async () => {
  const licence = ids.get('[licenceId]') ?? '';
  const plan = ids.get('[planId]') ?? '';
  const fit = { values: {}, measured: {}, units: 'mm' };
  for (const person of ['visitor', 'otherBuyer', 'owner', 'staff'] as const) {
    const copies = await contexts
      .get(person)
      ?.post(`/api/licences/${licence}/copies`, { data: { fit, paper: 'a4' } });
    expect([401, 403, 404], `${person} orders a copy`).toContain(copies?.status());
  }
  for (const person of ['visitor', 'buyer', 'bookkeeper', 'otherOwner', 'staff'] as const) {
    const draft = await contexts
      .get(person)
      ?.put(`/api/office/plans/${plan}/draft`, { data: { source: 'x', version: 1 } });
    expect([401, 403, 404], `${person} saves a draft`).toContain(draft?.status());
    const proof = await contexts.get(person)?.post(`/api/office/plans/${plan}/proof`, { data: {} });
    expect([401, 403, 404], `${person} asks for a proof`).toContain(proof?.status());
  }
});
