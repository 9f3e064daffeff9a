import { APIError } from 'better-auth/api';
import { AppError, type ErrorCode } from '../errors.ts';

const translations: Record<string, { code: ErrorCode; detail: string }> = {
  INVALID_EMAIL_OR_PASSWORD: {
    code: 'WRONG_PASSWORD',
    detail: 'E-mail or password do not match. Check both, or set a new password.',
  },
  INVALID_PASSWORD: { code: 'BAD_INPUT', detail: 'This is not your current password.' },
  EMAIL_NOT_VERIFIED: {
    code: 'EMAIL_UNVERIFIED',
    detail: 'Your e-mail address is not confirmed yet. We have sent the link again; open it, then sign in.',
  },
  INVALID_TOKEN: {
    code: 'TOKEN_SPENT',
    detail: 'This link has been used or has run out. Ask for a new one.',
  },
  TOKEN_EXPIRED: { code: 'TOKEN_SPENT', detail: 'This link has run out. Ask for a new one.' },
  USER_NOT_FOUND: {
    code: 'TOKEN_SPENT',
    detail: 'This link has been used or has run out. Ask for a new one.',
  },
};

/**
 * Calls the sign-in library and puts its refusals into our own words and codes; `field` is the form field that they mark.
 * @throws AppError WRONG_PASSWORD, EMAIL_UNVERIFIED, TOKEN_SPENT, SIGN_IN_REQUIRED or BAD_INPUT; anything else as it was
 */
export async function askAuth<Result>(run: () => Promise<Result>, field?: string): Promise<Result> {
  try {
    return await run();
  } catch (cause) {
    if (!(cause instanceof APIError)) throw cause;
    const code: unknown = cause.body?.code;
    const translation = typeof code === 'string' ? translations[code] : undefined;
    if (translation) {
      const { detail } = translation;
      throw new AppError(translation.code, {
        detail,
        ...(field ? { fields: { [field]: detail } } : {}),
        cause,
      });
    }
    if (cause.statusCode === 401) throw new AppError('SIGN_IN_REQUIRED', { cause });
    throw cause;
  }
}
