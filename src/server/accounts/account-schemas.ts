import { dictionary } from '@zxcvbn-ts/language-common';
import * as z from 'zod';
import { PASSWORD_LENGTH } from './auth.ts';

/** Characters that print as nothing, or that turn the text around them. */
const UNSEEN = /[\p{Cc}\u200b-\u200f\u2028-\u202e\u2060-\u2069\ufeff]/u;

/** A person's name, as printed on copies and receipts. */
export const nameSchema = z
  .string()
  .trim()
  .min(1, 'Give your name; it is printed on your copies.')
  .max(100, 'A name may have 100 characters.')
  .refine((name) => !UNSEEN.test(name), 'The name holds characters that cannot be printed.')
  .transform((name) => name.normalize('NFC'));

/** One plain e-mail address, lower-cased; two spellings of one address are one account. */
export const emailSchema = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address may have 254 characters.')
  .pipe(z.email('This is not an e-mail address.'));

/** The passwords that are guessed first: the published list of the most used ones that are long enough for us. */
const commonPasswords = new Set(
  (dictionary['passwords'] as string[]).filter((password) => password.length >= PASSWORD_LENGTH.min),
);

/** A password as typed when signing in: only kept within bounds, so that a huge one costs nothing. */
export const typedPasswordSchema = z
  .string()
  .min(1, 'Type your password.')
  .max(PASSWORD_LENGTH.max, `A password has ${PASSWORD_LENGTH.max} characters at most.`);

/** A new password. Length is what counts; no rules about signs and digits. Nothing is trimmed or cut. */
export const newPasswordSchema = z
  .string()
  .min(PASSWORD_LENGTH.min, `A password needs at least ${PASSWORD_LENGTH.min} characters.`)
  .max(PASSWORD_LENGTH.max, `A password may have ${PASSWORD_LENGTH.max} characters.`)
  .refine(
    (password) => !commonPasswords.has(password.toLowerCase()) && !/^(.)\1*$/u.test(password),
    'This password is among the first that anybody would try. Take another, such as four words of your own.',
  );

/** A secret from a link. */
export const tokenSchema = z.string().min(10).max(2_000);
