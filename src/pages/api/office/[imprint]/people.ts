import * as z from 'zod';
import { paths } from '#lib/paths.ts';
import { changeMemberRole } from '#server/accounts/change-member-role.ts';
import { inviteMember } from '#server/accounts/invite-member.ts';
import { removeMember } from '#server/accounts/remove-member.ts';
import { withdrawInvite } from '#server/accounts/withdraw-invite.ts';
import { formEndpoint } from '#server/http/endpoint.ts';
import { requireImprint } from '#server/sales/require-imprint.ts';

const schema = z.discriminatedUnion('what', [
  z.object({
    what: z.literal('invite'),
    email: z.email('Write a whole e-mail address.').max(254).toLowerCase(),
    role: z.enum(['owner', 'editor', 'bookkeeper']),
  }),
  z.object({
    what: z.literal('role'),
    userId: z.uuid(),
    role: z.enum(['owner', 'editor', 'bookkeeper']),
  }),
  z.object({ what: z.literal('remove'), userId: z.uuid() }),
  z.object({ what: z.literal('withdraw'), inviteId: z.uuid() }),
]);

/** Invites somebody to an imprint, gives a person another role, removes one, or withdraws an invitation. */
export const POST = formEndpoint({
  schema,
  back: (context) => paths.officePeople(context.params['imprint'] ?? ''),
  run: async ({ actor, input, context }) => {
    const slug = context.params['imprint'] ?? '';
    const to = paths.officePeople(slug);
    const { id: imprintId } = await requireImprint(actor, slug, 'members:manage');
    if (input.what === 'invite') {
      await inviteMember({
        actor,
        imprintId,
        email: input.email,
        role: input.role,
        headers: context.request.headers,
      });
      return { to, notice: `An invitation is on its way to ${input.email}.` };
    }
    if (input.what === 'role') {
      await changeMemberRole({ actor, imprintId, userId: input.userId, role: input.role });
      return { to, notice: 'The role is changed.' };
    }
    if (input.what === 'remove') {
      await removeMember({ actor, imprintId, userId: input.userId });
      return { to, notice: 'That person no longer works for the imprint.' };
    }
    await withdrawInvite({ actor, imprintId, inviteId: input.inviteId });
    return { to, notice: 'The invitation no longer holds.' };
  },
});
