import type { RequestListener } from 'node:http';
import path from 'node:path';
import { pathToFileURL } from 'node:url';
import * as z from 'zod';
import { sequelize } from '#db/client.ts';
import { env } from './env.ts';
import { createFront } from './front/create-front.ts';
import { log } from './log.ts';

/** Where the site was built to; `npm start` and the tests build into folders of their own. */
const builtFolder = path.resolve(env.BENCHLEAF_DIST);

const entry: unknown = await import(pathToFileURL(path.join(builtFolder, 'server', 'entry.mjs')).href);
const { handler } = z
  .object({ handler: z.custom<RequestListener>((value) => typeof value === 'function') })
  .parse(entry);

const site = new URL(env.SITE_URL);
const server = createFront({
  host: site.host,
  origin: site.origin,
  handler,
  staticFolder: path.join(builtFolder, 'client'),
  trustedProxies: env.TRUSTED_PROXIES,
  formTargets: env.STRIPE_API_BASE
    ? [new URL(env.STRIPE_API_BASE).origin]
    : ['https://checkout.stripe.com', 'https://connect.stripe.com'],
  checkHealth: async () => {
    await sequelize.query('select 1');
  },
  log,
});

server.listen(env.PORT, env.HOST, () => {
  log.info({ port: env.PORT }, 'web is listening');
});

/** Lets what is being answered finish, takes nothing new, and goes. */
function stop(): void {
  server.close(() => {
    void sequelize.close().finally(() => process.exit(0));
  });
  server.closeIdleConnections();
  setTimeout(() => process.exit(0), 8_000).unref();
}
process.once('SIGTERM', stop);
process.once('SIGINT', stop);
