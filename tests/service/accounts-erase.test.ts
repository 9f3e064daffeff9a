import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import {
  Account,
  Copy,
  Imprint,
  ImprintMember,
  LedgerAccount,
  LedgerEntry,
  LedgerTransaction,
  Licence,
  Order,
  OrderLine,
  Plan,
  Question,
  Revision,
  SavedFit,
  Session,
  User,
} from '#db/models/index.ts';
import { findActor, type SignedInUser } from '#server/accounts/actor.ts';
import { eraseAccount } from '#server/accounts/erase-account.ts';
import { exportPersonalData } from '#server/accounts/export-personal-data.ts';
import { actAs, codeOf, listMails, makePerson, makeWord, signInAs, type TestPerson } from './people.ts';

afterAll(() => sequelize.close());

/** A person who has bought a plan, sized it, had a copy made and asked a question. */
async function makeBuyer() {
  const person = await makePerson({ name: `Quill ${makeWord()}` });
  const { id: userId, name, email } = person;
  const imprint = await Imprint.create({ slug: makeWord(), name: 'Inkwell Bench', state: 'active' });
  const plan = await Plan.create({ imprintId: imprint.id, slug: makeWord(), title: 'Hall bench' });
  const revision = await Revision.create({ planId: plan.id, source: '' });
  const amounts = { currency: 'EUR', subtotalMinor: 2_400, totalMinor: 2_400 };
  const paid = { state: 'paid', paidAt: new Date(), requestKey: makeWord() } as const;
  const order = await Order.create({ userId, name, email, ...amounts, ...paid });
  const line = await OrderLine.create({
    orderId: order.id,
    planId: plan.id,
    revisionId: revision.id,
    kind: 'personal',
    title: plan.title,
    priceMinor: 2_400,
  });
  const licence = await Licence.create({
    orderLineId: line.id,
    userId,
    planId: plan.id,
    kind: 'personal',
    holderName: name,
  });
  const fit = await SavedFit.create({ userId, planId: plan.id, name: 'Hall, left wall', units: 'mm' });
  await Copy.create({
    licenceId: licence.id,
    revisionId: revision.id,
    fitId: fit.id,
    fit: { values: {}, measured: {}, units: 'mm' },
    units: 'mm',
    paper: 'a4',
    contentKey: 'a'.repeat(64),
  });
  await Question.create({ planId: plan.id, userId, authorName: name, body: 'Does it fit under a sill?' });
  await sequelize.transaction(async (transaction) => {
    const sale = await LedgerTransaction.create(
      { reference: `sale:${line.id}`, kind: 'sale', orderLineId: line.id },
      { transaction },
    );
    for (const [kind, amountMinor] of [
      ['clearing', 2_400],
      ['house', -2_400],
    ] as const) {
      const [account] = await LedgerAccount.findOrCreate({
        where: { kind, imprintId: null, currency: 'EUR' },
        defaults: { kind, currency: 'EUR' },
        transaction,
      });
      const entry = { transactionId: sale.id, accountId: account.id, currency: 'EUR', amountMinor };
      await LedgerEntry.create(entry, { transaction });
    }
  });
  return { person, order, line, licence, plan };
}

async function erase(person: TestPerson, currentPassword = person.password): Promise<Headers> {
  const headers = await signInAs(person);
  const actor = (await findActor(headers)) as SignedInUser;
  await eraseAccount({ actor, currentPassword, headers });
  return headers;
}

/** Every row of every table of ours, as text. */
async function readWholeDatabase(): Promise<string> {
  const rows = await Promise.all(
    Object.values(sequelize.models).map((model) => model.findAll({ raw: true })),
  );
  return JSON.stringify(rows);
}

