import { randomBytes } from 'node:crypto';
import { PaymentsError, refuseMissing } from './errors.ts';
import type { Store } from './store.ts';
import type { Settings, Tables } from './tables.ts';

/** The API version whose shapes the stand-in speaks; the one of the SDK in package.json. */
export const API_VERSION = '2026-10-28.endive';

/** Everything a handler works with. Handlers run to their end without waiting, so that each call is one step. */
export interface World {
  store: Store;
  /** Address under which browsers reach the hosted pages. */
  publicUrl: string;
  /** Connected account in whose name the call is made, or null for the platform. */
  account: string | null;
  request: { id: string | null; idempotency_key: string | null };
  /** Called for each new event, to send it to the endpoints that want it. */
  onEvent: (eventId: string) => void;
}

const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789';

/** A fresh id in the published manner: prefix, underscore, letters and digits. */
export function makeId(prefix: string, length = 24): string {
  const letters = [...randomBytes(length)].map((byte) => ALPHABET[byte % ALPHABET.length]);
  return `${prefix}_${letters.join('')}`;
}

const DEFAULTS: Settings = { clockOffset: 0, balanceDelayMs: 0, payoutOutcome: 'paid' };

export function settingsOf(world: World): Settings {
  return world.store.get('settings', 'settings') ?? DEFAULTS;
}

/** The stand-in's time in whole seconds; the control API may set it ahead. */
export function now(world: World): number {
  return Math.floor(Date.now() / 1000) + settingsOf(world).clockOffset;
}

/** Writes an event and hands it on for delivery. The object is kept as it is at this moment. */
export function emit(world: World, type: string, object: object, account: string | null = null): void {
  const id = makeId('evt');
  world.store.put('event', id, {
    id,
    object: 'event',
    ...(account ? { account } : {}),
    api_version: API_VERSION,
    created: now(world),
    data: { object: structuredClone(object) },
    livemode: false,
    pending_webhooks: 0,
    request: { ...world.request },
    type,
  });
  world.onEvent(id);
}

/** The object of an address. @throws 404 resource_missing */
export function required<K extends keyof Tables>(
  world: World,
  table: K,
  id: string,
  param = 'id',
  status = 404,
): Tables[K] {
  const kind =
    table === 'checkout.session'
      ? 'checkout.session'
      : table.replace('_', ' ').replace('payment intent', 'payment_intent');
  return world.store.get(table, id) ?? refuseMissing(kind, id, param, status);
}

/** Metadata after an update: an empty value takes a key out, empty metadata takes all out. */
export function mergeMetadata(
  old: Record<string, string> | null | undefined,
  change: Record<string, string> | '' | undefined,
): Record<string, string> {
  if (change === undefined) return { ...old };
  if (change === '') return {};
  return Object.fromEntries(Object.entries({ ...old, ...change }).filter(([, value]) => value !== ''));
}

/** Id of the account's book in which an object stands; null for the platform's. */
export function ownerOf(world: World, id: string): string | null {
  return world.store.get('owner', id)?.account ?? null;
}

/** Puts an object into the book of the account in whose name the call is made. */
export function setOwner(world: World, id: string, account: string | null): void {
  if (account) world.store.put('owner', id, { account });
}

/** Refuses a call in the name of an account that is not connected. */
export function requireAccount(world: World, account: string): void {
  if (world.store.get('account', account)) return;
  throw new PaymentsError(403, {
    type: 'invalid_request_error',
    code: 'account_invalid',
    message: `The provided key does not have access to account '${account}' (or that account does not exist).`,
  });
}
