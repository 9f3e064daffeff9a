import { refuse } from './errors.ts';
import { pageOf, slice } from './list.ts';
import type { World } from './world.ts';

type Loose = Record<string, unknown>;
const isObject = (value: unknown): value is Loose => typeof value === 'object' && value !== null;

/** Fields that hold an id but name nothing that the stand-in keeps as an object of its own. */
const NEVER = new Set([
  'id',
  'object',
  'currency',
  'description',
  'status',
  'type',
  'url',
  'client_secret',
  'payment_method',
]);

/** What is left out of an object until it is asked for. */
function included(world: World, parent: Loose, field: string): unknown {
  const id = String(parent['id'] ?? '');
  if (parent['object'] === 'checkout.session' && field === 'line_items') {
    const lines = world.store.get('session_file', id)?.lines ?? [];
    return slice(lines, {}, `/v1/checkout/sessions/${id}/line_items`);
  }
  if (parent['object'] === 'charge' && field === 'refunds') {
    const refunds = world.store.all('refund').filter((refund) => refund.charge === id);
    return pageOf(refunds, {}, `/v1/charges/${id}/refunds`);
  }
  return undefined;
}

function breakdownOf(world: World, sessionId: string): object {
  const file = world.store.get('session_file', sessionId);
  const byRate = new Map<
    string,
    { amount: number; rate: object; taxability_reason: string; taxable_amount: number }
  >();
  for (const tax of file?.taxes ?? []) {
    const key = `${tax.rate.id}`;
    const sum = byRate.get(key);
    byRate.set(key, {
      amount: (sum?.amount ?? 0) + tax.amount,
      rate: tax.rate,
      taxability_reason: 'standard_rated',
      taxable_amount: (sum?.taxable_amount ?? 0) + tax.taxable,
    });
  }
  const discounts = file?.discount
    ? [
        {
          amount: file.discountAmount,
          discount: {
            id: `di_${sessionId.slice(-24)}`,
            object: 'discount',
            checkout_session: sessionId,
            customer: null,
            customer_account: null,
            end: null,
            invoice: null,
            invoice_item: null,
            promotion_code: file.discount.promotionCode,
            source: { coupon: file.discount.coupon, type: 'coupon' },
            start: world.store.get('checkout.session', sessionId)?.created ?? 0,
            subscription: null,
            subscription_item: null,
          },
        },
      ]
    : [];
  return { discounts, taxes: [...byRate.values()] };
}

function refusePath(field: string): never {
  return refuse(`This property cannot be expanded (${field}).`, { param: 'expand' });
}

function expandField(world: World, parent: Loose, path: string[], full: string): void {
  const [field, ...rest] = path;
  if (field === undefined) return;
  if (field === 'total_details' && rest[0] === 'breakdown' && isObject(parent['total_details'])) {
    const details = parent['total_details'];
    details['breakdown'] ??= breakdownOf(world, String(parent['id']));
    if (isObject(details['breakdown'])) expandField(world, details['breakdown'], rest.slice(1), full);
    return;
  }
  const extra = parent[field] === undefined ? included(world, parent, field) : undefined;
  if (extra !== undefined) parent[field] = structuredClone(extra);
  if (!(field in parent) || NEVER.has(field)) refusePath(full);
  const value = parent[field];
  if (typeof value === 'string') {
    const found = world.store.findPublished(value);
    if (!found) refusePath(full);
    parent[field] = structuredClone(found);
  }
  const next = parent[field];
  if (Array.isArray(next)) {
    for (const item of next) if (isObject(item)) expandField(world, item, rest, full);
  } else if (isObject(next)) {
    expandField(world, next, rest, full);
  } else if (value !== null && value !== undefined && typeof value !== 'string') {
    refusePath(full);
  }
}

/** A copy of an answer in which the ids named by `expand` are replaced by their objects. @throws 400 for a path that leads nowhere */
export function expandAnswer(world: World, answer: object, paths: readonly string[]): object {
  const copy: unknown = structuredClone(answer);
  if (!isObject(copy)) return answer;
  for (const path of paths) {
    const parts = path.split('.');
    if (parts.length > 5) {
      refuse(`You cannot expand more than 4 levels of a property. Property: ${path}`, { param: 'expand' });
    }
    expandField(world, copy, parts, path);
  }
  return copy;
}