describe('erasing an account', () => {
  it('leaves the name and the address nowhere', async () => {
    const { person } = await makeBuyer();
    const before = await readWholeDatabase();
    expect(before).toContain(person.name);
    expect(before).toContain(person.email);
    await erase(person);
    const after = await readWholeDatabase();
    expect(after).not.toContain(person.name);
    expect(after).not.toContain(person.email);
  });

  it('keeps the order, its amounts, the licence’s number and the ledger', async () => {
    const { person, order, line, licence } = await makeBuyer();
    await erase(person);
    expect(await Order.findByPk(order.id)).toMatchObject({ number: order.number, totalMinor: 2_400 });
    expect(await Licence.findByPk(licence.id)).toMatchObject({ number: licence.number, state: 'active' });
    const sale = await LedgerTransaction.findOne({ where: { orderLineId: line.id }, rejectOnEmpty: true });
    const entries = await LedgerEntry.findAll({ where: { transactionId: sale.id } });
    expect(entries.map(({ amountMinor }) => amountMinor).sort()).toEqual([-2_400, 2_400]);
  });

  it('makes the copies unreadable, for they carry the name', async () => {
    const { person, licence } = await makeBuyer();
    await erase(person);
    const copies = await Copy.findAll({ where: { licenceId: licence.id } });
    expect(copies).toMatchObject([{ state: 'failed', objectKey: null }]);
  });

  it('ends every session and every way in', async () => {
    const person = await makePerson();
    const elsewhere = await signInAs(person);
    await erase(person);
    expect(await findActor(elsewhere)).toEqual({ kind: 'visitor' });
    expect(await codeOf(signInAs(person))).toBe('WRONG_PASSWORD');
    expect(await Session.count({ where: { userId: person.id } })).toBe(0);
    expect(await Account.count({ where: { userId: person.id } })).toBe(0);
    expect(await User.findByPk(person.id)).toMatchObject({ name: 'Erased reader', emailVerified: false });
  });

  it('frees the address for a new account', async () => {
    const person = await makePerson();
    await erase(person);
    expect(await listMails(person.email)).toEqual([]);
    expect(await User.count({ where: { email: person.email } })).toBe(0);
  });

  it('asks for the password', async () => {
    const person = await makePerson();
    expect(await codeOf(erase(person, 'a wrong guess'))).toBe('BAD_INPUT');
    expect(await codeOf(signInAs(person))).toBe('none');
  });

  it('is refused to the only owner of an imprint, and open once there is another', async () => {
    const [owner, heir] = [await makePerson(), await makePerson()];
    const imprint = await Imprint.create({ slug: makeWord(), name: 'Two Saws', state: 'active' });
    await ImprintMember.create({ imprintId: imprint.id, userId: owner.id, role: 'owner' });
    expect(await codeOf(erase(owner))).toBe('CONFLICT');
    await ImprintMember.create({ imprintId: imprint.id, userId: heir.id, role: 'owner' });
    expect(await codeOf(erase(owner))).toBe('none');
    expect(await ImprintMember.count({ where: { imprintId: imprint.id } })).toBe(1);
  });
});

describe('the file of one’s own data', () => {
  it('holds what is kept about a person, and nothing secret or of others', async () => {
    const { person, order, licence } = await makeBuyer();
    const other = await makeBuyer();
    const data = await exportPersonalData(await actAs(person));
    expect(data).toMatchObject({
      person: { name: person.name, email: person.email },
      orders: [{ number: order.number, totalMinor: 2_400, lines: [{ title: 'Hall bench' }] }],
      licences: [{ number: licence.number, holderName: person.name }],
      fits: [{ name: 'Hall, left wall' }],
      copies: [{ units: 'mm', paper: 'a4' }],
      questions: [{ body: 'Does it fit under a sill?' }],
    });
    const text = JSON.stringify(data);
    expect(text).not.toContain(other.person.name);
    const sessions = await Session.findAll({ where: { userId: person.id } });
    const account = await Account.findOne({ where: { userId: person.id }, rejectOnEmpty: true });
    for (const secret of [...sessions.map(({ token }) => token), account.password ?? ''])
      expect(text).not.toContain(secret);
  });
});
