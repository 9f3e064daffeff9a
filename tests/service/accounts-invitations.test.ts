import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import { Imprint, ImprintInvite, ImprintMember, Plan, ProofInvite } from '#db/models/index.ts';
import { acceptInvitation } from '#server/accounts/accept-invitation.ts';
import { findActor, type ImprintRole } from '#server/accounts/actor.ts';
import { changeMemberRole } from '#server/accounts/change-member-role.ts';
import { findInvitation } from '#server/accounts/find-invitation.ts';
import { inviteMember } from '#server/accounts/invite-member.ts';
import { listMembers } from '#server/accounts/list-members.ts';
import { removeMember } from '#server/accounts/remove-member.ts';
import { withdrawInvite } from '#server/accounts/withdraw-invite.ts';
import { inviteProofBuilder } from '#server/publishing/invite-proof-builder.ts';
import { withdrawProofInvite } from '#server/publishing/withdraw-proof-invite.ts';
import {
  actAs,
  browserHeaders,
  codeOf,
  makePerson,
  makeWord,
  readMailedToken,
  signInAs,
  type TestPerson,
} from './people.ts';

afterAll(() => sequelize.close());

async function makeImprint(people: Partial<Record<ImprintRole, TestPerson>>) {
  const word = makeWord();
  const imprint = await Imprint.create({ slug: word, name: `Imprint ${word}`, state: 'active' });
  for (const [role, person] of Object.entries(people) as [ImprintRole, TestPerson][])
    await ImprintMember.create({ imprintId: imprint.id, userId: person.id, role });
  return imprint;
}

async function invite(owner: TestPerson, imprintId: string, email: string, role: ImprintRole = 'editor') {
  const { inviteId } = await inviteMember({
    actor: await actAs(owner),
    imprintId,
    email,
    role,
    headers: browserHeaders(),
  });
  return { inviteId, secret: await readMailedToken(email, 'imprint-invite') };
}

const accept = async (person: TestPerson, secret: string) =>
  acceptInvitation({ actor: await actAs(person), secret, headers: browserHeaders() });

describe('inviting people to an imprint', () => {
  it('makes a member with the role that was offered, on the next request', async () => {
    const [owner, guest] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner });
    const headers = await signInAs(guest);
    const { secret } = await invite(owner, imprint.id, guest.email, 'bookkeeper');
    expect(await findInvitation(secret)).toMatchObject({ imprint: imprint.name, role: 'bookkeeper' });
    await accept(guest, secret);
    const actor = await findActor(headers);
    expect(actor.kind === 'user' && actor.imprints.get(imprint.id)).toBe('bookkeeper');
  });

  it('is the owner’s alone', async () => {
    const [owner, editor, bookkeeper, stranger] = await Promise.all([
      makePerson(),
      makePerson(),
      makePerson(),
      makePerson(),
    ]);
    const imprint = await makeImprint({ owner, editor, bookkeeper });
    for (const person of [editor, bookkeeper, stranger])
      expect(await codeOf(invite(person, imprint.id, 'guest@readers.test'))).toBe('FORBIDDEN');
    expect(await ImprintInvite.count({ where: { imprintId: imprint.id } })).toBe(0);
  });

  it('gives nothing to somebody the link was passed on to', async () => {
    const [owner, guest, finder] = [await makePerson(), await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner });
    const { secret } = await invite(owner, imprint.id, guest.email);
    expect(await codeOf(accept(finder, secret))).toBe('FORBIDDEN');
    expect(await codeOf(accept(guest, secret))).toBe('none');
  });

  it('works once, also for a double click', async () => {
    const [owner, guest] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner });
    const { secret } = await invite(owner, imprint.id, guest.email);
    const actor = await actAs(guest);
    const codes = await Promise.all(
      Array.from({ length: 5 }, () => codeOf(acceptInvitation({ actor, secret, headers: browserHeaders() }))),
    );
    expect(codes.sort()).toEqual([...Array<string>(4).fill('TOKEN_SPENT'), 'none']);
    expect(await ImprintMember.count({ where: { imprintId: imprint.id, userId: guest.id } })).toBe(1);
  });

  it('runs out, and can be withdrawn, and a newer one replaces an older', async () => {
    const [owner, guest] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner });
    const first = await invite(owner, imprint.id, guest.email);
    const second = await invite(owner, imprint.id, guest.email);
    expect(await codeOf(accept(guest, first.secret))).toBe('TOKEN_SPENT');
    await ImprintInvite.update({ expiresAt: new Date(Date.now() - 1) }, { where: { id: second.inviteId } });
    expect(await codeOf(accept(guest, second.secret))).toBe('TOKEN_SPENT');
    const third = await invite(owner, imprint.id, guest.email);
    const actor = await actAs(owner);
    await withdrawInvite({ actor, imprintId: imprint.id, inviteId: third.inviteId });
    expect(await codeOf(accept(guest, third.secret))).toBe('TOKEN_SPENT');
  });

  it('keeps no secret that opens anything', async () => {
    const owner = await makePerson();
    const imprint = await makeImprint({ owner });
    const { secret } = await invite(owner, imprint.id, `${makeWord()}@readers.test`);
    expect(JSON.stringify(await ImprintInvite.findAll())).not.toContain(secret);
  });

  it('does not invite somebody who belongs to it already', async () => {
    const [owner, editor] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner, editor });
    expect(await codeOf(invite(owner, imprint.id, editor.email))).toBe('CONFLICT');
  });
});

