import { betterAuth } from 'better-auth';
import type { Model, ModelStatic } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { Account, RateLimit, Session, User, Verification } from '#db/models/index.ts';
import { env } from '../env.ts';
import { log } from '../log.ts';
import {
  tellOfExistingAccount,
  tellOfNewPassword,
  writeResetEmail,
  writeVerificationEmail,
} from './account-emails.ts';
import { CLIENT_ADDRESS_HEADER } from './client-address.ts';
import { forgetEmailChange } from './pending-email-change.ts';
import { sequelizeAdapter } from './sequelize-adapter.ts';

type AnyModel = ModelStatic<Model<Record<string, unknown>, Record<string, unknown>>>;

const models: Record<string, unknown> = {
  user: User,
  session: Session,
  account: Account,
  verification: Verification,
  rateLimit: RateLimit,
};

/** Shortest and longest password in characters; long ones are hashed whole, never cut. */
export const PASSWORD_LENGTH = { min: 8, max: 128 } as const;

const DAY = 24 * 60 * 60;

/**
 * Accounts, sessions and passwords, by a kept library over our own tables. Its HTTP handler is not mounted: our endpoints
 * parse, count tries and call `auth.api`, so nothing of it can be reached that we do not offer.
 */
export const auth = betterAuth({
  appName: 'Benchleaf',
  baseURL: env.SITE_URL,
  secret: env.AUTH_SECRET,
  trustedOrigins: [env.SITE_URL],
  database: sequelizeAdapter({
    sequelize,
    findModel: (name) => {
      const model = models[name];
      if (!model) throw new Error(`the sign-in library asks for an unknown model ${name}`);
      return model as AnyModel;
    },
  }),
  user: {
    // None of these is ever taken from what a browser sends.
    additionalFields: {
      role: { type: 'string', input: false, required: false },
      units: { type: 'string', input: false, required: false },
      erasedAt: { type: 'date', input: false, required: false },
    },
  },
  session: {
    expiresIn: 30 * DAY,
    // A session ends thirty days after it began; a page view writes nothing.
    disableSessionRefresh: true,
    cookieCache: { enabled: false },
  },
  // A leaked row of the table must not be a working link.
  verification: { storeIdentifier: 'hashed' },
  emailAndPassword: {
    enabled: true,
    requireEmailVerification: true,
    minPasswordLength: PASSWORD_LENGTH.min,
    maxPasswordLength: PASSWORD_LENGTH.max,
    resetPasswordTokenExpiresIn: 60 * 60,
    revokeSessionsOnPasswordReset: true,
    sendResetPassword: ({ user, token }) => writeResetEmail(user, token),
    // Whoever opened the link reads this mailbox: that confirms the address.
    onPasswordReset: async ({ user }) => {
      await User.update({ emailVerified: true }, { where: { id: user.id }, fields: ['emailVerified'] });
      // A move to another address may be what the reset is meant to stop.
      await forgetEmailChange(user.id);
      await tellOfNewPassword(user);
    },
    onExistingUserSignUp: ({ user }) => tellOfExistingAccount(user),
  },
  emailVerification: {
    sendOnSignUp: true,
    sendOnSignIn: true,
    expiresIn: DAY,
    sendVerificationEmail: ({ user, token }) => writeVerificationEmail(user, token),
  },
  // Our endpoints count tries by `takeToken`. This stands guard for the day that someone mounts the handler.
  rateLimit: { enabled: true, storage: 'database' },
  advanced: {
    cookiePrefix: 'benchleaf',
    useSecureCookies: env.SITE_URL.startsWith('https://'),
    database: { generateId: 'uuid', joins: true },
    ipAddress: { ipAddressHeaders: [CLIENT_ADDRESS_HEADER] },
  },
  telemetry: { enabled: false },
  // Only the message: what else the library hands over may hold an address.
  logger: { level: 'error', log: (_level, message) => log.error({ from: 'sign-in' }, message) },
});
