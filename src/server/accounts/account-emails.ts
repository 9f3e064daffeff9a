import { createHash } from 'node:crypto';
import type { Transaction } from 'sequelize';
import { env } from '../env.ts';
import { writeEmail } from '../mail/write-email.ts';

interface Addressee {
  id: string;
  name: string;
  email: string;
}

const link = (path: string, token: string) => `${env.SITE_URL}${path}?token=${encodeURIComponent(token)}`;
/** Names a mail by its link without keeping the link. */
const digest = (token: string) => createHash('sha256').update(token).digest('hex').slice(0, 32);
const to = ({ name, email }: Addressee) => ({ name, address: email });

/** The link that confirms an address: a new account's, or the one that an account moves to. Valid for a day. */
export function writeVerificationEmail(
  user: Addressee,
  token: string,
  transaction?: Transaction,
): Promise<void> {
  const email = {
    kind: 'verify-email',
    reference: `verify-email:${digest(token)}`,
    to: to(user),
    subject: 'Confirm your e-mail address',
    paragraphs: [
      'An account at Benchleaf was given this e-mail address. Open the link and confirm that it is yours; it holds for one day.',
      'If it was not you who gave it, do nothing: without your confirmation nobody can sign in with this address.',
    ],
    action: { label: 'Confirm this address', url: link('/verify-email', token) },
  };
  return writeEmail(email, transaction);
}

/** The link to set a new password. Valid for an hour and used up by the first use. */
export function writeResetEmail(user: Addressee, token: string): Promise<void> {
  return writeEmail({
    kind: 'reset-password',
    reference: `reset-password:${digest(token)}`,
    to: to(user),
    subject: 'Set a new password',
    paragraphs: [
      'Somebody, most likely you, asked for a new password for your account at Benchleaf. The link holds for one hour and works once.',
      'If it was not you, do nothing: your password stays as it is.',
    ],
    action: { label: 'Set a new password', url: link('/reset-password', token) },
  });
}

/** Tells the owner of an address that it was used to sign up again; the page itself does not say so. Once an hour at most. */
export function tellOfExistingAccount(user: Addressee): Promise<void> {
  return writeEmail({
    kind: 'existing-account',
    reference: `existing-account:${user.id}:${new Date().toISOString().slice(0, 13)}`,
    to: to(user),
    subject: 'You have an account already',
    paragraphs: [
      'Somebody, most likely you, tried to make an account at Benchleaf with this e-mail address. There is one already: sign in, or set a new password if the old one is lost.',
      'If it was not you, do nothing: nothing was changed.',
    ],
    action: { label: 'Sign in', url: `${env.SITE_URL}/sign-in` },
  });
}

/** Tells the old address that the account is about to move to another one, while that can still be stopped. */
export function tellOldAddress(user: Addressee, newEmail: string, transaction: Transaction): Promise<void> {
  const email = {
    kind: 'email-change',
    reference: `email-change:${user.id}:${digest(newEmail)}:${new Date().toISOString().slice(0, 16)}`,
    to: to(user),
    subject: 'Your account is moving to another e-mail address',
    paragraphs: [
      `Somebody who knows your password asked to move your account at Benchleaf from this address to ${newEmail}. It moves as soon as the new address is confirmed.`,
      'If it was not you, set a new password now: that signs everybody out and stops the move.',
    ],
    action: { label: 'Set a new password', url: `${env.SITE_URL}/forgot-password` },
  };
  return writeEmail(email, transaction);
}

/** Tells the old address that the account has moved. */
export function tellOldAddressOfMove(user: Addressee, transaction: Transaction): Promise<void> {
  const email = {
    kind: 'email-changed',
    reference: `email-changed:${user.id}:${new Date().toISOString()}`,
    to: to(user),
    subject: 'Your account has moved to another e-mail address',
    paragraphs: [
      'Your account at Benchleaf has moved to another e-mail address, which was confirmed just now. This one no longer signs in.',
      'If it was not you, write to us by answering this mail.',
    ],
  };
  return writeEmail(email, transaction);
}

/** Tells a person that the password of the account was changed. */
export function tellOfNewPassword(user: Addressee): Promise<void> {
  return writeEmail({
    kind: 'password-changed',
    reference: `password-changed:${user.id}:${new Date().toISOString()}`,
    to: to(user),
    subject: 'Your password was changed',
    paragraphs: [
      'The password of your account at Benchleaf was changed just now, and every other browser was signed out.',
      'If it was not you, set a new one now and write to us.',
    ],
    action: { label: 'Set a new password', url: `${env.SITE_URL}/forgot-password` },
  });
}
