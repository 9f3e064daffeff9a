import * as z from 'zod';

/**
 * The settings of a Benchleaf process, read from the environment once and checked before anything else runs.
 * `.env.example` lists every one. A real key in place of a local one switches that stand-in to the real service.
 */
const envSchema = z
  .object({
    NODE_ENV: z.enum(['development', 'test', 'production']).default('development'),
    /** Address and port that the web process listens on. */
    HOST: z.string().default('127.0.0.1'),
    PORT: z.coerce.number().int().min(0).max(65535).default(4400),
    /** The public origin, without a path: links in e-mails, the allowed Host and Origin. */
    SITE_URL: z.url({ protocol: /^https?$/ }).transform((url) => new URL(url).origin),
    /** Addresses of proxies whose X-Forwarded-For is believed, separated by commas. */
    TRUSTED_PROXIES: z
      .string()
      .default('')
      .transform((list) =>
        list
          .split(',')
          .map((part) => part.trim())
          .filter(Boolean),
      ),
    DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/ }),
    DATABASE_POOL: z.coerce.number().int().min(1).max(100).default(10),
    /** Signs sessions and tokens; at least 32 characters. */
    AUTH_SECRET: z.string().min(32),
    /** Endpoint of an S3-compatible store; left out for the vendor's own. */
    S3_ENDPOINT: z.url().optional(),
    S3_REGION: z.string().default('eu-central-1'),
    S3_BUCKET: z.string().min(3).default('benchleaf'),
    S3_ACCESS_KEY_ID: z.string().min(1),
    S3_SECRET_ACCESS_KEY: z.string().min(1),
    SMTP_URL: z.url({ protocol: /^smtps?$/ }),
    MAIL_FROM: z.string().default('Benchleaf <post@benchleaf.test>'),
    STRIPE_SECRET_KEY: z.string().min(1),
    STRIPE_WEBHOOK_SECRET: z.string().min(1),
    /** Secret of the second webhook endpoint, for events of connected accounts, where the real service has one. */
    STRIPE_CONNECT_WEBHOOK_SECRET: z.string().min(1).optional(),
    /** Base address of the payment service's API; left out for the real one. */
    STRIPE_API_BASE: z.url().optional(),
    /** Folder of the built site. */
    BENCHLEAF_DIST: z.string().default('dist/site'),
    LOG_LEVEL: z.enum(['silent', 'error', 'warn', 'info', 'debug']).default('info'),
    /** `yes` lets the local secrets of `npm start` and the demo accounts stand; never set it on a public site. */
    DEMO: z
      .enum(['yes', 'no'])
      .default('no')
      .transform((answer) => answer === 'yes'),
  })
  .superRefine((env, context) => {
    if (env.NODE_ENV !== 'production' || env.DEMO) return;
    const refuse = (path: string, message: string) => {
      context.addIssue({ code: 'custom', path: [path], message });
    };
    if (/local|demo|example|change/i.test(env.AUTH_SECRET))
      refuse('AUTH_SECRET', 'is a local secret; make a random one');
    if (!env.SITE_URL.startsWith('https://')) refuse('SITE_URL', 'must be https in production');
    if (env.STRIPE_API_BASE) refuse('STRIPE_API_BASE', 'points at a stand-in; leave it out in production');
  });

export type Env = z.infer<typeof envSchema>;

/**
 * Reads and checks settings.
 * @throws Error that names every setting at fault, what is wrong with it, and where to look.
 */
export function readEnv(source: Record<string, string | undefined>): Env {
  const filled = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== ''));
  const result = envSchema.safeParse(filled);
  if (result.success) return result.data;
  const faults = result.error.issues.map(
    (issue) => `  ${issue.path.join('.') || 'settings'}: ${issue.message}`,
  );
  throw new Error(
    `Benchleaf cannot start, these settings are wrong (see .env.example):\n${faults.join('\n')}`,
  );
}

/** The settings of this process. */
export const env: Env = readEnv(process.env);