describe('the people of an imprint', () => {
  it('are listed to the owner, with the open invitations', async () => {
    const [owner, editor] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner, editor });
    await invite(owner, imprint.id, 'open@readers.test', 'bookkeeper');
    const listed = await listMembers({ actor: await actAs(owner), imprintId: imprint.id });
    expect(listed.members.map(({ email, role }) => `${role} ${email}`).sort()).toEqual([
      `editor ${editor.email}`,
      `owner ${owner.email}`,
    ]);
    expect(listed.invites).toMatchObject([{ email: 'open@readers.test', role: 'bookkeeper' }]);
    const peek = listMembers({ actor: await actAs(editor), imprintId: imprint.id });
    expect(await codeOf(peek)).toBe('FORBIDDEN');
  });

  it('lose every right with the request after they are taken out', async () => {
    const [owner, editor] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner, editor });
    const headers = await signInAs(editor);
    await removeMember({ actor: await actAs(owner), imprintId: imprint.id, userId: editor.id });
    expect(await findActor(headers)).toMatchObject({ kind: 'user', imprints: new Map() });
  });

  it('may leave by themselves, but may not take others out', async () => {
    const [owner, editor, bookkeeper] = [await makePerson(), await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner, editor, bookkeeper });
    const actor = await actAs(editor);
    const take = removeMember({ actor, imprintId: imprint.id, userId: bookkeeper.id });
    expect(await codeOf(take)).toBe('FORBIDDEN');
    expect(await codeOf(removeMember({ actor, imprintId: imprint.id, userId: editor.id }))).toBe('none');
  });

  it('always have an owner among them', async () => {
    const owner = await makePerson();
    const imprint = await makeImprint({ owner });
    const actor = await actAs(owner);
    const own = { actor, imprintId: imprint.id, userId: owner.id };
    expect(await codeOf(removeMember(own))).toBe('CONFLICT');
    expect(await codeOf(changeMemberRole({ ...own, role: 'editor' }))).toBe('CONFLICT');
  });

  it('have an owner left when two owners take each other out at the same moment', async () => {
    const [one, two] = [await makePerson(), await makePerson()];
    const imprint = await makeImprint({ owner: one });
    await ImprintMember.create({ imprintId: imprint.id, userId: two.id, role: 'owner' });
    const [actorOne, actorTwo] = [await actAs(one), await actAs(two)];
    await Promise.allSettled([
      removeMember({ actor: actorOne, imprintId: imprint.id, userId: two.id }),
      removeMember({ actor: actorTwo, imprintId: imprint.id, userId: one.id }),
    ]);
    expect(await ImprintMember.count({ where: { imprintId: imprint.id, role: 'owner' } })).toBe(1);
  });
});

describe('inviting somebody to prove a plan', () => {
  async function makePlan(owner: TestPerson) {
    const imprint = await makeImprint({ owner });
    return Plan.create({ imprintId: imprint.id, slug: makeWord(), title: 'A bench for the hall' });
  }
  const ask = async (owner: TestPerson, planId: string, email: string) =>
    inviteProofBuilder({ actor: await actAs(owner), planId, email, headers: browserHeaders() });

  it('opens the draft to that person, until it is withdrawn', async () => {
    const [owner, builder] = [await makePerson(), await makePerson()];
    const plan = await makePlan(owner);
    const headers = await signInAs(builder);
    const { inviteId } = await ask(owner, plan.id, builder.email);
    await accept(builder, await readMailedToken(builder.email, 'proof-invite'));
    const proving = await findActor(headers);
    expect(proving.kind === 'user' && [...proving.proofPlans]).toEqual([plan.id]);
    await withdrawProofInvite({ actor: await actAs(owner), inviteId });
    const after = await findActor(headers);
    expect(after.kind === 'user' && [...after.proofPlans]).toEqual([]);
  });

  it('can be renewed after it was withdrawn, and the old link stays dead', async () => {
    const [owner, builder] = [await makePerson(), await makePerson()];
    const plan = await makePlan(owner);
    const { inviteId } = await ask(owner, plan.id, builder.email);
    const first = await readMailedToken(builder.email, 'proof-invite');
    await withdrawProofInvite({ actor: await actAs(owner), inviteId });
    expect(await codeOf(accept(builder, first))).toBe('TOKEN_SPENT');
    await ask(owner, plan.id, builder.email);
    expect(await codeOf(accept(builder, first))).toBe('TOKEN_SPENT');
    const second = await readMailedToken(builder.email, 'proof-invite');
    expect(await codeOf(accept(builder, second))).toBe('none');
    expect(await codeOf(ask(owner, plan.id, builder.email))).toBe('CONFLICT');
  });

  it('is hidden from people outside the imprint', async () => {
    const [owner, stranger] = [await makePerson(), await makePerson()];
    const plan = await makePlan(owner);
    expect(await codeOf(ask(stranger, plan.id, 'guest@readers.test'))).toBe('NOT_FOUND');
    expect(await ProofInvite.count({ where: { planId: plan.id } })).toBe(0);
  });
});
