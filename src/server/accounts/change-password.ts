import { tellOfNewPassword } from './account-emails.ts';
import type { SignedInUser } from './actor.ts';
import { auth } from './auth.ts';
import { askAuth } from './ask-auth.ts';
import { checkPassword } from './check-password.ts';
import { forgetEmailChange } from './pending-email-change.ts';

/**
 * Changes the password of a signed-in person. Every other session ends and this browser gets a new one; a move to
 * another address that is under way is called off; the person is told by e-mail.
 * @returns the cookies to set
 * @throws AppError TOO_MANY, BAD_INPUT on `currentPassword`
 */
export async function changePassword(options: {
  actor: SignedInUser;
  currentPassword: string;
  newPassword: string;
  headers: Headers;
}): Promise<{ cookies: string[] }> {
  const { actor, currentPassword, newPassword, headers } = options;
  await checkPassword({ userId: actor.id, password: currentPassword, headers, field: 'currentPassword' });
  const { headers: answer } = await askAuth(() =>
    auth.api.changePassword({
      body: { currentPassword, newPassword, revokeOtherSessions: true },
      headers,
      returnHeaders: true,
    }),
  );
  await forgetEmailChange(actor.id);
  await tellOfNewPassword(actor);
  return { cookies: answer.getSetCookie() };
}
