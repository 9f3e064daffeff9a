import Stripe from 'stripe';
import { env } from '../env.ts';

function connectionOf(base: string | undefined): Partial<Stripe.StripeConfig> {
  if (!base) return {};
  const url = new URL(base);
  return { host: url.hostname, port: url.port || 443, protocol: url.protocol === 'http:' ? 'http' : 'https' };
}

/** The payment service, by its official SDK; only the host differs between the local stand-in and the real one. */
export const payments = new Stripe(env.STRIPE_SECRET_KEY, {
  telemetry: false,
  timeout: 15_000,
  maxNetworkRetries: 2,
  ...connectionOf(env.STRIPE_API_BASE),
});
