import type Stripe from 'stripe';

/** A published type as it is stored and sent: what may be expanded is an id, decimals are text. */
type Flat<T> = { [K in keyof T]: FlatField<T[K]> };
type FlatField<V> = Stripe.Decimal extends V
  ? Exclude<V, Stripe.Decimal> | string
  : string extends V
    ? Exclude<V, { id: string }>
    : V;

export type Price = Flat<Stripe.Price>;
export type LineItem = Omit<Stripe.LineItem, 'price'> & { price: Price };
export type Session = Flat<Omit<Stripe.Checkout.Session, 'line_items'>>;
export type PaymentIntent = Flat<Stripe.PaymentIntent>;
export type Charge = Flat<Omit<Stripe.Charge, 'refunds'>>;
export type BalanceTransaction = Flat<Stripe.BalanceTransaction>;
export type Refund = Flat<Stripe.Refund>;
export type Transfer = Flat<Stripe.Transfer>;
export type TransferReversal = Flat<Stripe.TransferReversal>;
export type Payout = Flat<Stripe.Payout>;
export type Dispute = Flat<Stripe.Dispute>;
export type Coupon = Stripe.Coupon;
export type PromotionCode = Flat<Stripe.PromotionCode> & {
  promotion: { type: 'coupon'; coupon: string };
};

/** An event in the published envelope; its object is a snapshot. */
export interface EventRecord {
  id: string;
  object: 'event';
  account?: string;
  api_version: string;
  created: number;
  data: { object: object; previous_attributes?: Record<string, unknown> };
  livemode: false;
  pending_webhooks: number;
  request: { id: string | null; idempotency_key: string | null };
  type: string;
}

/** What the stand-in knows of a session beside the published object. */
export interface SessionFile {
  lines: LineItem[];
  /** Taxes that are included in the prices or come on top, by line; filled when the country is known. */
  taxes: { amount: number; taxable: number; rate: Stripe.TaxRate }[];
  discount: { coupon: string; promotionCode: string | null } | null;
  discountAmount: number;
  url: string;
  intentData: {
    description: string | null;
    metadata: Record<string, string>;
    transferGroup: string | null;
    receiptEmail: string | null;
    statementDescriptor: string | null;
    captureMethod: 'automatic' | 'automatic_async';
  };
  /** What was typed before the buyer was sent to authenticate; never more than a test card's number. */
  attempt: { email: string; name: string; country: string; card: string } | null;
}

interface EndpointFile {
  secret: string;
  isConnect: boolean;
}

export interface Delivery {
  id: string;
  event: string;
  type: string;
  endpoint: string;
  state: 'held' | 'pending' | 'delivered' | 'dropped' | 'failed';
  /** Copies still to be sent; more than one where a repeat was asked for. */
  copies: number;
  tries: number;
  /** The last tries only, the newest at the end. */
  attempts: { at: string; status: number | null; error: string | null }[];
  /** Real time in milliseconds at which it is due. */
  dueAtMs: number;
}

export interface WebhookRule {
  id: string;
  action: 'delay' | 'drop' | 'repeat' | 'reorder' | 'hold';
  /** Kinds of event; empty for all. */
  types: string[];
  /** How many deliveries the rule still meets; null for ever. */
  times: number | null;
  delayMs: number;
  count: number;
}

export interface CallFault {
  id: string;
  method: string;
  /** Path with `*` for any one part, such as `/v1/checkout/sessions/*`. */
  path: string;
  times: number;
  kind: 'status' | 'cut-before' | 'cut-after' | 'delay';
  status: number;
  error: { type?: string | undefined; code?: string | undefined; message?: string | undefined };
  delayMs: number;
}

interface KeptAnswer {
  fingerprint: string;
  status: number;
  body: string;
  requestId: string;
}

export interface Settings {
  /** Seconds that the stand-in's clock is ahead of the real one. */
  clockOffset: number;
  /** Milliseconds until a charge has its balance transaction; the published API may take a while. */
  balanceDelayMs: number;
  /** What becomes of the next payouts. */
  payoutOutcome: 'paid' | 'failed';
}

/** Every table of the stand-in, by the published name of its objects where there is one. */
export interface Tables {
  customer: Flat<Stripe.Customer>;
  product: Flat<Stripe.Product>;
  price: Price;
  coupon: Coupon;
  promotion_code: PromotionCode;
  'checkout.session': Session;
  payment_intent: PaymentIntent;
  charge: Charge;
  balance_transaction: BalanceTransaction;
  refund: Refund;
  dispute: Dispute;
  account: Stripe.Account;
  transfer: Transfer;
  transfer_reversal: TransferReversal;
  payout: Payout;
  event: EventRecord;
  webhook_endpoint: Stripe.WebhookEndpoint;
  session_file: SessionFile;
  endpoint_file: EndpointFile;
  account_link: { account: string; expiresAt: number; refreshUrl: string; returnUrl: string };
  /** Account whose book a balance transaction, payout or destination payment stands in; missing for the platform's own. */
  owner: { account: string };
  delivery: Delivery;
  webhook_rule: WebhookRule;
  call_fault: CallFault;
  kept_answer: KeptAnswer;
  settings: Settings;
}
